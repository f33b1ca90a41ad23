/*
 * What a circuit comes to, in closed form. Ohms and farads in, hertz out; ideal amplifiers.
 */

export interface PoleFigures {
  readonly f0Hz: number
  /** Null for order 1. */
  readonly q: number | null
}

export interface SecondOrderFigures extends PoleFigures {
  readonly q: number
}

/** R and C, low-pass and high-pass alike: f0 = 1/(2πRC). */
export const rcFigures = (ohms: number, farads: number): PoleFigures => ({
  f0Hz: 1 / (2 * Math.PI * ohms * farads),
  q: null,
})

/**
 * Unity-gain Sallen–Key low-pass, H = 1 / (s²·R1·R2·C1·C2 + s·C2·(R1 + R2) + 1): R1 from the input to a node, R2 on to the amplifier's input,
 * C1 from the node to the output, C2 from the amplifier's input to ground (R. P. Sallen & E. L. Key, IRE Trans. Circuit Theory 2(1), 1955).
 */
export function sallenKeyLowPass(r1: number, r2: number, c1: number, c2: number): SecondOrderFigures {
  const seconds = Math.sqrt(r1 * c1) * Math.sqrt(r2 * c2)
  return { f0Hz: 1 / (2 * Math.PI * seconds), q: seconds / (c2 * (r1 + r2)) }
}

/**
 * Its dual, H = s²·R1·R2·C1·C2 / (s²·R1·R2·C1·C2 + s·R1·(C1 + C2) + 1): C1 from the input to a node, C2 on to the amplifier's input, R1 from
 * the node to the output, R2 from the amplifier's input to ground.
 */
export function sallenKeyHighPass(r1: number, r2: number, c1: number, c2: number): SecondOrderFigures {
  const seconds = Math.sqrt(r1 * c1) * Math.sqrt(r2 * c2)
  return { f0Hz: 1 / (2 * Math.PI * seconds), q: seconds / (r1 * (c1 + c2)) }
}

/**
 * Multiple-feedback low-pass of gain −1, H = −1 / (s²·R2·R3·C1·C2 + s·C2·(R2 + R3 + R2·R3/R1) + 1) with R1 = R2: R1 from the input to a node,
 * R2 from the output back to it, R3 on to the inverting input, C1 from the node to ground, C2 from the output to the inverting input
 * (textbook; U. Tietze & C. Schenk, Electronic Circuits, active filters).
 */
export function multipleFeedbackLowPass(r1And2: number, r3: number, c1: number, c2: number): SecondOrderFigures {
  const seconds = Math.sqrt(r1And2 * c1) * Math.sqrt(r3 * c2)
  return { f0Hz: 1 / (2 * Math.PI * seconds), q: seconds / (c2 * (r1And2 + 2 * r3)) }
}

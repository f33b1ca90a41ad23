import { array, literalOf, zeroOf } from './c-parts'
import type { CoefficientSet } from './coefficient-set'

const foldingWords = {
  even: 'Equal taps may share a multiplication: add the samples of taps k and N - 1 - k first. That changes the last bits.',
  odd: 'Opposite taps may share a multiplication: subtract the samples of taps k and N - 1 - k first. That changes the last bits.',
  none: null,
} as const

/**
 * Taps in direct form over a ring of the last inputs. The sum goes from the oldest sample to the newest in two stretches, so that no index is
 * folded inside the loops and the order of the additions doesn't depend on where the ring begins.
 */
export function tapsCode(set: CoefficientSet): string[] {
  const { name, numbers, options } = set
  if (numbers.structure !== 'taps') return []
  const type = options.number
  const count = `${name.toUpperCase()}_TAPS`
  const folding = foldingWords[numbers.symmetry]
  return [
    `#define ${count} ${numbers.taps.length}`,
    '',
    '/* h0 ... hN, N + 1 of them; there is no feedback. */',
    ...(folding === null ? [] : [`/* ${folding} */`]),
    ...array(`static const ${type} ${name}_taps[${count}]`, numbers.taps.map(literalOf(set))),
    '',
    '/* A ring of the last inputs; the next one goes to the place of the oldest, x[at]. */',
    `typedef struct { ${type} x[${count}]; size_t at; } ${name}_state;`,
    '',
    '/* Starts settled on a constant input of that level. */',
    `static inline void ${name}_settle(${name}_state *state, ${type} level)`,
    '{',
    '  size_t k;',
    `  for (k = 0; k < ${count}; k++) state->x[k] = level;`,
    '  state->at = 0;',
    '}',
    '',
    '/* Starts from rest. */',
    `static inline void ${name}_reset(${name}_state *state)`,
    '{',
    `  ${name}_settle(state, ${zeroOf(type)});`,
    '}',
    '',
    '/* Filters n samples; in and out may be the same array. The state carries over to the next call. */',
    `static inline void ${name}_process(${name}_state *state, const ${type} *in, ${type} *out, size_t n)`,
    '{',
    '  size_t i, j, k;',
    `  ${type} *x = state->x;`,
    '  for (i = 0; i < n; i++) {',
    `    ${type} sum = ${zeroOf(type)};`,
    '    x[state->at] = in[i];',
    `    state->at = state->at + 1 < ${count} ? state->at + 1 : 0;`,
    `    k = ${count};`,
    `    for (j = state->at; j < ${count}; j++) sum += ${name}_taps[--k] * x[j];`,
    `    for (j = 0; j < state->at; j++) sum += ${name}_taps[--k] * x[j];`,
    '    out[i] = sum;',
    '  }',
    '}',
    '',
  ]
}

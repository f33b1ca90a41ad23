import { aboutLines } from './about'
import { array, commentLines, literalOf, zeroOf } from './c-parts'
import { tapsCode } from './c-taps'
import type { CoefficientSet } from './coefficient-set'
import { cComment, cString } from './escape'
import { cLiteral } from './numbers'

/*
 * One self-contained C99 header: the numbers, a state that the caller owns, and the reference function that proves a port. Nothing
 * global, nothing allocated; the test vector and its function stand behind a macro, so that firmware doesn't carry them.
 */
export function cHeaderFile(set: CoefficientSet): string {
  const upper = set.name.toUpperCase()
  const { version } = set.source
  return [
    '/*',
    ' * Polewright coefficient set',
    ' *',
    ...aboutLines(set).flatMap(({ key, text }) => commentLines(`${key}: ${cComment(text)}`)),
    ' */',
    `#ifndef ${upper}_H`,
    `#define ${upper}_H`,
    '',
    '#include <stddef.h>',
    '',
    `#define ${upper}_VERSION ${version.number}`,
    `#define ${upper}_SHA256 ${cString(version.checksum)}`,
    `#define ${upper}_SAMPLING_RATE_HZ ${cLiteral(set.sampleRateHz, 'double', 'decimal')}`,
    ...(set.numbers.structure === 'taps' ? tapsCode(set) : [...cascade(set), ...ratio(set)]),
    ...selfTest(set),
    `#endif /* ${upper}_H */`,
    '',
  ].join('\n')
}

function cascade(set: CoefficientSet): string[] {
  const { name, numbers, options } = set
  if (numbers.structure !== 'sections') return []
  const type = options.number
  const literal = literalOf(set)
  const upper = name.toUpperCase()
  const count = `${upper}_SECTIONS`
  const sign = options.feedback === 'subtract' ? '-' : '+'
  const zero = zeroOf(type)
  const rows = numbers.sections.map(({ b0, b1, b2, a1, a2 }) => `  {${[b0, b1, b2, a1, a2].map(literal).join(', ')}}`)
  const steady = numbers.steadyState.map((state) => `  {${state.map(literal).join(', ')}}`)
  return [
    `#define ${count} ${numbers.sections.length}`,
    '',
    '/* A row for each section: b0, b1, b2, a1, a2. */',
    `static const ${type} ${name}_sections[${count}][5] = {`,
    rows.join(',\n'),
    '};',
    '',
    '/* State of every section after an endless input of 1. */',
    `static const ${type} ${name}_steady_state[${count}][2] = {`,
    steady.join(',\n'),
    '};',
    '',
    `typedef struct { ${type} s[${count}][2]; } ${name}_state;`,
    '',
    '/* Starts from rest. */',
    `static inline void ${name}_reset(${name}_state *state)`,
    '{',
    '  size_t k;',
    `  for (k = 0; k < ${count}; k++) {`,
    `    state->s[k][0] = ${zero};`,
    `    state->s[k][1] = ${zero};`,
    '  }',
    '}',
    '',
    '/* Starts settled on a constant input of that level. */',
    `static inline void ${name}_settle(${name}_state *state, ${type} level)`,
    '{',
    '  size_t k;',
    `  for (k = 0; k < ${count}; k++) {`,
    `    state->s[k][0] = ${name}_steady_state[k][0] * level;`,
    `    state->s[k][1] = ${name}_steady_state[k][1] * level;`,
    '  }',
    '}',
    '',
    '/* Filters n samples; in and out may be the same array. The state carries over to the next call. */',
    `static inline void ${name}_process(${name}_state *state, const ${type} *in, ${type} *out, size_t n)`,
    '{',
    '  size_t i, k;',
    '  for (i = 0; i < n; i++) {',
    `    ${type} value = in[i];`,
    `    for (k = 0; k < ${count}; k++) {`,
    `      const ${type} *c = ${name}_sections[k];`,
    `      ${type} *s = state->s[k];`,
    `      const ${type} x = value;`,
    `      const ${type} y = c[0] * x + s[0];`,
    `      s[0] = c[1] * x + s[1] ${sign} c[3] * y;`,
    `      s[1] = c[2] * x ${sign} c[4] * y;`,
    '      value = y;',
    '    }',
    '    out[i] = value;',
    '  }',
    '}',
    '',
  ]
}

function ratio(set: CoefficientSet): string[] {
  const { name, numbers, options } = set
  if (numbers.structure !== 'ratio') return []
  const type = options.number
  const literal = literalOf(set)
  const upper = name.toUpperCase()
  const order = `${upper}_ORDER`
  const sign = options.feedback === 'subtract' ? '-' : '+'
  return [
    `#define ${order} ${numbers.a.length}`,
    '',
    '/* b0 ... bN */',
    ...array(`static const ${type} ${name}_b[${order} + 1]`, numbers.b.map(literal)),
    '',
    '/* a1 ... aN; the coefficient of y[n] is 1 and is not listed. */',
    ...array(`static const ${type} ${name}_a[${order}]`, numbers.a.map(literal)),
    '',
    '/* State after an endless input of 1. */',
    ...array(`static const ${type} ${name}_steady_state[${order}]`, numbers.steadyState.map(literal)),
    '',
    `typedef struct { ${type} s[${order}]; } ${name}_state;`,
    '',
    '/* Starts from rest. */',
    `static inline void ${name}_reset(${name}_state *state)`,
    '{',
    '  size_t k;',
    `  for (k = 0; k < ${order}; k++) state->s[k] = ${zeroOf(type)};`,
    '}',
    '',
    '/* Starts settled on a constant input of that level. */',
    `static inline void ${name}_settle(${name}_state *state, ${type} level)`,
    '{',
    '  size_t k;',
    `  for (k = 0; k < ${order}; k++) state->s[k] = ${name}_steady_state[k] * level;`,
    '}',
    '',
    '/* Filters n samples; in and out may be the same array. The state carries over to the next call. */',
    `static inline void ${name}_process(${name}_state *state, const ${type} *in, ${type} *out, size_t n)`,
    '{',
    '  size_t i, k;',
    `  ${type} *s = state->s;`,
    '  for (i = 0; i < n; i++) {',
    `    const ${type} x = in[i];`,
    `    const ${type} y = ${name}_b[0] * x + s[0];`,
    `    for (k = 1; k < ${order}; k++)`,
    `      s[k - 1] = ${name}_b[k] * x + s[k] ${sign} ${name}_a[k - 1] * y;`,
    `    s[${order} - 1] = ${name}_b[${order}] * x ${sign} ${name}_a[${order} - 1] * y;`,
    '    out[i] = y;',
    '  }',
    '}',
    '',
  ]
}

function selfTest(set: CoefficientSet): string[] {
  const { name, options, testVector } = set
  const type = options.number
  const literal = literalOf(set)
  const upper = name.toUpperCase()
  const count = `${upper}_TEST_LENGTH`
  return [
    `/* Define ${upper}_SELF_TEST before including this file to have the test vector and the function that runs it. */`,
    `#ifdef ${upper}_SELF_TEST`,
    `#define ${count} ${testVector.input.length}`,
    '',
    ...array(`static const ${type} ${name}_test_input[${count}]`, testVector.input.map(literal)),
    '',
    ...array(`static const ${type} ${name}_test_output[${count}]`, testVector.output.map(literal)),
    '',
    '/*',
    ' * Largest difference from the expected output. Zero where every operation is rounded to its type; compilers that fuse a multiply',
    ' * with an add, or keep wider intermediates, change the last bits (with GCC and Clang: -ffp-contract=off, no -ffast-math).',
    ' */',
    `static inline ${type} ${name}_self_test(void)`,
    '{',
    `  ${name}_state state;`,
    `  ${type} output[${count}];`,
    `  ${type} worst = ${zeroOf(type)};`,
    '  size_t i;',
    `  ${name}_reset(&state);`,
    `  ${name}_process(&state, ${name}_test_input, output, ${count});`,
    `  for (i = 0; i < ${count}; i++) {`,
    `    const ${type} difference = output[i] - ${name}_test_output[i];`,
    `    const ${type} size = difference < 0 ? -difference : difference;`,
    '    if (size != size) return size;',
    '    if (size > worst) worst = size;',
    '  }',
    '  return worst;',
    '}',
    `#endif /* ${upper}_SELF_TEST */`,
    '',
  ]
}

import { describe, expect, it } from 'vitest'
import { Failure, createTally } from '../runner/tally.mjs'
import { countReport } from '../runner/vitest.mjs'

const quiet = () => createTally(() => {})
const file = (status: string, ...tests: string[]) => ({
  name: '/x/a.test.ts',
  status,
  assertionResults: tests.map((each, at) => ({ status: each, fullName: `test ${at}` })),
})

describe('the count of a test run', () => {
  it('is the last line, alone, with the totals of all runners', async () => {
    const tally = quiet()
    await tally.check('one', () => Promise.resolve(1))
    await tally.check('two', () => Promise.reject(new Failure('no')))
    tally.add('many', { passed: 40, failed: 2, failures: ['a', 'b'] })
    const { text, code } = tally.close()
    expect(text.endsWith('\n41 passed, 3 failed\n')).toBe(true)
    expect(text).toContain('  two\n  many: a\n  many: b\n')
    expect(code).toBe(1)
  })

  it('passes only when something ran and nothing failed', async () => {
    expect(quiet().close()).toMatchObject({ code: 1 })
    const tally = quiet()
    await tally.check('one', () => Promise.resolve(1))
    expect(tally.close()).toEqual({ text: '\n1 passed, 0 failed\n', code: 0 })
  })
})

describe('the report of vitest', () => {
  it('counts each test', () => {
    expect(countReport({ testResults: [file('passed', 'passed', 'passed')] }, 0)).toMatchObject({
      passed: 2,
      failed: 0,
    })
    expect(countReport({ testResults: [file('failed', 'passed', 'failed')] }, 1)).toMatchObject({
      passed: 1,
      failed: 1,
    })
  })

  it('counts as failures: skipped tests, files that could not be loaded, files without a test', () => {
    expect(countReport({ testResults: [file('passed', 'passed', 'skipped', 'todo')] }, 0)).toMatchObject({
      passed: 1,
      failed: 2,
    })
    expect(countReport({ testResults: [file('failed')] }, 1)).toMatchObject({ passed: 0, failed: 1 })
    expect(countReport({ testResults: [file('failed', 'passed')] }, 1)).toMatchObject({ passed: 1, failed: 1 })
    expect(countReport({ testResults: [file('passed')] }, 0)).toMatchObject({ passed: 0, failed: 1 })
  })

  it('counts as a failure: no test at all, and a runner that ends badly although all passed', () => {
    expect(countReport({ testResults: [] }, 0)).toMatchObject({ passed: 0, failed: 1 })
    expect(countReport({ testResults: [file('passed', 'passed')] }, 1)).toMatchObject({ passed: 1, failed: 1 })
  })
})

import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { dirname, join, relative } from 'node:path'
import { root } from '../../lib/launch/places.mjs'
import { run } from '../../lib/launch/run.mjs'
import { toolEnvironment } from './checks.mjs'

/**
 * Runs vitest and counts from its report. A test file that could not be loaded, a skipped test and a runner that broke down are failures.
 *
 * @param {{ args?: readonly string[], env?: NodeJS.ProcessEnv, report: string, timeoutSeconds: number }} options
 * @returns {Promise<{ passed: number, failed: number, failures: string[] }>}
 */
export async function runVitest({ args = [], env = {}, report, timeoutSeconds }) {
  mkdirSync(dirname(report), { recursive: true })
  rmSync(report, { force: true })
  const script = join(root, 'node_modules/vitest/vitest.mjs')
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`]
  const done = await run(process.execPath, [script, 'run', ...args, ...reporters], {
    cwd: root,
    env: toolEnvironment(env),
    endable: true,
    timeoutSeconds,
    onOutput: (text) => void process.stdout.write(text),
  })
  if (!existsSync(report)) return { passed: 0, failed: 1, failures: [`vitest broke down (code ${done.code})`] }
  return countReport(JSON.parse(readFileSync(report, 'utf8')), done.code)
}

/**
 * @typedef {object} VitestReport
 * @property {{ name: string, status: string, message?: string, assertionResults: { status: string, fullName: string }[] }[]} testResults
 */

/**
 * @param {VitestReport} report
 * @param {number} code how the runner ended
 */
export function countReport({ testResults }, code) {
  let passed = 0
  /** @type {string[]} */
  const failures = []
  for (const file of testResults) {
    const name = relative(root, file.name)
    for (const { status, fullName } of file.assertionResults) {
      if (status === 'passed') passed += 1
      else failures.push(`${name}: ${fullName}${status === 'failed' ? '' : ` (${status})`}`)
    }
    const fileFailed = file.status === 'failed' && file.assertionResults.every(({ status }) => status !== 'failed')
    if (fileFailed) failures.push(`${name}: could not be run`)
    else if (file.assertionResults.length === 0) failures.push(`${name}: holds no test`)
  }
  if (passed === 0 && failures.length === 0) failures.push('no test was found')
  if (code !== 0 && failures.length === 0) failures.push(`vitest ended with code ${code} although no test failed`)
  return { passed, failed: failures.length, failures }
}

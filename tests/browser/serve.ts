import type { TestProject } from 'vitest/node'
import { openTestCluster } from '../helpers/test-cluster.mjs'
import { ensureTestBuild, startTestServer } from '../helpers/test-server.mjs'
import { demandChromium } from '../runner/tools.mjs'

declare module 'vitest' {
  interface ProvidedContext {
    baseUrl: string
    mailbox: string
    chromium: string
  }
}

/** The server that the browser tests meet: TEST_BASE_URL’s, which the test run has started, else one for this run alone. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  project.provide('chromium', await demandChromium())
  const { TEST_BASE_URL: given, MAILBOX_DIR: mailbox = '', POLEWRIGHT_DIST: dist = '.next-test' } = process.env
  if (given) {
    project.provide('baseUrl', given)
    project.provide('mailbox', mailbox)
    return () => Promise.resolve()
  }
  await ensureTestBuild(dist)
  const cluster = await openTestCluster()
  const server = await startTestServer({ adminUrl: cluster.adminUrl, dist }).catch(async (error: unknown) => {
    await cluster.release()
    throw error
  })
  project.provide('baseUrl', server.origin)
  project.provide('mailbox', server.mailbox)
  return async () => {
    await server.stop()
    await cluster.release()
  }
}

import type { TestProject } from 'vitest/node'
import { makeTemplate, openTestCluster } from './test-cluster.mjs'

declare module 'vitest' {
  interface ProvidedContext {
    adminUrl: string
    templateName: string
  }
}

/** Before any test that needs a database: a running server and one migrated database to copy. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { adminUrl, release } = await openTestCluster()
  const template = await makeTemplate(adminUrl).catch(async (error: unknown) => {
    await release()
    throw error
  })
  project.provide('adminUrl', adminUrl)
  project.provide('templateName', template.name)
  return async () => {
    await template.drop()
    await release()
  }
}

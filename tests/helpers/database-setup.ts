import { afterAll } from 'vitest'
import { createTestDatabase } from './database'

// Runs before the imports of each test file, so that code under test finds its database wherever it first looks.
const database = await createTestDatabase()
process.env.DATABASE_URL = database.url
process.env.APP_ORIGIN ??= 'http://127.0.0.1:3000'
// Refusals are what many tests are about; their log lines would bury the results.
process.env.LOG_LEVEL ??= 'silent'

// The first hook registered is the last to run: the file's own hooks close their connections before.
afterAll(() => database.drop())

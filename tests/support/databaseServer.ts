/** Runs once before the API tests: one MariaDB for all of them. Each test file makes its own schema in it. */
import type { TestProject } from 'vitest/node'
import { startMariadb } from './mariadb.ts'

declare module 'vitest' {
  interface ProvidedContext {
    databaseServerUrl: string
  }
}

export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const server = await startMariadb()
  project.provide('databaseServerUrl', server.url)
  return () => server.stop()
}

import type { TestProject } from 'vitest/node';
import { startTestMariadb } from './test-mariadb.js';

declare module 'vitest' {
  export interface ProvidedContext {
    databaseServerUrl: string;
  }
}

/** Global set-up of the projects that need a database: one MariaDB for the whole test run. */
export async function setup(project: TestProject): Promise<() => Promise<void>> {
  const server = await startTestMariadb();
  project.provide('databaseServerUrl', server.url);
  return server.stop;
}

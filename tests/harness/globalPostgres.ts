/** One throwaway PostgreSQL server for a whole run of the integration tests. */
import type { TestProject } from 'vitest/node';
import { startPostgres } from '../../scripts/postgres.mjs';

declare module 'vitest' {
  export interface ProvidedContext {
    /** Address of the server's first database; each test file makes its own beside it. */
    postgresUrl: string;
  }
}

export default async function globalPostgres(project: TestProject): Promise<() => Promise<void>> {
  const server = await startPostgres({ ephemeral: true });
  project.provide('postgresUrl', server.url);
  return () => server.stop();
}

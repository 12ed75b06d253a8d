import { newTestDatabase, type TestDatabase } from '../../scripts/lib/harness.mjs';
import { testServer } from './testServer';

export type { TestDatabase };

/**
 * A migrated database of this file's own, copied from the run's template, with the names of its two roles.
 * Drop it in afterAll, once the pools on it are closed.
 */
export function createTestDatabase(): Promise<TestDatabase> {
  const server = testServer();
  return newTestDatabase(server, { template: server.template });
}

import type { TestServer } from '../../scripts/lib/harness.mjs';

/** The variable through which the global set-up tells the test processes where to make databases. */
export const testServerVariable = 'BENCHBELL_TEST_SERVER';

/** The server this run makes its databases on, and the migrated database they are copied from. */
export function testServer(): TestServer & { template: string } {
  const given = process.env[testServerVariable];
  if (!given) {
    throw new Error('No test server: run this file in a project with tests/support/globalSetup.ts.');
  }
  return JSON.parse(given) as TestServer & { template: string };
}

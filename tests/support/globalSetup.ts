import { migrateUp } from '#server/lib/migrator';
import {
  markAsTemplate,
  newTestDatabase,
  openTestServer,
  releaseCluster,
} from '../../scripts/lib/harness.mjs';
import { testServerVariable } from './testServer';

/**
 * Runs once before the files of a project that need PostgreSQL: starts the cluster and migrates one database,
 * of which each file gets a copy.
 */
export async function setup(): Promise<() => Promise<void>> {
  const server = await openTestServer();
  const template = await newTestDatabase(server);
  const { url: databaseUrl, appRole, ownerRole } = template;
  await migrateUp({ databaseUrl, appRole, ownerRole });
  await markAsTemplate(server, template.name);
  process.env[testServerVariable] = JSON.stringify({ ...server, template: template.name });
  return async () => {
    await template.drop();
    await releaseCluster();
  };
}

// What tests written in TypeScript take from here; the types are in harness.d.mts.
export { ensureClientBuilt } from './build.mjs';
export { appRole, ownerRole, root } from './checkout.mjs';
export { releaseCluster } from './cluster.mjs';
export { testPorts } from './environment.mjs';
export { prepareCheckout } from './prepare.mjs';
export { migrate, seedDemo } from './serverCommands.mjs';
export { planStack, spawnFakes, spawnWeb, spawnWorker, startStack } from './stack.mjs';
export { markAsTemplate, newTestDatabase, openTestServer } from './testDatabases.mjs';

import { root } from './lib/checkout.mjs';
import { releaseCluster } from './lib/cluster.mjs';
import { failWith } from './lib/failure.mjs';
import { say } from './lib/progress.mjs';
import { endRun, readRun } from './lib/runState.mjs';

async function main() {
  process.chdir(root);
  const run = readRun();
  const ended = run ? await endRun(run) : { parent: false, left: 0 };
  // Also what a killed start left: a cluster that nobody uses any more.
  const stopped = await releaseCluster();
  say(ended.parent || ended.left || stopped ? 'Benchbell has ended.' : 'Benchbell was not running.');
}

main().catch(failWith);

import { chromiumMissing, ensureChromium } from './lib/chromium.mjs';
import { root } from './lib/checkout.mjs';
import { releaseCluster, ensureCluster } from './lib/cluster.mjs';
import { Failure, failWith } from './lib/failure.mjs';
import { prepareCheckout } from './lib/prepare.mjs';
import { say } from './lib/progress.mjs';
import { browserStage, checkStage, vitestStage } from './lib/stages.mjs';

async function browser() {
  if (await ensureChromium()) return browserStage();
  say(chromiumMissing);
  return { passed: 0, failed: 1 };
}

const stages = {
  check: checkStage,
  unit: vitestStage('unit', ['unit', 'unit-dom']),
  api: vitestStage('api', ['api']),
  browser,
  faults: vitestStage('faults', ['faults']),
  long: vitestStage('long', ['long']),
};
let interrupted = false;
const needsPostgres = ['api', 'browser', 'faults', 'long'];

/** The stages a command line asks for: all but the long one, that alone with --long, or those named. */
function chosenStages(args) {
  if (args.includes('--long')) return ['long'];
  const unknown = args.filter((name) => !stages[name]);
  if (unknown.length) {
    throw new Failure(`Unknown stage ${unknown.join(', ')}: choose from ${Object.keys(stages).join(', ')}.`);
  }
  return args.length ? args : Object.keys(stages).filter((name) => name !== 'long');
}

async function runStage(name) {
  say(`\n=== ${name} ===`);
  const since = performance.now();
  const counts = await stages[name]();
  const line = `${name}: ${counts.passed} passed, ${counts.failed} failed, ${((performance.now() - since) / 1000).toFixed(1)} s`;
  say(`\n--- ${line}`);
  return { ...counts, line };
}

function summarize(results) {
  say('\nStages');
  for (const { line } of results) say(`  ${line}`);
  const total = (key) => results.reduce((sum, result) => sum + result[key], 0);
  say(`${total('passed')} passed, ${total('failed')} failed`);
  return total('failed') === 0 && total('passed') > 0;
}

async function main() {
  process.chdir(root);
  const names = chosenStages(process.argv.slice(2));
  await prepareCheckout();
  // Held for the whole run, so that the stages do not each start and stop it.
  if (names.some((name) => needsPostgres.includes(name)) && !process.env.DATABASE_URL) await ensureCluster();
  const results = [];
  try {
    for (const name of names) {
      if (interrupted) break;
      results.push(await runStage(name));
    }
  } finally {
    await releaseCluster();
  }
  const good = summarize(results);
  process.exitCode = good && !interrupted ? 0 : 1;
}

// The stages share our terminal and end by themselves at Ctrl-C; we stay to give the cluster back.
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => (interrupted = true));

main().catch(failWith);

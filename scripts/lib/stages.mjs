import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { stateDir } from './checkout.mjs';
import { runInForeground } from './serverCommands.mjs';

const bin = (name) => join('node_modules', '.bin', name);
const resultFile = (name) => join(stateDir, 'results', `${name}.json`);

/** Passed and failed of a Vitest report; a file that could not even be loaded is a failure too. */
export function countVitest(report) {
  const broken = report.testResults.filter(
    (file) => file.status === 'failed' && file.assertionResults.length === 0,
  );
  return { passed: report.numPassedTests, failed: report.numFailedTests + broken.length };
}

/** Passed and failed of a Playwright report; one that passed only at a second try has failed. */
export function countPlaywright(report) {
  const { expected, unexpected, flaky } = report.stats;
  return { passed: expected, failed: unexpected + flaky + (report.errors?.length ?? 0) };
}

/** A stage whose program failed has at least one failure, whatever its report says. */
export function withExitCode(counts, code) {
  return code !== 0 && counts.failed === 0 ? { ...counts, failed: 1 } : counts;
}

function readReport(name, count) {
  const path = resultFile(name);
  return existsSync(path) ? count(JSON.parse(readFileSync(path, 'utf8'))) : { passed: 0, failed: 0 };
}

function clearReport(name) {
  mkdirSync(join(stateDir, 'results'), { recursive: true });
  rmSync(resultFile(name), { force: true });
}

/** Runs Vitest over some of its projects. */
export function vitestStage(name, projects) {
  return async () => {
    clearReport(name);
    const output = ['--reporter=default', '--reporter=json', `--outputFile.json=${resultFile(name)}`];
    const chosen = projects.map((project) => `--project=${project}`);
    const env = { ...process.env, TZ: 'UTC', NODE_ENV: 'test' };
    const code = await runInForeground(bin('vitest'), ['run', ...chosen, ...output], { env });
    return withExitCode(readReport(name, countVitest), code);
  };
}

/** Runs the browser tests. */
export async function browserStage() {
  clearReport('browser');
  const env = {
    ...process.env,
    TZ: 'UTC',
    NODE_ENV: 'test',
    PLAYWRIGHT_JSON_OUTPUT_NAME: resultFile('browser'),
  };
  const code = await runInForeground(bin('playwright'), ['test', '--reporter=list,json'], { env });
  return withExitCode(readReport('browser', countPlaywright), code);
}

/** Format, lint and types, at once since each keeps only one core busy; each counts as one. */
export async function checkStage() {
  const names = ['check:format', 'check:lint', 'check:types'];
  const codes = await Promise.all(names.map((name) => runInForeground('npm', ['run', '--silent', name])));
  const passed = codes.filter((code) => code === 0).length;
  return { passed, failed: codes.length - passed };
}

import { existsSync } from 'node:fs';
import { isRoot } from './checkout.mjs';
import { aptInstall, hasProgram } from './debian.mjs';
import { step } from './progress.mjs';

const usual = '/usr/bin/chromium';

/** True when there is a Chromium to test with; root gets it from Debian, others only a sentence. */
export async function ensureChromium(env = process.env) {
  if (existsSync(env.CHROMIUM_PATH ?? usual)) return true;
  if (env.CHROMIUM_PATH || !isRoot || !hasProgram('apt-get')) return false;
  // A font of the system's own, for text before the app's fonts have come.
  await step('Installing Chromium (apt-get)', () => aptInstall(['chromium', 'fonts-dejavu-core']));
  return existsSync(usual);
}

/** What to do about a missing Chromium. */
export const chromiumMissing =
  'The browser tests need Chromium: run "sudo apt-get install chromium", or set CHROMIUM_PATH to one.';

import { existsSync, readdirSync, renameSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { clusterHome, isRoot } from './checkout.mjs';
import { aptInstall, aptUnpack, forbidMainCluster, hasProgram, missing } from './debian.mjs';
import { Failure } from './failure.mjs';
import { step } from './progress.mjs';

const oldest = 15;

/** The newest version among folder names that is recent enough, or undefined. */
export function newestVersion(names) {
  const versions = names.map(Number).filter((version) => version >= oldest);
  return versions.length ? Math.max(...versions) : undefined;
}

function programsBelow(prefix) {
  const base = join(prefix, 'usr', 'lib', 'postgresql');
  if (!existsSync(base)) return undefined;
  const usable = readdirSync(base).filter((name) => existsSync(join(base, name, 'bin', 'initdb')));
  const version = newestVersion(usable);
  return version === undefined
    ? undefined
    : { bin: join(base, String(version), 'bin'), env: libraryPath(prefix) };
}

/** Unpacked libraries are not where the loader looks; tell it. */
function libraryPath(prefix) {
  if (prefix === '/') return {};
  const folders = ['usr/lib', 'lib'].flatMap((part) => {
    const base = join(prefix, part);
    if (!existsSync(base)) return [];
    return [
      base,
      ...readdirSync(base)
        .filter((name) => name.endsWith('-linux-gnu'))
        .map((name) => join(base, name)),
    ];
  });
  return { LD_LIBRARY_PATH: folders.join(':') };
}

const unpacked = join(clusterHome, 'postgresql');

async function install() {
  if (!hasProgram('apt-get')) throw new Failure(missing('postgresql'));
  if (isRoot) {
    forbidMainCluster();
    return step('Installing PostgreSQL (apt-get)', () => aptInstall(['postgresql', 'postgresql-client']));
  }
  // Unpacked beside and moved when whole, so that a broken download is not taken for an installation.
  const fresh = `${unpacked}.new`;
  rmSync(fresh, { recursive: true, force: true });
  await step('Unpacking PostgreSQL into your home', () => aptUnpack(`postgresql-${oldest}`, fresh));
  rmSync(unpacked, { recursive: true, force: true });
  renameSync(fresh, unpacked);
}

/** Finds PostgreSQL's programs, installing them first when there are none: { bin, env }. */
export async function ensurePrograms() {
  const found = programsBelow('/') ?? programsBelow(unpacked);
  if (found) return found;
  await install();
  const programs = programsBelow('/') ?? programsBelow(unpacked);
  if (!programs) {
    throw new Failure(
      `PostgreSQL ${oldest} or newer is needed: run "sudo apt-get install postgresql" and try again.`,
    );
  }
  return programs;
}

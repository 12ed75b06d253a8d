import { existsSync, mkdirSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { delimiter, join } from 'node:path';
import { Failure } from './failure.mjs';
import { capture, runLogged } from './progress.mjs';

/** True when the program is on the path. */
export function hasProgram(name, path = process.env.PATH ?? '') {
  return path.split(delimiter).some((folder) => existsSync(join(folder, name)));
}

/** Installs Debian packages as root, without questions. */
export async function aptInstall(packages) {
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' };
  await runLogged('apt', 'apt-get', ['-q', 'update'], { env });
  await runLogged('apt', 'apt-get', ['-q', 'install', '-y', '--no-install-recommends', ...packages], { env });
}

/** Keeps Debian's PostgreSQL package from making and starting a cluster of its own on 5432. */
export function forbidMainCluster(folder = '/etc/postgresql-common/createcluster.d') {
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, 'benchbell.conf'), 'create_main_cluster = false\n');
}

/** Package names in `apt-cache depends --recurse` that carry programs or libraries PostgreSQL loads. */
export function neededPackages(dependsOutput, installed) {
  // LLVM is only for just-in-time compilation, which we switch off, and is by far the largest.
  const wanted = /^(postgresql(-client)?-\d+|lib(?!llvm|perl|python|clang)[\w.+-]+)$/;
  const names = dependsOutput.split('\n').filter((line) => wanted.test(line));
  return [...new Set(names)].filter((name) => !installed.has(name));
}

/**
 * Unpacks a Debian package and the libraries it lacks below `target` without being root: apt with lists of
 * our own, since an ordinary account may not refresh the system's.
 */
export async function aptUnpack(name, target) {
  if (!hasProgram('apt-get') || !hasProgram('dpkg')) throw new Failure(missing(name));
  const own = join(target, 'apt');
  mkdirSync(join(own, 'lists', 'partial'), { recursive: true });
  mkdirSync(join(own, 'cache', 'archives', 'partial'), { recursive: true });
  mkdirSync(join(own, 'debs'), { recursive: true });
  const options = ['-q', '-o', `Dir::State::Lists=${own}/lists`, '-o', `Dir::Cache=${own}/cache`];
  await runLogged('apt', 'apt-get', [...options, 'update']);
  const packages = await lackingPackages(name, options);
  await runLogged('apt', 'apt-get', [...options, 'download', ...packages], { cwd: join(own, 'debs') });
  for (const file of readdirSync(join(own, 'debs'))) {
    await runLogged('apt', 'dpkg', ['-x', join(own, 'debs', file), target]);
  }
  rmSync(own, { recursive: true });
}

async function lackingPackages(name, options) {
  const listed = await capture('dpkg-query', ['-W', '-f', '${db:Status-Abbrev} ${Package}\n']);
  const installed = new Set(
    listed.stdout
      .split('\n')
      .filter((line) => line.startsWith('ii'))
      .map((line) => line.split(' ').at(-1)),
  );
  const depends = await capture('apt-cache', [...options, 'depends', '--recurse', '--important', name]);
  if (depends.code !== 0) throw new Failure(missing(name));
  return neededPackages(depends.stdout, installed);
}

/** The sentence for what we cannot install ourselves. */
export function missing(name) {
  return `${name} is missing and could not be installed from here: run "sudo apt-get install ${name}" and try again.`;
}

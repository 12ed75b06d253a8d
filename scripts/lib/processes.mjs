import { readFileSync, readlinkSync } from 'node:fs';
import { setTimeout as sleep } from 'node:timers/promises';

/** What the kernel says about a process, or undefined when there is none. */
export function readProcess(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The command in brackets may hold anything, brackets too; the numbers begin after the last one.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
    const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').join(' ').trim();
    return { pid: Number(pid), state: fields[0], startTime: fields[19], cwd: cwdOf(pid), command };
  } catch {
    return undefined;
  }
}

function cwdOf(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`);
  } catch {
    return undefined;
  }
}

/** Pid and start time: enough to know a process again after its number was given to another. */
export function identify(pid = process.pid) {
  return { pid, startTime: readProcess(pid)?.startTime };
}

/** True while exactly that process runs; a zombie has ended, a reused number is somebody else. */
export function isAlive({ pid, startTime }, read = readProcess) {
  const found = read(pid);
  return found !== undefined && found.state !== 'Z' && found.startTime === String(startTime);
}

function signal(pid, name) {
  try {
    // Each child leads a group of its own; a negative number reaches what it started as well.
    process.kill(-pid, name);
  } catch {
    try {
      process.kill(pid, name);
    } catch {
      // It has ended in the meantime.
    }
  }
}

async function gone(identity, within) {
  for (let waited = 0; waited < within; waited += 50) {
    if (!isAlive(identity)) return true;
    await sleep(50);
  }
  return !isAlive(identity);
}

/** Ends a process group: asks first, insists after `graceMs`. Leaves a stranger with the same number alone. */
export async function endProcess(identity, graceMs = 10_000) {
  if (!isAlive(identity)) return;
  signal(identity.pid, 'SIGTERM');
  if (await gone(identity, graceMs)) return;
  signal(identity.pid, 'SIGKILL');
  await gone(identity, 5_000);
}

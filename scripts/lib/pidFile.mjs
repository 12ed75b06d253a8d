/** What a postmaster.pid says: process, port and whether the server takes connections. */
export function parsePidFile(text) {
  const lines = text.split('\n').map((line) => line.trim());
  const pid = Number(lines[0]);
  if (!Number.isInteger(pid) || pid <= 0) return undefined;
  return { pid, port: Number(lines[3]) || undefined, ready: lines[7] === 'ready' };
}

/**
 * What to make of a postmaster.pid, given the process that bears its number now.
 * `running`: it is our server. `dying`: killed, not yet reaped, PostgreSQL would still refuse to start.
 * `stale`: nobody, or a stranger who got the number; PostgreSQL would refuse for good.
 */
export function pidFileVerdict(process, dataDir) {
  if (!process) return 'stale';
  if (process.state === 'Z') return 'dying';
  return process.cwd === dataDir ? 'running' : 'stale';
}

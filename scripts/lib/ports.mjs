import { createServer } from 'node:net';
import { randomInt } from 'node:crypto';
import { Failure } from './failure.mjs';

/** True when a server can listen on this port now. */
export function canListen(port, host = '127.0.0.1') {
  return new Promise((resolve) => {
    const server = createServer();
    server.once('error', () => resolve(false));
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(true)));
  });
}

/** The first free port from `wanted` upwards that is not in `taken`. */
export async function nextFreePort(wanted, { host = '127.0.0.1', taken = [], free = canListen } = {}) {
  for (let port = wanted; port < Math.min(wanted + 200, 65_536); port += 1) {
    if (!taken.includes(port) && (await free(port, host))) return port;
  }
  throw new Failure(`No free port from ${wanted} to ${wanted + 199}: please set PORT to a free one.`);
}

/** A free port below the range from which the system takes ports for outgoing connections. */
export async function randomFreePort({ pick = () => randomInt(20_000, 32_000), free = canListen } = {}) {
  for (let tries = 0; tries < 100; tries += 1) {
    const port = pick();
    if (await free(port)) return port;
  }
  throw new Failure('No free port between 20000 and 32000 on 127.0.0.1.');
}

import { createServer } from 'node:http';
import type { RequestListener, Server } from 'node:http';
import type { AddressInfo } from 'node:net';

export interface HttpListener {
  url: string;
  port: number;
  /** Closes the server and every open connection, so that no kept-alive client holds the process. */
  stop(): Promise<void>;
}

/** Listens on loopback only; port 0 takes a free one. */
export async function listenHttp(handler: RequestListener, port = 0): Promise<HttpListener> {
  const server = createServer(handler);
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', resolve);
  });
  const bound = (server.address() as AddressInfo).port;
  return { url: `http://127.0.0.1:${bound}`, port: bound, stop: () => close(server) };
}

function close(server: Server): Promise<void> {
  return new Promise((resolve) => {
    server.close(() => resolve());
    server.closeAllConnections();
  });
}

/**
 * The pages: the built client with its files, or Vite's development server. Each answer of a page carries its own
 * nonce in place of the template's mark.
 */
import { once } from 'node:events';
import { readFile } from 'node:fs/promises';
import { createServer, type AddressInfo } from 'node:net';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import compression from 'compression';
import express, { type Request, type RequestHandler, type Router } from 'express';
import { AppError } from '#server/errors';
import type { Services } from './context';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const MARK = /__NONCE__/g;

/** What the client's router knows. Anything else is answered 404, with the page that says so. */
const CLIENT_ROUTES = [
  /^\/$/,
  /^\/s\/[^/]+\/?$/,
  /^\/s\/[^/]+\/(book|sign-in)\/?$/,
  /^\/s\/[^/]+\/password\/[^/]+\/?$/,
  /^\/shop\/?$/,
  /^\/shop\/(gate|rail)\/?$/,
  /^\/shop\/jobs\/[^/]+\/?$/,
  /^\/u\/[^/]+\/?$/,
];
const STUB_ROUTE = /^\/t\/[^/]+\/?$/;

type Template = 'index.html' | 'stub.html';
/** Gives a page's template as it is to be sent, but for the nonce. */
type ReadTemplate = (name: Template, url: string) => Promise<string>;

/** Serves pages and their files. */
export async function pages({ env }: Pick<Services, 'env'>, dist = join(ROOT, 'dist')): Promise<Router> {
  const router = express.Router();
  const development = env.VITE_DEV ? await viteServer() : null;
  if (development) router.use(development.middleware);
  else router.use(compression(), builtFiles(dist));
  router.use(page(development?.read ?? builtTemplates(dist)));
  return router;
}

function page(read: ReadTemplate): RequestHandler {
  return async (req, res) => {
    if (req.method !== 'GET' && req.method !== 'HEAD') throw new AppError('not_found');
    const html = await read(STUB_ROUTE.test(req.path) ? 'stub.html' : 'index.html', req.originalUrl);
    res.status(isKnown(req) ? 200 : 404);
    res.set({ 'Content-Type': 'text/html; charset=utf-8', 'Cache-Control': 'no-store' });
    res.send(html.replace(MARK, req.cspNonce));
  };
}

function isKnown(req: Request): boolean {
  return STUB_ROUTE.test(req.path) || CLIENT_ROUTES.some((route) => route.test(req.path));
}

/** Nothing here is so large that a part of it is worth asking for. */
const PLAIN = { index: false, acceptRanges: false } as const;

/** The build's files. Names under assets/ carry a hash of the content and may be kept for ever. */
function builtFiles(dist: string): RequestHandler {
  const router = express.Router();
  const assets = express.static(join(dist, 'assets'), { ...PLAIN, immutable: true, maxAge: '1y' });
  router.use('/assets', assets, () => {
    throw new AppError('not_found');
  });
  const others = express.static(dist, { ...PLAIN, maxAge: '1h', redirect: false });
  // The templates are not pages: they go out with a nonce or not at all.
  router.use((req, res, next) => (isTemplate(req.path) ? next() : others(req, res, next)));
  return router;
}

/** Looked at as the file server reads it, with every sign decoded. */
function isTemplate(path: string): boolean {
  return /\.html$/i.test(decodeURIComponent(path));
}

function builtTemplates(dist: string): ReadTemplate {
  const kept = new Map<Template, string>();
  return async (name) => {
    const html = kept.get(name) ?? (await readBuilt(join(dist, name)));
    kept.set(name, html);
    return html;
  };
}

async function readBuilt(path: string): Promise<string> {
  try {
    return await readFile(path, 'utf8');
  } catch (cause) {
    throw new AppError('unavailable', { cause });
  }
}

async function viteServer(): Promise<{ middleware: RequestHandler; read: ReadTemplate }> {
  const { createServer: createVite } = await import('vite');
  const server = { middlewareMode: true as const, hmr: { port: await freePort() } };
  const vite = await createVite({ root: ROOT, server, appType: 'custom' });
  return {
    middleware: vite.middlewares,
    read: async (name, url) => vite.transformIndexHtml(url, await readFile(join(ROOT, name), 'utf8')),
  };
}

/** A port for the development server's web socket: its usual one belongs to whichever checkout came first. */
async function freePort(): Promise<number> {
  const probe = createServer().listen(0, '127.0.0.1');
  await once(probe, 'listening');
  const { port } = probe.address() as AddressInfo;
  probe.close();
  await once(probe, 'close');
  return port;
}

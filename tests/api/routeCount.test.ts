/** Nothing is mounted beside the table: neither a route that it does not name, nor one twice. */
import type { Express } from 'express';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { routeTable } from '#server/routes/table';
import type { Route } from '#server/routes/route';
import { startTestApp, type TestApp } from '../support/testApp';

let app: TestApp;
let table: Route[];

beforeAll(async () => {
  app = await startTestApp();
  table = routeTable(app.services);
});
afterAll(() => app.stop());

interface Layer {
  route?: { path: string; stack: { method: string; handle: unknown }[] };
  handle: { stack?: Layer[] };
}

/** Method and path of every handler that answers, however deep it is mounted. */
function leaves(stack: Layer[]): string[] {
  return stack.flatMap(({ route, handle }) => {
    if (handle.stack) return leaves(handle.stack);
    const methods = new Set(route?.stack.map(({ method }) => method) ?? []);
    return [...methods].map((method) => `${method.toUpperCase()} ${route?.path ?? ''}`);
  });
}

const stackOf = (express: Express): Layer[] => (express.router as unknown as { stack: Layer[] }).stack;

test('the application answers exactly the routes of the table', () => {
  const mounted = leaves(stackOf(app.express)).filter((leaf) => leaf.includes('/'));
  const declared = table.map(({ method, path }) => `${method.toUpperCase()} ${path}`);
  expect(mounted.sort()).toEqual([...declared].sort());
  expect(new Set(declared).size).toBe(declared.length);
  expect(declared.length).toBeGreaterThan(20);
});

test('a route that anybody may use says why', () => {
  const reasons = table.flatMap(({ access }) => ('public' in access ? [access.public] : []));
  expect(reasons.length).toBeGreaterThan(5);
  expect(reasons.filter((reason) => reason.trim().split(' ').length < 4)).toEqual([]);
});

test('every other route names at least one role', () => {
  const roles = table.flatMap(({ access }) => ('roles' in access ? [access.roles.length] : []));
  expect(roles.length).toBeGreaterThan(5);
  expect(Math.min(...roles)).toBeGreaterThan(0);
});

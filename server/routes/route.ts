/**
 * Routes are declared once, as data: method, full path, schemas, who may. The table mounts them, and the tests
 * (permission matrix, count, fuzz) read the same table. Every request takes the same steps in the same order:
 * signed in (401), row found (404), allowed (403), body right (400), then the handler.
 */
import type { IncomingHttpHeaders } from 'node:http';
import type { Request, RequestHandler } from 'express';
import type { ZodType } from 'zod';
import type { Ctx } from '#server/lib/context';
import type { Role } from '#shared/domain/roles';
import type { Actor } from '#shared/domain/roles';

/** `public` says why nobody needs to sign in; else the roles of which one is needed. */
export type Access = { public: string } | { roles: readonly Role[] };

export interface RouteInput<Body, Query, Row> {
  ctx: Ctx;
  params: Record<string, string>;
  body: Body;
  query: Query;
  row: Row;
  headers: IncomingHttpHeaders;
  /** For the few routes that work on the session itself. */
  req: Request;
}

/** What a loader is given: nothing of the body, which is not read before the row is known and allowed. */
export type LoadInput = Pick<RouteInput<never, never, never>, 'ctx' | 'params'>;

export interface RouteDefinition<Body = unknown, Query = unknown, Row = unknown> {
  method: 'get' | 'post';
  /** Full path, as Express matches it. */
  path: string;
  access: Access;
  body?: ZodType<Body>;
  query?: ZodType<Query>;
  /** Fetches what the path names, in a unit of work of its own; throws `not_found`. */
  load?: (input: LoadInput) => Promise<Row>;
  /** The policy on the loaded row. */
  allow?: (actor: Actor | null, row: Row) => boolean;
  /** Asks for an Idempotency-Key. */
  idempotent?: boolean;
  /** Success status; 200 unless said. */
  status?: number;
  /** Answers the JSON body; undefined gives 204. */
  handle: (input: RouteInput<Body, Query, Row>) => Promise<unknown>;
}

/** A webhook keeps its own wire format and proof; it is listed in the same table, as public with its reason. */
export interface RawRouteDefinition {
  method: 'get' | 'post';
  path: string;
  access: { public: string };
  raw: RequestHandler[];
}

export type Route = RouteDefinition | RawRouteDefinition;

/** Declares one route with its types inferred. */
export function route<Body, Query, Row>(definition: RouteDefinition<Body, Query, Row>): Route {
  return definition as unknown as Route;
}

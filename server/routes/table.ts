import type { Services } from '#server/lib/context';
import { codeRoutes } from './codes';
import { passwordLinkRoutes } from './passwordLinks';
import { reportRoutes } from './reports';
import type { Route } from './route';
import { sessionRoutes } from './session';
import { shopRoutes } from './shops';

/** Every route of the server. Nothing else is mounted. */
export function routeTable(services: Services): Route[] {
  return [...sessionRoutes(services), ...codeRoutes, ...passwordLinkRoutes, ...shopRoutes, ...reportRoutes];
}

import type { Services } from '#server/lib/context';
import { bookingRoutes } from './booking';
import { codeRoutes } from './codes';
import { hookRoutes } from './hooks';
import { passwordLinkRoutes } from './passwordLinks';
import { reportRoutes } from './reports';
import type { Route } from './route';
import { sessionRoutes } from './session';
import { shopFloorRoutes } from './shopFloor';
import { shopRoutes } from './shops';
import { stubRoutes } from './stub';
import { unsubscribeRoutes } from './unsubscribe';

/** Every route of the server. Nothing else is mounted. */
export function routeTable(services: Services): Route[] {
  return [
    ...sessionRoutes(services),
    ...codeRoutes,
    ...passwordLinkRoutes,
    ...shopRoutes,
    ...bookingRoutes,
    ...stubRoutes,
    ...shopFloorRoutes,
    ...reportRoutes,
    ...unsubscribeRoutes,
    ...hookRoutes(services),
  ];
}

import express, { type Express, type RequestHandler } from 'express';
import type { Services } from '#server/lib/context';
import { auditRefusals } from '#server/middlewares/auditRefusals';
import { answerErrors, unknownAddress } from '#server/middlewares/errors';
import { requestId, securityHeaders } from '#server/middlewares/headers';
import { refuseCrossSite } from '#server/middlewares/crossSite';
import { plainAddress } from '#server/middlewares/plainAddress';
import { sessions } from '#server/middlewares/session';
import { mountRoutes } from '#server/routes/mount';
import { routeTable } from '#server/routes/table';
import { pages } from '#server/lib/pages';

const BODY_LIMIT = '100kb';
const readJson = express.json({
  limit: BODY_LIMIT,
  type: ['application/json', 'application/csp-report', 'application/reports+json'],
});

/** Reads the body. What is wrong with it is said in its turn: after who calls, and whether he may. */
const jsonBody: RequestHandler = (req, res, next) => {
  readJson(req, res, (problem?: Error) => {
    if (problem) req.bodyProblem = problem;
    next();
  });
};

/** Builds the application; whoever calls it listens. */
export async function createApp(services: Services): Promise<Express> {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', services.env.TRUSTED_HOPS);
  app.set('query parser', 'simple');
  app.use(requestId, plainAddress, securityHeaders(services.env), refuseCrossSite(services.env));
  app.use('/api', jsonBody);
  app.use('/api', ...sessions(services));
  mountRoutes(app, services, routeTable(services));
  app.use(['/api', '/hooks'], unknownAddress);
  app.use(await pages(services));
  app.use(auditRefusals(services), answerErrors(services));
  return app;
}

/** Ending e-mails, without signing in. */
import { unsubscribe, viewUnsubscribe } from '#server/messages/unsubscribe';
import { route, type Route } from './route';

const access = { public: 'The token in the address was mailed to the person whose e-mails it ends.' };

/** Reading changes nothing; posting, by the page or by a mail program's one click, ends the e-mails. */
export const unsubscribeRoutes: Route[] = [
  route({
    method: 'get',
    path: '/api/u/:token',
    access,
    handle: ({ ctx, params }) => viewUnsubscribe(ctx, params.token ?? ''),
  }),
  route({
    method: 'post',
    path: '/u/:token',
    access,
    handle: ({ ctx, params }) => unsubscribe(ctx, params.token ?? ''),
  }),
];

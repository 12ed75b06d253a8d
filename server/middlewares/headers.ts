import { randomBytes, randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import helmet from 'helmet';
import type { Env } from '#server/env';

/** Names each request, in logs and in error answers. */
export const requestId: RequestHandler = (req, res, next) => {
  req.id = randomUUID();
  res.set('X-Request-Id', req.id);
  next();
};

const REPORTS = '/api/csp-reports';
/** Pages and answers behind an address that is a secret: never indexed, never kept. */
const SECRET_ADDRESS = /^(\/api)?\/([tu]|s(hops)?\/[^/]+\/password(-links)?)\//i;
const ONE_YEAR = 365 * 24 * 60 * 60;

/**
 * The content policy of an answer. Scripts come from files of ours alone; styles also from elements that carry the
 * answer's nonce, as the component library writes its styles at run time. In development Vite's client adds inline
 * scripts with the nonce and talks over a web socket.
 */
export function contentPolicy(env: Pick<Env, 'VITE_DEV'>, nonce: string, secure: boolean): string {
  const ofDevelopment = env.VITE_DEV ? { script: ` 'nonce-${nonce}'`, connect: ' ws: wss:' } : null;
  return [
    "default-src 'self'",
    `script-src 'self'${ofDevelopment?.script ?? ''}`,
    "script-src-attr 'none'",
    `style-src 'self' 'nonce-${nonce}'`,
    "img-src 'self' data: blob:",
    "font-src 'self' data:",
    `connect-src 'self'${ofDevelopment?.connect ?? ''}`,
    "worker-src 'self'",
    "object-src 'none'",
    "base-uri 'none'",
    "frame-src 'none'",
    "frame-ancestors 'none'",
    "form-action 'self'",
    `report-uri ${REPORTS}`,
    ...(secure ? ['report-to csp'] : []),
  ].join('; ');
}

const fixedHeaders = helmet({
  contentSecurityPolicy: false,
  strictTransportSecurity: false,
  referrerPolicy: { policy: 'no-referrer' },
  crossOriginOpenerPolicy: { policy: 'same-origin' },
  crossOriginResourcePolicy: { policy: 'same-origin' },
  xFrameOptions: { action: 'deny' },
});

/** Sets the security headers that every answer carries. */
export function securityHeaders(env: Pick<Env, 'VITE_DEV'>): RequestHandler {
  return (req, res, next) => {
    req.cspNonce = randomBytes(16).toString('base64');
    res.set('Content-Security-Policy', contentPolicy(env, req.cspNonce, req.secure));
    res.set('Permissions-Policy', 'camera=(), geolocation=(), microphone=(), payment=(), usb=()');
    if (req.secure) {
      res.set('Strict-Transport-Security', `max-age=${ONE_YEAR}; includeSubDomains`);
      res.set('Reporting-Endpoints', `csp="${REPORTS}"`);
    }
    if (SECRET_ADDRESS.test(req.path)) {
      res.set({ 'X-Robots-Tag': 'noindex, nofollow', 'Cache-Control': 'no-store' });
    }
    fixedHeaders(req, res, next);
  };
}

/** The environment, read and checked once. Every fault is named at once, in words, before anything starts. */
import { z } from 'zod';

const secret = z.string().regex(/^[0-9a-f]{64,}$/i, 'at least 64 hexadecimal characters');
const roleName = z.string().regex(/^[a-z_][a-z0-9_]{0,62}$/, 'the name of a database role');
const httpUrl = z
  .url({ protocol: /^https?$/, error: 'an http or https address' })
  .transform((url) => url.replace(/\/+$/, ''));

/** Every variable that the server and the worker read. */
export const EnvSchema = z
  .object({
    NODE_ENV: z.enum(['production', 'development', 'test']).default('production'),
    HOST: z.string().min(1).default('127.0.0.1'),
    PORT: z.coerce.number().int().min(0).max(65535).default(5180),
    PUBLIC_URL: httpUrl,
    TRUSTED_HOPS: z.coerce.number().int().min(0).max(10).default(0),
    DATABASE_URL: z.url({ protocol: /^postgres(ql)?$/, error: 'a postgres:// address' }),
    DB_APP_ROLE: roleName,
    DB_OWNER_ROLE: roleName,
    SESSION_SECRET: secret,
    LINK_KEY: secret,
    CODE_KEY: secret,
    TWILIO_ACCOUNT_SID: z.string().regex(/^AC[0-9a-f]{32}$/i, 'AC and 32 hexadecimal characters'),
    TWILIO_AUTH_TOKEN: z.string().min(8, 'the auth token of the account'),
    TWILIO_API_BASE: httpUrl.optional(),
    SMTP_URL: z.url({ protocol: /^smtps?$/, error: 'an smtp:// or smtps:// address' }),
    MAIL_FROM: z.email('an e-mail address').default('shop@example.com'),
    CLOCK_URL: httpUrl.optional(),
    LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
    VITE_DEV: z.stringbool().default(false),
  })
  .refine((env) => !(env.NODE_ENV === 'production' && env.CLOCK_URL), {
    path: ['CLOCK_URL'],
    message: 'must not be set in production: there the time is the time',
  });
export type Env = z.infer<typeof EnvSchema>;

/**
 * Parses the environment.
 * @throws Error whose message lists every variable that is missing or wrong, one a line
 */
export function parseEnv(source: Record<string, string | undefined>): Env {
  const given = Object.fromEntries(Object.entries(source).filter(([, value]) => value !== ''));
  const result = EnvSchema.safeParse(given);
  if (result.success) return result.data;
  const faults = result.error.issues.map((issue) => {
    const name = issue.path.join('.');
    const isMissing = given[name] === undefined;
    return `  ${name}: ${isMissing ? 'is missing' : `is not right: ${issue.message}`}`;
  });
  throw new Error(`These environment variables need a look:\n${faults.join('\n')}`);
}

/** What browsers say about broken content policies, and whether the server is well. */
import { z } from 'zod';
import type { Ctx } from '#server/lib/context';
import { rows } from '#server/lib/db';
import { maskSecrets } from '#server/lib/logger';
import { limitReports } from '#server/lib/rateLimits';
import { route, type Route } from './route';

const fact = z.union([z.string(), z.number()]).optional();

/** The older form, one report a request. */
const SingleReport = z.object({
  'csp-report': z.object({
    'document-uri': fact,
    'effective-directive': fact,
    'violated-directive': fact,
    'blocked-uri': fact,
    'source-file': fact,
    'line-number': fact,
  }),
});
/** The Reporting API's form, several of any type. */
const ReportList = z
  .array(
    z.object({
      type: z.string(),
      body: z.object({
        documentURL: fact,
        effectiveDirective: fact,
        blockedURL: fact,
        sourceFile: fact,
        lineNumber: fact,
      }),
    }),
  )
  .max(50, 'errors.field.too_large');
const Reports = z.union([SingleReport, ReportList]);

interface Violation {
  page: string;
  directive: string;
  blocked: string;
  source: string;
}

function violationsOf(reports: z.infer<typeof Reports>): Violation[] {
  if (!Array.isArray(reports)) {
    const report = reports['csp-report'];
    const directive = report['effective-directive'] ?? report['violated-directive'];
    return [
      violation(
        report['document-uri'],
        directive,
        report['blocked-uri'],
        report['source-file'],
        report['line-number'],
      ),
    ];
  }
  return reports
    .filter((report) => report.type === 'csp-violation')
    .map(({ body }) =>
      violation(body.documentURL, body.effectiveDirective, body.blockedURL, body.sourceFile, body.lineNumber),
    );
}

type Fact = z.infer<typeof fact>;

/** Anybody can send a report, so what it says is cut short; addresses of pages may be secrets. */
function violation(page: Fact, directive: Fact, blocked: Fact, source: Fact, line: Fact): Violation {
  const short = (value: Fact) => maskSecrets(String(value ?? '')).slice(0, 200);
  return {
    page: short(page),
    directive: short(directive),
    blocked: short(blocked),
    source: `${short(source)}:${short(line)}`,
  };
}

async function logReports(ctx: Ctx, reports: z.infer<typeof Reports>): Promise<void> {
  await limitReports(ctx);
  for (const found of violationsOf(reports)) ctx.log.warn({ violation: found }, 'content policy broken');
}

export const reportRoutes: Route[] = [
  route({
    method: 'post',
    path: '/api/csp-reports',
    access: { public: 'browsers send these unasked; they are logged and change nothing' },
    body: Reports,
    handle: ({ ctx, body }) => logReports(ctx, body),
  }),
  route({
    method: 'get',
    path: '/healthz',
    access: { public: 'says only that server and database answer' },
    handle: async () => {
      await rows('select 1');
      return { ok: true };
    },
  }),
];

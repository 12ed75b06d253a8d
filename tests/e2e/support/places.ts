import { expect, type Page } from '@playwright/test';
import { routes } from '@/router/routes';
import type { JobSheet, RailView } from '#shared/schemas/job';
import { shop, web } from './addresses';

/** A page of the client's route list, by its name there. */
export interface Place {
  name: string;
  path: string;
  isStaff: boolean;
}

/** Every page of the client's route list, its parameters filled in. Redirections are no pages. */
export function placesOf(tag: string): Place[] {
  const values: Record<string, string> = { shop, tag, token: 'AAAAAAAAAAAAAAAAAAAAAA' };
  return routes.flatMap(({ path: base, children = [] }) =>
    children
      .filter((route) => !route.redirect)
      .map((route) => ({
        name: String(route.name),
        path: fill(route.path.startsWith('/') ? route.path : `${base}/${route.path}`, values),
        isStaff: route.meta?.staff === true,
      })),
  );
}

function fill(path: string, values: Record<string, string>): string {
  const rest = path.replace(/:rest\(.*$/, 'nowhere/at/all');
  return rest.replace(/:(\w+)/g, (_, name: string) => {
    const value = values[name];
    if (!value) throw new Error(`no value for :${name} in ${path}`);
    return value;
  });
}

/** Links that nobody holds lead to the pages' own words for it; the forms behind them come with an answer put in. */
export async function answerLinks(page: Page): Promise<void> {
  await page.route('**/api/shops/*/password-links/*', (route) =>
    route.fulfill({ json: { name: 'Wes Calloway', email: 'wes@example.com' } }),
  );
  await page.route('**/api/u/*', (route) =>
    route.fulfill({ json: { shopName: 'Cinder Flat', email: 'iris@example.com', already: false } }),
  );
}

/** A job of the demo that stands in this stage. The page's person is staff. */
export async function jobIn(page: Page, stage: string): Promise<JobSheet> {
  const board = (await (await page.request.get('/api/shop/rail')).json()) as RailView;
  const job = board.jobs.find((one) => one.stage === stage && one.account.name !== 'D. Ortega');
  expect(job, `the demo has a job in ${stage}`).toBeDefined();
  return (await (await page.request.get(`/api/shop/jobs/${job?.tag}`)).json()) as JobSheet;
}

/** A stub's code may be tried ten times an hour, in tests as well: what was found once is kept. */
const foundPaths = new Map<string, string>();

/** The path of the stub of a job's visit, found as a customer finds it. */
export async function stubPathOf(page: Page, sheet: JobSheet): Promise<string> {
  const code = sheet.job.visit.stubCode;
  const path = foundPaths.get(code) ?? (await findStub(page, code, sheet));
  foundPaths.set(code, path);
  return path;
}

async function findStub(page: Page, code: string, sheet: JobSheet): Promise<string> {
  for (const { phone } of sheet.people) {
    if (!phone) continue;
    const answer = await page.request.post(`/api/shops/${shop}/stubs`, {
      headers: { Origin: web },
      data: { code, lastFour: phone.slice(-4) },
    });
    if (answer.ok()) return ((await answer.json()) as { stubPath: string }).stubPath;
  }
  throw new Error(`no phone opens the stub of ${sheet.job.tag}`);
}

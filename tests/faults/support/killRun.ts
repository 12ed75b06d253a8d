/**
 * A run of announcing changes during which servers and workers are killed. The judge is the gateway's log, which is
 * written to disk before anybody is answered: what stands there has been texted.
 */
import { createServer, type Server } from 'node:http';
import { mkdtemp, rm } from 'node:fs/promises';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { QueryTypes } from 'sequelize';
import type { SmsMessage } from '#fakes/fake-sms/message';
import { spawnWorker, startStack, type Stack, type StackChild } from '../../../scripts/lib/harness.mjs';
import { makeShop, type TestShop } from '../../support/factories';
import { startTestApp, type TestApp } from '../../support/testApp';
import { counterOf } from './staffClient';
import { makeVisits, type TestVisit } from './visits';

export interface KillPlan {
  changes: number;
  /** Worker kills between the gateway's acceptance and our commit. */
  placed: number;
  /** Worker and server kills at any moment. */
  workerKills: number;
  webKills: number;
  /** Default: the worker as it is. */
  workerFile?: string;
}

export interface KillReport {
  /** How often each visit's person was texted. */
  textsPerVisit: number[];
  /** Texts to anybody else. */
  strayTexts: number;
  /** Kills that came about. */
  kills: { placed: number; worker: number; web: number };
  /** How often each job was moved. */
  movesPerJob: number[];
  /** Texts of which, for a time, nobody knew whether they had gone. */
  uncertain: number;
  /** How each message ended. */
  ends: Record<string, number>;
  /** Longest time from release to settlement. */
  slowestSeconds: number;
  runSeconds: number;
}

const CLIENTS = 8;
const ANY_MOMENT_MS = 40;
/** The last kills fall before the last texts, so that each of them hits something. */
const SPREAD = 0.85;
const SETTLE_MS = 240_000;

/** Runs it, from an empty database to the last text. */
export async function killRun(plan: KillPlan): Promise<KillReport> {
  const logDir = await mkdtemp(join(tmpdir(), 'benchbell-faults-'));
  const app = await startTestApp({ now: new Date() });
  const shop = await makeShop(app);
  const stack = await startStack({ databaseUrl: app.database.url, logDir, at: '11:00', workers: 0 });
  const worker = await spawnWorker({
    env: stack.env,
    logDir,
    ...(plan.workerFile ? { file: plan.workerFile } : {}),
  });
  const killer = new Killer(worker, stack, plan);
  try {
    await killer.listen();
    const began = performance.now();
    const visits = await makeVisits(shop, plan.changes, await stackNow(stack));
    await change(stack, shop, visits, killer);
    await untilSettled(app, plan.changes);
    await killer.atRest();
    return await judge(app, stack, visits, killer, (performance.now() - began) / 1000);
  } finally {
    await killer.close();
    await worker.stop();
    await stack.stop();
    await app.stop();
    await rm(logDir, { recursive: true, force: true });
  }
}

/** The stack lives at eleven in the morning, whenever the test runs. */
async function stackNow(stack: Stack): Promise<Date> {
  const answer = await fetch(stack.addresses.clock);
  const { offsetMs } = (await answer.json()) as { offsetMs: number };
  return new Date(Date.now() + offsetMs);
}

/** After how many of `count` things the next kill is due. */
const momentOf = (done: number, planned: number, count: number): number =>
  ((done + 1) * count * SPREAD) / (planned + 1);

/** Kills, and starts again what it killed. */
class Killer {
  readonly done = { placed: 0, worker: 0, web: 0 };
  #accepted = 0;
  #changed = 0;
  #server: Server | undefined;
  #rising = new Set<Promise<unknown>>();
  #workerIsDown = false;
  #webIsDown = false;

  constructor(
    private readonly worker: StackChild,
    private readonly stack: Stack,
    private readonly plan: KillPlan,
  ) {}

  /** Has the gateway tell of each text that it has taken, before it answers. */
  async listen(): Promise<void> {
    const server = createServer((request, response) => {
      request.resume();
      void this.#onAccepted().finally(() => response.end());
    });
    this.#server = server;
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
    await control(this.stack, 'hook', { url });
    // Reports of delivery would settle what the crash left open: this run is about the look-up alone.
    await control(this.stack, 'faults', { callbacks: { off: true } });
  }

  /** Counts a change; servers die at even distances of these. */
  async onChanged(): Promise<void> {
    this.#changed += 1;
    const { changes, webKills } = this.plan;
    if (this.#changed >= momentOf(this.done.web, webKills, changes) && this.done.web < webKills) {
      await this.#killWeb();
    }
  }

  /** Counts a text; workers die at even distances of these, in the gateway's own pause or shortly after it. */
  async #onAccepted(): Promise<void> {
    this.#accepted += 1;
    const { changes, placed, workerKills } = this.plan;
    if (this.#accepted >= momentOf(this.done.placed, placed, changes) && this.done.placed < placed) {
      return this.#killWorker('placed');
    }
    if (this.#accepted < momentOf(this.done.worker, workerKills, changes)) return;
    if (this.done.worker < workerKills) setTimeout(() => void this.#killWorker('worker'), ANY_MOMENT_MS);
  }

  async #killWorker(why: 'placed' | 'worker'): Promise<void> {
    if (this.#workerIsDown || this.done[why] >= this.#planned(why)) return;
    this.#workerIsDown = true;
    this.done[why] += 1;
    await this.worker.kill('SIGKILL');
    this.#raise(this.worker, () => (this.#workerIsDown = false));
  }

  #planned(why: 'placed' | 'worker'): number {
    return why === 'placed' ? this.plan.placed : this.plan.workerKills;
  }

  async #killWeb(): Promise<void> {
    const [web] = this.stack.webs;
    if (!web || this.#webIsDown) return;
    this.#webIsDown = true;
    this.done.web += 1;
    await web.kill('SIGKILL');
    this.#raise(web, () => (this.#webIsDown = false));
  }

  #raise(child: StackChild, then: () => void): void {
    const rising = child.restart().then(then);
    this.#rising.add(rising);
    void rising.finally(() => this.#rising.delete(rising));
  }

  async atRest(): Promise<void> {
    await Promise.all(this.#rising);
  }

  async close(): Promise<void> {
    await Promise.allSettled(this.#rising);
    this.#server?.closeAllConnections();
    this.#server?.close();
  }
}

async function control(stack: Stack, what: string, body: unknown): Promise<void> {
  const answer = await fetch(`${stack.addresses.sms}/_control/${what}`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify(body),
  });
  if (!answer.ok) throw new Error(`gateway control ${what}: ${answer.status}`);
}

/** Checks every machine in, by several hands at once. */
async function change(stack: Stack, shop: TestShop, visits: TestVisit[], killer: Killer): Promise<void> {
  const checkIn = await counterOf(stack.addresses.web, shop);
  const left = [...visits];
  const hand = async (): Promise<void> => {
    for (let visit = left.shift(); visit; visit = left.shift()) {
      await checkIn(visit.tag);
      await killer.onChanged();
    }
  };
  await Promise.all(Array.from({ length: CLIENTS }, hand));
}

function ownerRows<T extends object>(app: TestApp, sql: string): Promise<T[]> {
  return app.owner.query<T>(sql, { type: QueryTypes.SELECT });
}

async function untilSettled(app: TestApp, count: number): Promise<void> {
  const until = performance.now() + SETTLE_MS;
  while (performance.now() < until) {
    const [found] = await ownerRows<{ settled: number }>(
      app,
      `select count(*) filter (where settled_at is not null)::int as settled from messages`,
    );
    if (found?.settled === count) return;
    await wait(500);
  }
  const open = await ownerRows(app, `select status, count(*)::int as n from messages group by status`);
  throw new Error(`not settled in time: ${JSON.stringify(open)}`);
}

async function judge(
  app: TestApp,
  stack: Stack,
  visits: TestVisit[],
  killer: Killer,
  runSeconds: number,
): Promise<KillReport> {
  const answer = await fetch(`${stack.addresses.sms}/_control/messages`);
  const { messages } = (await answer.json()) as { messages: SmsMessage[] };
  const phones = new Map(visits.map(({ phone }) => [phone, 0]));
  for (const { to } of messages) if (phones.has(to)) phones.set(to, (phones.get(to) ?? 0) + 1);
  const textsPerVisit = [...phones.values()];
  const moves = await ownerRows<{ n: number }>(
    app,
    `select count(*) filter (where kind = 'moved')::int as n from job_events group by job_id`,
  );
  const ends = await ownerRows<{ status: string; n: number }>(
    app,
    `select status, count(*)::int as n from messages group by status`,
  );
  const [slowest] = await ownerRows<{ seconds: number }>(
    app,
    `select extract(epoch from max(m.settled_at - n.release_at))::float as seconds
     from notices n join messages m on m.shop_id = n.shop_id and m.id = n.message_id`,
  );
  const [looked] = await ownerRows<{ n: number }>(
    app,
    'select count(*)::int as n from messages where look_after is not null',
  );
  return {
    uncertain: looked?.n ?? 0,
    textsPerVisit,
    strayTexts: messages.length - textsPerVisit.reduce((sum, n) => sum + n, 0),
    kills: killer.done,
    movesPerJob: moves.map(({ n }) => n),
    ends: Object.fromEntries(ends.map(({ status, n }) => [status, n])),
    slowestSeconds: slowest?.seconds ?? 0,
    runSeconds,
  };
}

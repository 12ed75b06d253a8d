import express from 'express';
import type { Request, Response } from 'express';
import { FlowingClock, parseStart } from '#fakes/fake-clock/flowingClock';
import { listenHttp } from '#fakes/lib/httpListener';

export interface FakeClockOptions {
  /** Default 0: a free port. */
  port?: number;
  /** `HH:mm` today, or an ISO instant. Default: the machine's time. */
  startAt?: string;
  /** Zone in which `startAt` is meant. Default UTC. */
  zone?: string;
}

export interface FakeClock {
  url: string;
  clock: FlowingClock;
  stop(): Promise<void>;
}

/** Starts the clock that the other processes take their time from. */
export async function startFakeClock(options: FakeClockOptions = {}): Promise<FakeClock> {
  const clock = new FlowingClock();
  if (options.startAt) clock.setNow(parseStart(options.startAt, options.zone));
  const app = express();
  app.disable('x-powered-by');
  app.get('/', (_request, response) => void response.json(reading(clock)));
  app.put('/', express.json(), (request, response) => setClock(clock, request, response));
  const listener = await listenHttp(app, options.port);
  return { url: listener.url, clock, stop: () => listener.stop() };
}

function reading(clock: FlowingClock): { offsetMs: number; now: string } {
  return { offsetMs: clock.offsetMs, now: clock.now().toISOString() };
}

function setClock(clock: FlowingClock, request: Request, response: Response): void {
  const body = (request.body ?? {}) as Record<string, unknown>;
  const problem = applySetting(clock, body);
  if (problem) {
    response.status(400).json({ message: problem });
    return;
  }
  response.json(reading(clock));
}

const ONE_OF_THREE = 'Send exactly one of offsetMs (number), now (ISO instant), advanceMs (number).';

function applySetting(clock: FlowingClock, body: Record<string, unknown>): string | undefined {
  if (Object.keys(body).length !== 1) return ONE_OF_THREE;
  const { offsetMs, now, advanceMs } = body;
  if (typeof offsetMs === 'number') return void clock.setOffset(offsetMs);
  if (typeof advanceMs === 'number') return void clock.advance(advanceMs);
  if (typeof now !== 'string') return ONE_OF_THREE;
  const at = new Date(now);
  if (Number.isNaN(at.getTime())) return `now is not an ISO instant: ${now}`;
  return void clock.setNow(at);
}

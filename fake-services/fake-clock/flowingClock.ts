import { DateTime } from 'luxon';

/** Time that always flows: the machine's time plus an offset. */
export class FlowingClock {
  #offsetMs: number;

  constructor(offsetMs = 0) {
    this.#offsetMs = offsetMs;
  }

  get offsetMs(): number {
    return this.#offsetMs;
  }

  now(): Date {
    return new Date(Date.now() + this.#offsetMs);
  }

  setOffset(offsetMs: number): void {
    this.#offsetMs = Math.round(offsetMs);
  }

  setNow(at: Date): void {
    this.#offsetMs = at.getTime() - Date.now();
  }

  advance(ms: number): void {
    this.#offsetMs += Math.round(ms);
  }
}

const DAY_TIME = /^([01]?\d|2[0-3]):([0-5]\d)$/;

/**
 * The instant a clock should start at: `HH:mm` is that time today in the zone, anything else an ISO instant (without
 * an offset of its own it is read in the zone). A wrong one throws a sentence for the person who typed it.
 */
export function parseStart(startAt: string, zone = 'UTC'): Date {
  const today = DateTime.now().setZone(zone);
  if (!today.isValid) throw new Error(`"${zone}" is not a time zone. Write it like America/Denver.`);
  const dayTime = DAY_TIME.exec(startAt.trim());
  const at = dayTime
    ? today.set({ hour: Number(dayTime[1]), minute: Number(dayTime[2]), second: 0, millisecond: 0 })
    : DateTime.fromISO(startAt.trim(), { zone });
  if (!at.isValid) {
    throw new Error(`"${startAt}" is not a time. Write 10:00, or an instant like 2026-12-01T10:00:00Z.`);
  }
  return at.toJSDate();
}

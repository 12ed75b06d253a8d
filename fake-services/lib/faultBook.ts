import { seededChance } from '#fakes/lib/chance';

/** When a fault strikes. Without `share` and `next` it strikes every time. */
export interface FaultTrigger {
  /** Chance of striking, 0 to 1, drawn from the seed. */
  share?: number;
  /** Strikes the next n times, then is spent. */
  next?: number;
  /** Only what goes to this number or address. */
  to?: string;
}

interface Armed<Fault> {
  fault: Fault;
  left: number;
  chance: () => number;
}

/** The faults that are set at present, each with its own stream of chance so that they do not disturb one another. */
export class FaultBook<Fault extends FaultTrigger & { kind: string }> {
  #armed: Armed<Fault>[] = [];
  #added = 0;

  constructor(private seed = 1) {}

  add(faults: Fault[]): void {
    for (const fault of faults) {
      const chance = seededChance(this.seed + 7919 * this.#added);
      this.#armed.push({ fault, left: fault.next ?? Infinity, chance });
      this.#added += 1;
    }
  }

  /** A new seed holds for faults that are added afterwards. */
  reseed(seed: number): void {
    this.seed = seed;
    this.#added = 0;
  }

  clear(): void {
    this.#armed = [];
    this.#added = 0;
  }

  list(): Fault[] {
    return this.#armed.filter((armed) => armed.left > 0).map((armed) => armed.fault);
  }

  /** The first fault of these kinds that strikes now, spent by one. */
  strike<Kind extends Fault['kind']>(
    kinds: readonly Kind[],
    recipients: readonly string[],
  ): Extract<Fault, { kind: Kind }> | undefined {
    const struck = this.#armed.find((armed) => this.#strikes(armed, kinds, recipients));
    if (!struck) return undefined;
    struck.left -= 1;
    return struck.fault as Extract<Fault, { kind: Kind }>;
  }

  #strikes(armed: Armed<Fault>, kinds: readonly string[], recipients: readonly string[]): boolean {
    const { fault } = armed;
    if (armed.left <= 0 || !kinds.includes(fault.kind)) return false;
    if (fault.to !== undefined && !recipients.includes(fault.to)) return false;
    return fault.share === undefined || armed.chance() < fault.share;
  }
}

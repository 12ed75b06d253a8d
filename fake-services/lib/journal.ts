import {
  appendFileSync,
  closeSync,
  existsSync,
  fsyncSync,
  mkdirSync,
  openSync,
  readFileSync,
  truncateSync,
} from 'node:fs';
import { dirname } from 'node:path';

/** An append-only file with one JSON value a line. */
export interface Journal<Entry> {
  /** Writes and, with `durable`, waits for the disk, so that a kill right after cannot lose the line. */
  append(entry: Entry, durable?: boolean): void;
  entries(): Entry[];
  close(): void;
}

/** Without a path nothing is kept: what a short test wants. */
export function openJournal<Entry>(path?: string): Journal<Entry> {
  if (!path) return { append: () => undefined, entries: () => [], close: () => undefined };
  mkdirSync(dirname(path), { recursive: true });
  const loaded = readWholeLines<Entry>(path);
  const file = openSync(path, 'a');
  let closed = false;
  return {
    append(entry, durable = false) {
      if (closed) return; // A request that outlived the stop: nobody can be answered for it any more.
      appendFileSync(file, `${JSON.stringify(entry)}\n`);
      if (durable) fsyncSync(file);
    },
    entries: () => loaded,
    close() {
      if (!closed) closeSync(file);
      closed = true;
    },
  };
}

/** A kill may leave half a line at the end: it was never answered for, so it is cut off. */
function readWholeLines<Entry>(path: string): Entry[] {
  if (!existsSync(path)) return [];
  const bytes = readFileSync(path);
  const end = bytes.lastIndexOf(0x0a) + 1;
  if (end < bytes.length) truncateSync(path, end);
  const lines = bytes.subarray(0, end).toString('utf8').split('\n');
  return lines.filter((line) => line !== '').map((line) => JSON.parse(line) as Entry);
}

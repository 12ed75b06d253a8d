import { describe, expect, it } from 'vitest';
import { messages as en } from './en';
import { messages as es } from './es';
import { MACHINE_KINDS } from '#shared/domain/machineKinds';
import { GUARD_KEYS, GUARDS, OUTCOMES, PARTS_REASONS, STAGES } from '#shared/domain/stages';
import { ERROR_CODES } from '#shared/errors';

const sources = import.meta.glob<string>(
  ['../../{shared,server}/**/*.ts', '../**/*.{ts,vue}', '!**/*.test.ts'],
  {
    eager: true,
    query: '?raw',
    import: 'default',
  },
);

/** The message at a dotted key, as the catalogue file has it. */
function messageAt(messages: unknown, key: string): unknown {
  return key
    .split('.')
    .reduce<unknown>((at, step) => (at as Record<string, unknown> | undefined)?.[step], messages);
}

const keysOf = (pattern: RegExp) =>
  [...new Set(Object.values(sources).flatMap((source) => source.match(pattern) ?? []))].sort();

const guardKeys = GUARD_KEYS.flatMap((guard) => {
  const met = ['name', 'ask', 'met', 'how'];
  const without = GUARDS[guard].without.length > 0 ? ['without', 'left_out', 'why'] : [];
  return [...met, ...without].map((word) => `guards.${guard}.${word}`);
});

describe.each([
  ['English', en],
  ['Spanish', es],
])('the app in %s', (_language, messages) => {
  it.each([
    ['error', ERROR_CODES.map((code) => `errors.${code}`)],
    ['wrong field', keysOf(/(?<=')errors\.field\.[a-z_]+(?=')/g)],
    ['stage', STAGES.flatMap((stage) => [`stages.${stage}.word`, `stages.${stage}.customer`])],
    ['outcome', OUTCOMES.flatMap((outcome) => [`outcomes.${outcome}.word`, `outcomes.${outcome}.customer`])],
    ['guard', guardKeys],
    ['reason to wait for parts', PARTS_REASONS.map((reason) => `partsReasons.${reason}`)],
    ['kind of machine', MACHINE_KINDS.map((kind) => `machine.kind.${kind}`)],
    ['title of a page', keysOf(/(?<=')common\.title\.[a-z_]+(?=')/g)],
    ['key of a page', keysOf(/(?<=[^\w.]t\(')(?:common|welcome|signin)\.[a-z_.]+(?=')/g)],
  ])('has words for every %s', (_what, keys) => {
    expect(keys.length).toBeGreaterThan(2);
    const missing = keys.filter((key) => messageAt(messages, key) === undefined);
    expect(missing).toEqual([]);
  });
});

/** Breaks a body that is right in one point at a time, led by the schema that the server reads it with. */
import { z, type ZodType } from 'zod';

type Node = z.core.JSONSchema.BaseSchema;
type Path = (string | number)[];

export interface Mutant {
  /** What was done, and where. */
  what: string;
  path: string;
  body: unknown;
}

/** Every mutant of a body. */
export function mutantsOf(schema: ZodType, body: object): Mutant[] {
  const root = z.toJSONSchema(schema, { io: 'input', unrepresentable: 'any' }) as Node;
  return [...walk(root, body, [], body)];
}

function* walk(node: Node, value: unknown, path: Path, body: object): Generator<Mutant> {
  const variant = variantOf(node, value);
  const here = (what: string, broken: unknown, at: Path = path): Mutant => ({
    what,
    path: at.join('.'),
    body: at === path || broken !== undefined ? replaced(body, at, broken) : body,
  });
  if (path.length > 0) {
    if (!allows(node, 'null')) yield here('null', null);
    yield here('nested lists', [[[[]]]]);
    yield here('an object', { a: { b: 1 } });
  }
  if (typeof value === 'string') yield* strings(variant, here, allows(node, 'number'));
  if (typeof value === 'number') yield* numbers(here);
  if (typeof value === 'boolean') yield* [here('a word', 'yes'), here('a number', 1)];
  if (Array.isArray(value)) yield* lists(variant, value, path, body, here);
  else if (typeof value === 'object' && value !== null) {
    yield* objects(variant, value as Record<string, unknown>, path, body, here);
  }
}

type Here = (what: string, broken: unknown, at?: Path) => Mutant;

function* strings(node: Node, here: Here, takesNumbers: boolean): Generator<Mutant> {
  yield here('zero byte', 'a\u0000b');
  yield here('half a surrogate pair', 'a\ud800');
  yield here('50,000 characters', 'x'.repeat(50_000));
  yield here('true', true);
  if (!takesNumbers) yield here('a huge number', 1e300);
  if (typeof node.maxLength === 'number') yield here('one too long', 'x'.repeat(node.maxLength + 1));
  if (node.enum || node.const !== undefined) yield here('a choice not offered', 'something_else');
}

function* numbers(here: Here): Generator<Mutant> {
  yield here('digits in quotes', '1');
  yield here('a huge number', 1e300);
  yield here('below nothing', -1);
  yield here('a fraction', 1.5);
}

function* lists(node: Node, value: unknown[], path: Path, body: object, here: Here): Generator<Mutant> {
  yield here('no list', 'x');
  if (node.maxItems) yield here('one too many', Array<unknown>(node.maxItems + 1).fill(value[0] ?? {}));
  if (node.minItems) yield here('none', []);
  for (const [index, entry] of value.entries()) {
    yield* walk((node.items ?? {}) as Node, entry, [...path, index], body);
  }
}

function* objects(
  node: Node,
  value: Record<string, unknown>,
  path: Path,
  body: object,
  here: Here,
): Generator<Mutant> {
  if (path.length > 0) yield here('no object', 'x');
  if (node.additionalProperties === false) {
    yield here('an unknown key', 1, [...path, 'unheard_of']);
    yield here('a key of every object', 1, [...path, 'constructor']);
  }
  for (const [name, entry] of Object.entries(value)) {
    const at = [...path, name];
    if (node.required?.includes(name)) {
      yield { what: 'missing', path: at.join('.'), body: replaced(body, at) };
    }
    yield* walk((node.properties?.[name] ?? {}) as Node, entry, at, body);
  }
}

/** Of alternatives, the one that the value is of. */
function variantOf(node: Node, value: unknown): Node {
  const variants = node.anyOf ?? node.oneOf ?? [];
  if (variants.length === 0) return node;
  return variants.find((variant) => fits(variant, value)) ?? variants[0] ?? node;
}

function fits(node: Node, value: unknown): boolean {
  const type = value === null ? 'null' : Array.isArray(value) ? 'array' : typeof value;
  if (node.type !== type) return false;
  if (type !== 'object') return true;
  const given = value as Record<string, unknown>;
  const parts = Object.entries(node.properties ?? {}) as [string, Node][];
  return parts.every(([name, { const: fixed }]) => fixed === undefined || given[name] === fixed);
}

function allows(node: Node, type: string): boolean {
  const variants = node.anyOf ?? node.oneOf ?? [];
  return node.type === type || variants.some((variant) => allows(variant, type));
}

/** A copy of the body with the value at a path replaced, or left out. */
function replaced(body: object, path: Path, value?: unknown): unknown {
  if (path.length === 0) return value;
  const copy = structuredClone(body) as Record<string | number, unknown>;
  let holder = copy;
  for (const step of path.slice(0, -1)) holder = holder[step] as Record<string | number, unknown>;
  const last = path.at(-1) ?? '';
  if (value === undefined) Reflect.deleteProperty(holder, last);
  else Object.defineProperty(holder, last, { value, enumerable: true, configurable: true, writable: true });
  return copy;
}

/**
 * From zod's issues to sentences of ours: each becomes a dotted path, a key of the catalogue `errors.field.*` and
 * the numbers its sentence needs. Client and server use the same, so that a field reads the same from both.
 */
import type { z } from 'zod';

export interface DescribedIssue {
  /** Dotted path into the body: `machines.0.words`; empty for the body as a whole. */
  path: string;
  key: string;
  params?: Record<string, string | number>;
}

type Issue = z.core.$ZodIssue;

const OWN_KEY = /^errors\.[a-z_.]+$/;

/** One issue of zod as path, key and params. A message of ours is a key already; zod's own are never shown. */
export function describeIssue(issue: Issue): DescribedIssue {
  const inner = innerIssue(issue);
  if (inner) return describeIssue(inner);
  const params = paramsOf(issue);
  const key = OWN_KEY.test(issue.message) ? issue.message : keyOf(issue);
  const path = pathOf(issue);
  return params ? { path, key, params } : { path, key };
}

/** All issues, one for each path: the first, since one sentence under a field is enough. */
export function describeIssues(issues: readonly Issue[]): DescribedIssue[] {
  const byPath = new Map<string, DescribedIssue>();
  for (const described of issues.map(describeIssue)) {
    if (!byPath.has(described.path)) byPath.set(described.path, described);
  }
  return [...byPath.values()];
}

/** Of a union that fits nowhere, the branch that says something of ours: a blank or an address, say. */
function innerIssue(issue: Issue): Issue | undefined {
  if (issue.code !== 'invalid_union') return undefined;
  const found = issue.errors.flat().find((candidate) => OWN_KEY.test(candidate.message));
  return found && { ...found, path: [...issue.path, ...found.path] };
}

function pathOf(issue: Issue): string {
  const extra = issue.code === 'unrecognized_keys' ? issue.keys.slice(0, 1) : [];
  return [...issue.path, ...extra].map(String).join('.');
}

function paramsOf(issue: Issue): DescribedIssue['params'] {
  if (issue.code === 'too_big') return { max: Number(issue.maximum) };
  if (issue.code === 'too_small') return { min: Number(issue.minimum) };
  return undefined;
}

function keyOf(issue: Issue): string {
  switch (issue.code) {
    case 'invalid_type':
      return isMissing(issue) ? 'errors.field.required' : 'errors.field.wrong';
    case 'invalid_value':
    case 'invalid_union':
      return 'errors.field.choose';
    case 'unrecognized_keys':
      return 'errors.field.unknown';
    case 'too_big':
      return sizeKey(issue.origin, 'too_long', 'too_many', 'too_big');
    case 'too_small':
      if (issue.origin === 'string' && issue.minimum === 1) return 'errors.field.required';
      return sizeKey(issue.origin, 'too_short', 'too_few', 'too_small');
    default:
      return 'errors.field.wrong';
  }
}

/** Zod 4 leaves the input out of a finished issue; that there was none stands only at the end of its message. */
function isMissing(issue: Issue): boolean {
  return /received (undefined|null)$/.test(issue.message);
}

function sizeKey(origin: string, ofText: string, ofList: string, ofNumber: string): string {
  if (origin === 'string') return `errors.field.${ofText}`;
  if (origin === 'array' || origin === 'set') return `errors.field.${ofList}`;
  return `errors.field.${ofNumber}`;
}

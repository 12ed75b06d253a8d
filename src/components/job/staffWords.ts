/** Words of the staff screens that are built from the table rather than looked up. Staff screens are in English. */
import type { StaffRole } from '#shared/domain/roles';
import type { Stage } from '#shared/domain/stages';

/** "a, b or c". */
export function anyOf(words: readonly string[]): string {
  if (words.length < 2) return words[0] ?? '';
  return `${words.slice(0, -1).join(', ')} or ${words[words.length - 1]}`;
}

/** "the counter or the owner". */
export function whoOf(roles: readonly StaffRole[]): string {
  return anyOf(roles.map((role) => `the ${role}`));
}

/** A sentence begins with a capital. */
export function sentence(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}

/** Who holds the machine while it is in a stage. */
export const HOLDER: Partial<Record<Stage, string>> = {
  booked: 'not here yet',
  checked_in: 'ours to do',
  diagnosis: 'ours to do',
  awaiting_approval: 'with the customer',
  awaiting_parts: 'with the supplier',
  repair: 'ours to do',
  test_run: 'ours to do',
  ready: 'with the customer',
  collected: 'gone today',
};

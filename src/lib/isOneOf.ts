/** Whether a value is one of a closed list, and of its type from there on. */
export function isOneOf<Item extends string>(list: readonly Item[], value: string): value is Item {
  return list.some((item) => item === value);
}

/** Reading and writing one field of a scenario document by its keys. */

export type Keys = readonly (string | number)[];

/** What stands in a document at some keys; undefined where nothing does. */
export const fieldAt = (holder: unknown, keys: Keys): unknown =>
  keys.reduce<unknown>((value, key) => (value as Record<string | number, unknown> | undefined)?.[key], holder);

/**
 * A copy of a document with one field replaced; what did not change is shared. Undefined takes the field out, and the
 * objects that are empty without it; entries of lists stay.
 */
export function withField<Holder>(holder: Holder, keys: Keys, value: unknown): Holder {
  const [key, ...rest] = keys;
  if (key === undefined) return value as Holder;
  const inner = withField(fieldAt(holder, [key]), rest, value);
  if (Array.isArray(holder)) return holder.with(Number(key), inner ?? {}) as Holder;
  const copy: Record<string, unknown> = { ...(holder as object | undefined), [key]: inner };
  if (inner === undefined) delete copy[key];
  const emptied = inner === undefined && Object.keys(copy).length === 0;
  return (emptied ? undefined : copy) as Holder;
}

/** How many fields two documents differ in. */
export function countDifferences(one: unknown, other: unknown): number {
  if (one === other) return 0;
  const isObject = (value: unknown): value is Record<string, unknown> => typeof value === "object" && value !== null;
  if (!isObject(one) || !isObject(other)) return 1;
  const names = new Set([...Object.keys(one), ...Object.keys(other)]);
  return [...names].reduce((sum, name) => sum + countDifferences(one[name], other[name]), 0);
}

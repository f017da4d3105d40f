/**
 * Canonical JSON: RFC 8785 (Rundgren, Jordan, Erdtman, 2020). Numbers and strings are written as ECMAScript does
 * (its sections 3.2.2.2 and 3.2.2.3), keys are sorted by UTF-16 code units (3.2.3), nothing stands between tokens.
 */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(",")}]`;
  if (typeof value === "object" && value !== null) {
    const members = Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, member]) => `${canonicalJson(key)}:${canonicalJson(member)}`);
    return `{${members.join(",")}}`;
  }
  if (typeof value === "number" && !Number.isFinite(value)) throw new TypeError(`${value} has no form in JSON`);
  if (typeof value === "string" && /\p{Surrogate}/u.test(value))
    throw new TypeError("a lone surrogate has no form in JSON");
  const text = JSON.stringify(value);
  if (text === undefined) throw new TypeError(`${typeof value} has no form in JSON`);
  return text;
}

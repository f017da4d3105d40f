import type { ScenarioDocument } from "@demilune/solver";

/** Numbers of an earlier document that differ from the present one's, by path; lists are compared entry by entry. */
export function heldNumbers(earlier: ScenarioDocument, present: ScenarioDocument): Record<string, number> {
  const found: Record<string, number> = {};
  const compare = (before: unknown, now: unknown, path: string) => {
    if (before === now) return;
    if (typeof before === "number") {
      found[path] = before;
      return;
    }
    if (typeof before !== "object" || before === null) return;
    for (const [key, value] of Object.entries(before))
      compare(value, (now as Record<string, unknown> | null | undefined)?.[key], path ? `${path}.${key}` : key);
  };
  compare(earlier, present, "");
  return found;
}

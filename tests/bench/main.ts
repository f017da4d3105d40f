/**
 * Benches. `npm run bench` runs all, `npm run bench -- NAME …` some. What is found goes to standard error in words and to standard
 * output as JSON: of one bench its object, of several one object by name. A bench is a file beside this one that exports
 * `run(say)`, entered below.
 */

/** Measures something, says it in words line by line, and returns the numbers. */
export type Bench = (say: (line: string) => void) => object | Promise<object>;

const benches: Record<string, () => Promise<{ run: Bench }>> = {
  yardstick: () => import("./yardstick.ts"),
  smallSignal: () => import("./smallSignal.ts"),
  closedForm: () => import("./closedForm.ts"),
  drag: () => import("./drag.ts"),
  robustness: () => import("./robustness.ts"),
};

const asked = process.argv.slice(2);
const unknown = asked.filter((name) => !(name in benches));
if (unknown.length > 0) {
  console.error(`There is no bench ${unknown.join(", ")}; there are ${Object.keys(benches).join(", ")}.`);
  process.exit(2);
}
const results: Record<string, object> = {};
for (const name of asked.length > 0 ? asked : Object.keys(benches)) {
  console.error(name);
  const { run } = await benches[name]();
  results[name] = await run((line) => console.error(`  ${line}`));
}
console.log(JSON.stringify(asked.length === 1 ? results[asked[0]] : results, null, 2));

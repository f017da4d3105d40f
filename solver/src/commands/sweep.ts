/** The command `sweep`: a family of results over one or two numbers of a scenario. */
import { refuse } from "../scenario/errors.ts";
import { withNumber } from "../scenario/paths.ts";
import { parseScenario } from "../scenario/resolve.ts";
import { solve } from "../solve.ts";
import { type CommandLine, fileNames, jsonText, readJson, runCommand } from "./command.ts";

interface Axis {
  path: string;
  values: number[];
}

function numbersOf(text: string): number[] {
  return text.split(",").map((one) => {
    const value = one.trim() === "" ? Number.NaN : Number(one);
    if (!Number.isFinite(value)) refuse("--values", `holds "${one}", not a number`, "numbers joined by commas");
    return value;
  });
}

/** The pairs of --path and --values in their order. */
function axesOf(line: CommandLine): Axis[] {
  const paths = line.texts("path");
  const values = line.texts("values");
  if (paths.length !== values.length)
    refuse(paths.length > values.length ? "--values" : "--path", "is missing", "each --path with its --values");
  if (paths.length < 1 || paths.length > 2) refuse("--path", `is given ${paths.length} times`, "one or two paths");
  return paths.map((path, k) => ({ path, values: numbersOf(values[k]) }));
}

type Setting = { path: string; value: number };

/** Every combination, the last axis fastest. */
const combinations = (axes: readonly Axis[]): Setting[][] =>
  axes.reduce<Setting[][]>(
    (before, { path, values }) => before.flatMap((settings) => values.map((value) => [...settings, { path, value }])),
    [[]],
  );

runCommand({
  help: `Usage: npm run --silent sweep -- SCENARIO.json --path PATH --values NUMBER,NUMBER…

Prints an array of result documents in the order of the values, each with "sweep": [{ "path", "value" }].
SCENARIO.json may be - for standard input.
  --path    dotted path of a number, such as stack.layers.0.thicknessNm; tied paths are joined by +
  --values  the values that it takes
A second pair of options gives the product of both, the last path fastest.
Exit code: 0 solved, 2 bad input or a refused request, 3 something was not solved (it keeps its place).
`,
  options: { path: "text", values: "text" },
  run: (line) => {
    const [name] = fileNames(line, ["SCENARIO.json"]);
    const axes = axesOf(line);
    const document = readJson(name);
    const elements = combinations(axes).map((sweep) => ({
      sweep,
      scenario: parseScenario(sweep.reduce((changed, { path, value }) => withNumber(changed, path, value), document)),
    }));
    const results = elements.map(({ sweep, scenario }) => ({ ...solve(scenario), sweep }));
    return { text: jsonText(results), solved: results.every(({ status }) => status === "solved") };
  },
});

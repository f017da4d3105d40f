/** The command `fit`: free parameters of a scenario from measured spectra. */
import { fitDocument, fitScenario } from "../fit/fit.ts";
import { refuse } from "../scenario/errors.ts";
import { type CommandLine, fileNames, jsonText, readJson, readText, runCommand } from "./command.ts";
import { parseDataFile } from "./dataFile.ts";

const list = (line: CommandLine, name: string): string[] =>
  line
    .texts(name)
    .flatMap((text) => text.split(","))
    .map((text) => text.trim())
    .filter((text) => text !== "");

function boundsOf(line: CommandLine): Record<string, [number, number]> {
  return Object.fromEntries(
    list(line, "bounds").map((text): [string, [number, number]] => {
      const match = /^([^=]+)=([^:]+):([^:]+)$/.exec(text);
      const ends = match ? [Number(match[2]), Number(match[3])] : [];
      if (match === null || !ends.every(Number.isFinite)) refuse("--bounds", `is "${text}"`, "PATH=low:high[,…]");
      return [match[1].trim(), [ends[0], ends[1]]];
    }),
  );
}

runCommand({
  help: `Usage: npm run --silent fit -- SCENARIO.json DATA.csv [DATA.csv …] --free PATH[,PATH…] [--bounds PATH=low:high[,…]]

Fits the free parameters of a scenario to measured spectra and prints status, parameters with standard errors and
95 % intervals, chiSquare, aicc and what the data do not resolve, in JSON. Each file brings its technique, bias, flux
and frequencies. Paths are dotted with list indices from 0; several joined by + are tied. Start values are the
document's; default bounds a factor 1000 each way within the permitted range.
Exit code: 0 converged, 2 bad input, 3 not solved or not converged.
`,
  options: { free: "text", bounds: "text" },
  run: (line) => {
    const [scenario, ...files] = fileNames(line, ["SCENARIO.json", "DATA.csv"], true);
    const free = list(line, "free");
    if (free.length === 0) refuse("--free", "is missing", "one or more paths, separated by commas");
    const bounds = boundsOf(line);
    const document = readJson(scenario);
    const data = files.map((name) => parseDataFile(readText(name), name));
    const result = fitScenario({ scenarios: [document], data, free, bounds });
    return { text: jsonText(fitDocument(result)), solved: result.status === "converged" };
  },
});

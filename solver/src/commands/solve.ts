/** The command `solve`: the spectra that a scenario predicts. */
import type { ResultDocument } from "../result.ts";
import { solve } from "../solve.ts";
import { fileNames, jsonText, readJson, runCommand } from "./command.ts";

/** One row a point, spectra numbered from 0; unsolved spectra have no rows. */
function csvText({ spectra }: ResultDocument): string {
  const rows = spectra.flatMap((spectrum, index) =>
    spectrum.status === "solved"
      ? spectrum.frequencyHz.map(
          (frequency, k) => `${index},${spectrum.technique},${frequency},${spectrum.re[k]},${spectrum.im[k]}`,
        )
      : [],
  );
  return `${["spectrum,technique,frequencyHz,re,im", ...rows].join("\n")}\n`;
}

runCommand({
  help: `Usage: npm run --silent solve -- SCENARIO.json [--csv]

Prints the result document of a scenario in JSON. SCENARIO.json may be - for standard input.
  --csv   prints spectrum,technique,frequencyHz,re,im instead, one row a point
Exit code: 0 solved, 2 bad input or a refused request, 3 something was not solved.
`,
  options: { csv: "flag" },
  run: (line) => {
    const [name] = fileNames(line, ["SCENARIO.json"]);
    const result = solve(readJson(name));
    return { text: line.flag("csv") ? csvText(result) : jsonText(result), solved: result.status === "solved" };
  },
});

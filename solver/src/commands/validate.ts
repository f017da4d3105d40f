/** The command `validate`: the checks of a measured spectrum. */
import { validateMeasured } from "../analysis/validateMeasured.ts";
import { fileNames, jsonText, readText, runCommand } from "./command.ts";
import { parseDataFile } from "./dataFile.ts";

runCommand({
  help: `Usage: npm run --silent validate -- DATA.csv

Prints the checks of a measured spectrum in JSON: kramersKronig, noise and drift, each verdict one of holds, marginal,
fails, notTested, with what could have been seen. DATA.csv may be - for standard input. It holds lines "# key: value"
(technique: imps|imvs|impedance; bias, fluxPerCm2S), a header and the columns frequencyHz,re,im[,sigma][,timeS].
Exit code: 0 done, also where a check fails; 2 bad input.
`,
  options: {},
  run: (line) => {
    const [name] = fileNames(line, ["DATA.csv"]);
    return { text: jsonText(validateMeasured(parseDataFile(readText(name), name))), solved: true };
  },
});

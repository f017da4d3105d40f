/** The command `arcs`: the arcs of every spectrum of a result document. */
import * as z from "zod/mini";
import { arcsOf } from "../analysis/arcs.ts";
import { resultFormatName } from "../result.ts";
import { type Fault, ScenarioError } from "../scenario/errors.ts";
import { techniques } from "../scenario/schema.ts";
import { fileNames, jsonText, readJson, runCommand } from "./command.ts";

const finiteNumbers = z.array(z.number({ error: "is not a finite number" }), { error: "is not a list of numbers" });

/** What the command needs of a result; its other fields are not looked at. */
const resultSchema = z.object({
  format: z.optional(z.literal(resultFormatName, { error: `is not "${resultFormatName}"` })),
  spectra: z.array(
    z.object({
      technique: z.enum(techniques, { error: `is not one of ${techniques.join(", ")}` }),
      status: z.optional(z.string({ error: "is no text" })),
      frequencyHz: z.optional(finiteNumbers),
      re: z.optional(finiteNumbers),
      im: z.optional(finiteNumbers),
    }),
    { error: "is not a list of spectra" },
  ),
});

type Spectrum = z.infer<typeof resultSchema>["spectra"][number];
interface Curve {
  frequencyHz: number[];
  re: number[];
  im: number[];
}

/** The arrays in ascending order of frequency; null for a spectrum that was not solved. */
function curveOf({ status, frequencyHz, re, im }: Spectrum, path: string, faults: Fault[]): Curve | null {
  if (status !== undefined && status !== "solved") return null;
  if (!frequencyHz || !re || !im || re.length !== frequencyHz.length || im.length !== frequencyHz.length) {
    faults.push({
      path,
      message: "has no frequencyHz, re and im of one length",
      allowed: "three lists of numbers of one length",
    });
    return null;
  }
  const order = frequencyHz.map((_, k) => k).sort((a, b) => frequencyHz[a] - frequencyHz[b]);
  const wrong = order.findIndex(
    (k, place) => !(frequencyHz[k] > 0) || (place > 0 && frequencyHz[k] === frequencyHz[order[place - 1]]),
  );
  if (wrong >= 0) {
    faults.push({
      path: `${path}.frequencyHz.${order[wrong]}`,
      message: `is ${frequencyHz[order[wrong]]}`,
      allowed: "frequencies above 0, each once",
    });
    return null;
  }
  return {
    frequencyHz: order.map((k) => frequencyHz[k]),
    re: order.map((k) => re[k]),
    im: order.map((k) => im[k]),
  };
}

runCommand({
  help: `Usage: npm run --silent arcs -- RESULT.json

Prints the arcs of every spectrum of a result document, as "solve" prints it: a list in JSON with one entry
{ "technique", "arcs": [{ "peakHz", "timeConstantS", "spanRe", "spanIm", "quadrant", "depression" }] } per spectrum,
arcs from low to high frequency. A spectrum that was not solved has no arcs. RESULT.json may be - for standard input.
Exit code: 0 done, 2 bad input, 3 the result holds a spectrum that was not solved.
`,
  options: {},
  run: (line) => {
    const [name] = fileNames(line, ["RESULT.json"]);
    const parsed = resultSchema.safeParse(readJson(name));
    if (!parsed.success) {
      throw new ScenarioError(
        parsed.error.issues.map((issue) => ({
          path: issue.path.join(".") || name,
          message: issue.message,
          allowed: "a result document as the command solve prints it",
        })),
      );
    }
    const faults: Fault[] = [];
    const curves = parsed.data.spectra.map((spectrum, k) => curveOf(spectrum, `spectra.${k}`, faults));
    if (faults.length > 0) throw new ScenarioError(faults);
    const answer = parsed.data.spectra.map(({ technique }, k) => {
      const curve = curves[k];
      return { technique, arcs: curve ? arcsOf(curve).arcs : [] };
    });
    return { text: jsonText(answer), solved: curves.every((curve) => curve !== null) };
  },
});

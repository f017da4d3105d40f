/** A prediction as a file for other programs: one row a point, units and operating points in comment lines. */
import type { ResultDocument } from "@demilune/solver";
import { biasWords, techniqueNames } from "./spectrumNames";

/** Columns spectrum (from 0), technique, frequencyHz, re, im in full precision; unsolved spectra have no rows. */
export function predictionCsv(name: string, result: ResultDocument): string {
  const comments = [
    `# ${name.replaceAll(/\s+/g, " ")}`,
    `# solver ${result.solver}, hash ${result.hash}`,
    ...result.spectra.map((spectrum, index) => {
      const { technique, bias, unit, fluxPerCm2S } = spectrum;
      const outcome = spectrum.status === "solved" ? `unit ${unit}` : `not solved: ${spectrum.failure.message}`;
      return `# spectrum ${index}: ${techniqueNames[technique]} at ${biasWords(bias)}, ${fluxPerCm2S} photons cm⁻² s⁻¹, ${outcome}`;
    }),
  ];
  const rows = result.spectra.flatMap((spectrum, index) =>
    spectrum.status === "solved"
      ? spectrum.frequencyHz.map(
          (frequency, place) =>
            `${index},${spectrum.technique},${frequency},${spectrum.re[place]},${spectrum.im[place]}`,
        )
      : [],
  );
  return `${[...comments, "spectrum,technique,frequencyHz,re,im", ...rows].join("\n")}\n`;
}

/**
 * The starter stacks: six kinds of device and one variant, to begin a scenario from. Every value is a typical value
 * without source, silicon's gap, affinity and permittivity aside; pages that offer them say so.
 */
import type { ScenarioDocument } from "@demilune/solver";
import dyeFilm from "../../drizzle/starters/dye-film.json";
import organicBlend from "../../drizzle/starters/organic-blend.json";
import oxidePhotoanode from "../../drizzle/starters/oxide-photoanode.json";
import perovskiteCations from "../../drizzle/starters/perovskite-cations.json";
import perovskiteCationsBetter from "../../drizzle/starters/perovskite-cations-better.json";
import photodiode from "../../drizzle/starters/photodiode.json";
import siliconWafer from "../../drizzle/starters/silicon-wafer.json";

export interface Starter {
  /** Part of an address. */
  key: string;
  /** What one sees in its spectra, in a line. */
  shows: string;
  document: ScenarioDocument;
}

export const startersNote =
  "All values of the starter stacks are typical values without source, except the gap, affinity and permittivity of silicon.";

const starter = (key: string, document: unknown, shows: string): Starter => ({
  key,
  shows,
  // The files are checked against the schema by a test.
  document: document as ScenarioDocument,
});

/** The first one is the scenario a newcomer lands on. */
export const starters: readonly Starter[] = [
  starter(
    "perovskite-cations",
    perovskiteCations,
    "A fast arc near 1 MHz and a slow one of the cations near 4 Hz; ten times the cation mobility moves only the slow one.",
  ),
  starter(
    "perovskite-cations-better",
    perovskiteCationsBetter,
    "The same cell with less recombination: the ionic arc shrinks to 0.3 %.",
  ),
  starter("dye-film", dyeFilm, "Diffusion and recombination of electrons in a porous film, one arc for each."),
  starter("organic-blend", organicBlend, "Transit and RC merged into one arc."),
  starter(
    "oxide-photoanode",
    oxidePhotoanode,
    "Two arcs in opposite half planes: surface transfer and recombination against RC.",
  ),
  starter(
    "silicon-wafer",
    siliconWafer,
    "Minority carriers that diffuse through a wafer; lit from the back the spectrum curls into a spiral.",
  ),
  starter("photodiode", photodiode, "Transit against RC in the megahertz to gigahertz range."),
];

export const starterNamed = (key: string): Starter | undefined => starters.find((one) => one.key === key);

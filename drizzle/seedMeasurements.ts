/**
 * Measured spectra of the invented lab. Nothing was measured: they are solved from devices that differ from the
 * starters they are laid over (films of two layers in place of one, other ions, other rates), with noise and a drift,
 * and written as the text files of an invented instrument, which are then imported like any other file.
 */
import { type ScenarioDocument, type SolvedSpectrum, solve } from "@demilune/solver";
import { starterNamed } from "~/lib/starters";
import { readMeasurementText } from "~/lib/textImport/readText";
import { countMeasurements, importMeasurements } from "~/models/measurements.server";
import { attachMeasurement } from "~/models/overlays.server";
import { createSample } from "~/models/samples.server";
import { listScenarios } from "~/models/scenarios.server";

interface Actor {
  labId: string;
  userId: string;
}

/** A generator of uniform numbers from 0 to 1 with a seed (mulberry32), so that every demo has the same data. */
function uniform(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
}

/** Standard normal numbers (Box and Muller, Ann. Math. Stat. 29, 610 (1958)). */
function normal(seed: number): () => number {
  const next = uniform(seed);
  return () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next());
}

interface Disturbance {
  seed: number;
  /** Standard deviation of Re and of Im, each, over the modulus. */
  noise: number;
  /** Loss of gain over the sweep, which runs from high to low frequency. */
  drift: number;
}

/** The spectrum as an instrument would have swept it: high to low, noisy, its gain sinking meanwhile. */
function disturbed({ frequencyHz, re, im }: SolvedSpectrum, { seed, noise, drift }: Disturbance) {
  const random = normal(seed);
  const last = frequencyHz.length - 1;
  return frequencyHz
    .map((hz, index) => {
      const gain = 1 - (drift * (last - index)) / last;
      const size = Math.hypot(re[index], im[index]) * noise;
      return { hz, re: gain * re[index] + size * random(), im: gain * im[index] + size * random() };
    })
    .toReversed();
}

type Row = ReturnType<typeof disturbed>[number];

/** Re and Im with a decimal comma, as the invented instrument's German setting writes them. */
function cartesianFile(head: readonly string[], rows: readonly Row[], unit: string): string {
  const comma = (value: number) => value.toExponential(5).replace(".", ",");
  const lines = rows.map(({ hz, re, im }) => [comma(hz), comma(re), comma(-im)].join(";"));
  return [...head, `f/Hz;Re/${unit};-Im/${unit}`, ...lines, ""].join("\r\n");
}

/** Modulus and phase in degrees, tab-separated. */
function polarFile(head: readonly string[], rows: readonly Row[], unit: string): string {
  const lines = rows.map(({ hz, re, im }) =>
    [hz.toExponential(4), Math.hypot(re, im).toExponential(5), ((Math.atan2(im, re) * 180) / Math.PI).toFixed(3)].join(
      "\t",
    ),
  );
  return [...head, `frequency (Hz)\tmodulus (${unit})\tphase (deg)`, ...lines, ""].join("\r\n");
}

const solved = (document: ScenarioDocument, index: number): SolvedSpectrum => {
  const spectrum = solve(document).spectra[index];
  if (spectrum.status !== "solved") throw new Error(`The demo's data cannot be computed: ${spectrum.failure.message}`);
  return spectrum;
};

const documentOf = (key: string) => structuredClone(starterNamed(key)!.document);

/** A film of two layers whose electrons are slower near the far side, with finite extraction: no one-layer form fits it. */
function otherFilm(fluxPerCm2S: number): ScenarioDocument {
  const document = documentOf("dye-film");
  const [film] = document.stack.layers;
  return {
    ...document,
    stack: {
      ...document.stack,
      layers: [
        {
          ...film,
          thicknessNm: 4500,
          electronMobilityCm2PerVs: 1.3e-3,
          recombination: { electronLifetimeNs: 3.4e7, holeLifetimeNs: 3.4e7 },
        },
        {
          ...film,
          thicknessNm: 5200,
          electronMobilityCm2PerVs: 7e-4,
          recombination: { electronLifetimeNs: 3.4e7, holeLifetimeNs: 3.4e7 },
        },
      ],
    },
    light: { ...document.light, fluxPerCm2S },
    model: { kind: "diffusionLayers", overrides: { extractionVelocityCmPerS: 1.5 } },
    frequencies: { fromHz: 0.08, toHz: 5000, pointsPerDecade: 8 },
  };
}

/** An electrode with faster transfer and a thinner space charge than the starter's. */
function otherElectrode(): ScenarioDocument {
  const document = documentOf("oxide-photoanode");
  const [oxide] = document.stack.layers;
  return {
    ...document,
    stack: { ...document.stack, layers: [{ ...oxide, donorsPerCm3: 1.6e18 }] },
    model: {
      kind: "gaertner",
      overrides: { transferPerS: 11, surfaceRecombinationPerS: 17, helmholtzCapacitanceFPerCm2: 1.2e-5 },
    },
    frequencies: { fromHz: 0.15, toHz: 3e5, pointsPerDecade: 8 },
  };
}

/** A cell with fewer and faster ions, longer lifetimes and more series resistance. */
function otherCell(): ScenarioDocument {
  const document = documentOf("perovskite-cations");
  return {
    ...document,
    stack: {
      ...document.stack,
      layers: document.stack.layers.map((layer) => ({
        ...layer,
        ions: layer.ions && {
          ...layer.ions,
          cationsPerCm3: (layer.ions.cationsPerCm3 ?? 0) * 0.6,
          cationMobilityCm2PerVs: (layer.ions.cationMobilityCm2PerVs ?? 0) * 2,
        },
        recombination: layer.recombination && {
          ...layer.recombination,
          electronLifetimeNs: (layer.recombination.electronLifetimeNs ?? 1e9) * 1.25,
          holeLifetimeNs: (layer.recombination.holeLifetimeNs ?? 1e9) * 1.25,
        },
      })),
    },
    circuit: { ...document.circuit, seriesResistanceOhmCm2: 4.5 },
    frequencies: { fromHz: 0.03, toHz: 3e6, pointsPerDecade: 6 },
  };
}

const note = "Invented for the demo: computed from another device, with noise and a drift; nothing was measured.";

async function importFile(
  actor: Actor,
  fileName: string,
  text: string,
  sampleId: string,
  name: string,
): Promise<string> {
  const bytes = new TextEncoder().encode(text);
  const reading = readMeasurementText(bytes, fileName, {});
  if (reading.status === "refused" || reading.spectra.length !== 1 || reading.needs.length > 0) {
    throw new Error(`The demo's file ${fileName} cannot be read.`);
  }
  const [id] = await importMeasurements(
    actor,
    { name: fileName, bytes },
    [{ index: 0, name, spectrum: reading.spectra[0] }],
    {
      settings: {},
      sample: { id: sampleId },
      instrument: "invented bench 2",
      measuredAt: "2026-03-14",
      note,
      licence: "none needed: invented",
      invented: true,
    },
  );
  return id;
}

/** Gives the invented lab its samples and measurements, laid over the starters they resemble. */
export async function seedMeasurements(actor: Actor): Promise<void> {
  const { kept, archived } = await countMeasurements(actor.labId);
  if (kept + archived > 0) return;
  const { scenarios } = await listScenarios(actor.labId);
  const over = async (key: string, measurementId: string) => {
    const scenario = scenarios.find(({ name }) => name === starterNamed(key)?.document.name);
    if (scenario) await attachMeasurement(actor, scenario.id, measurementId);
  };

  const film = await createSample(actor, {
    name: "DF-21",
    group: "dyed films",
    contactSequence: "conducting glass / dyed oxide film / electrolyte / counter electrode",
    activeAreaCm2: 0.25,
    preconditioning: "10 min at open circuit under the bias light",
  });
  const filmHead = (technique: string, bias: string, flux: number) => [
    `# invented bench 2; ${technique}; sample DF-21; ${bias}; LED 530 nm`,
    `# area 0,25 cm2; flux ${flux.toExponential(1).replace(".", ",").replace("e", "E")} cm-2 s-1; T = 300 K`,
  ];
  const bright = otherFilm(2e15);
  const imps = cartesianFile(
    filmHead("IMPS", "short circuit", 2e15),
    disturbed(solved(bright, 0), { seed: 11, noise: 0.006, drift: 0.015 }),
    "1",
  );
  const imvs = cartesianFile(
    filmHead("IMVS", "open circuit", 2e15),
    disturbed(solved(bright, 1), { seed: 12, noise: 0.006, drift: 0.01 }),
    "Ohm cm2",
  );
  const dim = cartesianFile(
    filmHead("IMVS", "open circuit", 2e14),
    disturbed(solved(otherFilm(2e14), 1), { seed: 13, noise: 0.008, drift: 0.01 }),
    "Ohm cm2",
  );
  await over("dye-film", await importFile(actor, "DF-21_imps.txt", imps, film, "DF-21, IMPS"));
  await over("dye-film", await importFile(actor, "DF-21_imvs.txt", imvs, film, "DF-21, IMVS"));
  await importFile(actor, "DF-21_imvs_dim.txt", dim, film, "DF-21, IMVS, a tenth of the light");

  const electrode = await createSample(actor, {
    name: "OX-7",
    group: "oxide photoanodes",
    contactSequence: "conducting glass / oxide / electrolyte pH 13.6",
    activeAreaCm2: 0.5,
  });
  const electrodeHead = [
    "# invented bench 2",
    "# technique: IMPS, sample: OX-7, dc potential -0.5 V, LED 450 nm",
    "# flux 5.0E15 cm-2 s-1, area 0.50 cm2, temperature 300 K",
  ];
  const oxide = polarFile(
    electrodeHead,
    disturbed(solved(otherElectrode(), 0), { seed: 21, noise: 0.005, drift: 0.02 }),
    "1",
  );
  await over("oxide-photoanode", await importFile(actor, "OX-7_imps.txt", oxide, electrode, "OX-7, IMPS at −0.5 V"));

  const cell = await createSample(actor, {
    name: "MC-17",
    group: "mixed-cation cells",
    contactSequence: "conducting glass / electron conductor / perovskite / hole conductor / metal",
    activeAreaCm2: 0.16,
    preconditioning: "5 min at the operating point",
  });
  const document = otherCell();
  const requests = document.spectra ?? [];
  for (const [index, technique] of [
    [requests.findIndex((request) => request.technique === "imps"), "IMPS"],
    [requests.findIndex((request) => request.technique === "imvs"), "IMVS"],
  ] as const) {
    if (index < 0) continue;
    const atShort = technique === "IMPS";
    const head = [
      `# invented bench 2; ${technique}; sample MC-17; ${atShort ? "short circuit" : "open circuit"}; LED 520 nm`,
      `# area 0,16 cm2; flux ${document.light.fluxPerCm2S.toExponential(1).replace(".", ",").replace("e", "E")} cm-2 s-1; T = 300 K`,
    ];
    const only = { ...document, spectra: [requests[index]] };
    const rows = disturbed(solved(only, 0), { seed: 31 + index, noise: 0.005, drift: 0.01 });
    const text = cartesianFile(head, rows, atShort ? "1" : "Ohm cm2");
    const id = await importFile(actor, `MC-17_${technique.toLowerCase()}.txt`, text, cell, `MC-17, ${technique}`);
    await over("perovskite-cations", id);
  }
}

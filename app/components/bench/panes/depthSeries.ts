/** What can be drawn over depth at an operating point. */
import type { Profiles } from "@demilune/solver";
import type { Series } from "~/components/charts/series";
import type { ScaleKind } from "~/components/charts/view";

interface Curve {
  key: keyof Profiles;
  label: string;
  dash?: string;
}

export interface DepthPlot {
  id: string;
  label: string;
  yLabel: string;
  unit: string;
  scale: ScaleKind;
  curves: readonly Curve[];
}

export const depthPlots: readonly DepthPlot[] = [
  {
    id: "bands",
    label: "band edges and quasi-Fermi levels",
    yLabel: "*E*",
    unit: "eV",
    scale: "linear",
    curves: [
      { key: "conductionEdgeEV", label: "*E*_{c}" },
      { key: "valenceEdgeEV", label: "*E*_{v}" },
      { key: "electronFermiEV", label: "*E*_{Fn}", dash: "6 3" },
      { key: "holeFermiEV", label: "*E*_{Fp}", dash: "2 3" },
    ],
  },
  {
    id: "densities",
    label: "carrier densities",
    yLabel: "density",
    unit: "cm⁻³",
    scale: "log",
    curves: [
      { key: "electronsPerCm3", label: "electrons *n*" },
      { key: "holesPerCm3", label: "holes *p*", dash: "6 3" },
    ],
  },
  {
    id: "field",
    label: "field",
    yLabel: "*E*",
    unit: "V/cm",
    scale: "linear",
    curves: [{ key: "fieldVPerCm", label: "field" }],
  },
  {
    id: "rates",
    label: "generation and recombination",
    yLabel: "rate",
    unit: "cm⁻³ s⁻¹",
    scale: "log",
    curves: [
      { key: "generationPerCm3S", label: "generation" },
      { key: "shockleyReadHallPerCm3S", label: "through traps (SRH)", dash: "6 3" },
      { key: "bandToBandPerCm3S", label: "band to band", dash: "2 3" },
      { key: "augerPerCm3S", label: "Auger", dash: "8 3 2 3" },
    ],
  },
  {
    id: "ions",
    label: "ions",
    yLabel: "density",
    unit: "cm⁻³",
    scale: "log",
    curves: [
      { key: "cationsPerCm3", label: "cations" },
      { key: "anionsPerCm3", label: "anions", dash: "6 3" },
    ],
  },
  {
    id: "currents",
    label: "currents",
    yLabel: "*J*, + = photocurrent",
    unit: "mA/cm²",
    scale: "linear",
    curves: [
      { key: "electronCurrentMAPerCm2", label: "electrons" },
      { key: "holeCurrentMAPerCm2", label: "holes", dash: "6 3" },
    ],
  },
];

/** Least part of the largest value that a logarithmic axis shows: densities span more decades than one can read. */
const logReach = 1e-14;

/** The curves of one plot; a logarithmic one leaves out what is zero and what is immeasurably small. */
export function depthSeries(profiles: Profiles, { curves, scale }: DepthPlot): Series[] {
  const lists = curves.map((curve) => ({ curve, values: profiles[curve.key] as Float64Array }));
  const largest = Math.max(...lists.map(({ values }) => values.reduce((most, value) => Math.max(most, value), 0)));
  return lists.flatMap(({ curve, values }, position) => {
    const shown = Array.from(values.keys()).filter((index) => scale === "linear" || values[index] > logReach * largest);
    if (shown.length === 0) return [];
    return [
      {
        id: curve.key,
        label: curve.label,
        kind: "prediction" as const,
        colour: position + 1,
        dash: curve.dash,
        width: 1.8,
        x: shown.map((index) => profiles.depthNm[index]),
        y: shown.map((index) => values[index]),
      },
    ];
  });
}

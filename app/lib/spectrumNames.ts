/** What spectra, techniques, models and operating points are called on screen. */
import type { Bias, ModelKind, Technique } from "@demilune/solver";
import { formatNumber, thinSpace } from "./numberFormat";

export const techniqueNames: Record<Technique, string> = { imps: "IMPS", imvs: "IMVS", impedance: "Impedance" };

/** Symbol of a technique's transfer function, notation of `richText.ts`. */
export const techniqueSymbols: Record<Technique, string> = { imps: "*Q*", imvs: "*W*", impedance: "*Z*" };

export const modelNames: Record<ModelKind, string> = {
  driftDiffusion: "drift–diffusion with ions and traps",
  transit: "transit in a uniform field",
  gaertner: "depletion layer with diffusion",
  diffusion: "diffusion and recombination, one layer",
  diffusionLayers: "diffusion and recombination, many layers",
};

/** The operating point a technique has where none is given. */
export const defaultBias = (technique: Technique): Bias => (technique === "imps" ? "shortCircuit" : "openCircuit");

/** "short circuit", "open circuit" or "0.8 V". */
export function biasWords(bias: Bias): string {
  if (bias === "shortCircuit") return "short circuit";
  if (bias === "openCircuit") return "open circuit";
  return `${formatNumber(bias.voltageV)}${thinSpace}V`;
}

interface Request {
  technique: Technique;
  bias?: Bias;
  fluxPerCm2S?: number;
}

/** Short names of the spectra of a document; what tells two of one technique apart is added. */
export function spectrumNames(requests: readonly Request[], lightFlux: number): string[] {
  return requests.map(({ technique, bias, fluxPerCm2S }) => {
    const others = requests.filter((other) => other.technique === technique);
    if (others.length === 1) return techniqueNames[technique];
    const ownFlux = fluxPerCm2S !== undefined && fluxPerCm2S !== lightFlux;
    const flux = ownFlux ? [`*Φ* ${formatNumber(fluxPerCm2S)}`] : [];
    return [techniqueNames[technique], biasWords(bias ?? defaultBias(technique)), ...flux].join(", ");
  });
}

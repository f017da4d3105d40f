/** Conditions between fields of a document whose fields are each within their range. */
import type { Fault } from "./errors.ts";
import { frequencyCount } from "./frequencies.ts";
import { quantities } from "./quantities.ts";
import { type LayerDocument, limits, type ScenarioDocument } from "./schema.ts";

function lifetimeFaults(layer: LayerDocument, at: string): Fault[] {
  const { electronLifetimeNs = null, holeLifetimeNs = null, trapDepthEV } = layer.recombination ?? {};
  const faults: Fault[] = [];
  if ((electronLifetimeNs === null) !== (holeLifetimeNs === null)) {
    const [absent, given] =
      electronLifetimeNs === null ? ["electronLifetimeNs", "holeLifetimeNs"] : ["holeLifetimeNs", "electronLifetimeNs"];
    faults.push({
      path: `${at}.recombination.${absent}`,
      message: `is missing while ${given} is given`,
      allowed: "both lifetimes or neither",
    });
  }
  if (trapDepthEV !== undefined && trapDepthEV > layer.gapEV)
    faults.push({
      path: `${at}.recombination.trapDepthEV`,
      message: `is ${trapDepthEV} eV, deeper than the gap`,
      allowed: `0 to ${layer.gapEV} eV (the gap of the layer)`,
    });
  if (layer.traps && layer.traps.densityPerCm3 > 0 && (electronLifetimeNs === null || holeLifetimeNs === null))
    faults.push({
      path: `${at}.traps`,
      message: "are given without lifetimes",
      allowed: "dynamic traps where both lifetimes of the layer are given",
    });
  return faults;
}

function ionFaults(layer: LayerDocument, at: string): Fault[] {
  return (["cation", "anion"] as const).flatMap((ion) => {
    const density = layer.ions?.[`${ion}sPerCm3`] ?? 0;
    const mobility = layer.ions?.[`${ion}MobilityCm2PerVs`] ?? 0;
    if (density === 0 || mobility > 0) return [];
    return {
      path: `${at}.ions.${ion}MobilityCm2PerVs`,
      message: `is 0 or missing while ${ion}sPerCm3 is above 0`,
      allowed: `above 0 up to ${quantities.cationMobilityCm2PerVs.max} cm²/Vs where the layer has ${ion}s`,
    };
  });
}

function interfaceFaults({ layers, interfaces = [] }: ScenarioDocument["stack"]): Fault[] {
  const allowed = layers.length > 1 ? `0 to ${layers.length - 2}, each once` : "no interface in a stack of one layer";
  const seen = new Set<number>();
  return interfaces.flatMap(({ afterLayer }, k) => {
    const path = `stack.interfaces.${k}.afterLayer`;
    if (afterLayer > layers.length - 2) return { path, message: `is ${afterLayer}: no layer lies behind it`, allowed };
    if (seen.has(afterLayer)) return { path, message: `is ${afterLayer} a second time`, allowed };
    seen.add(afterLayer);
    return [];
  });
}

function listFaults(listHz: readonly number[]): Fault[] {
  const seen = new Set<number>();
  return listHz.flatMap((frequency, k) => {
    if (!seen.has(frequency)) {
      seen.add(frequency);
      return [];
    }
    return {
      path: `frequencies.listHz.${k}`,
      message: `is ${frequency} Hz a second time`,
      allowed: "each frequency once",
    };
  });
}

function frequencyFaults({ frequencies = {} }: ScenarioDocument): Fault[] {
  const { listHz } = frequencies;
  const names = ["fromHz", "toHz", "pointsPerDecade"] as const;
  if (listHz) {
    const both = names.filter((name) => frequencies[name] !== undefined);
    const faults = both.map((name) => ({
      path: `frequencies.${name}`,
      message: "stands beside listHz",
      allowed: "either listHz, or fromHz, toHz and pointsPerDecade",
    }));
    return [...faults, ...listFaults(listHz)];
  }
  const range = {
    fromHz: frequencies.fromHz ?? quantities.fromHz.default,
    toHz: frequencies.toHz ?? quantities.toHz.default,
    pointsPerDecade: frequencies.pointsPerDecade ?? quantities.pointsPerDecade.default,
  };
  if (range.fromHz > range.toHz) {
    const path = frequencies.fromHz === undefined ? "frequencies.toHz" : "frequencies.fromHz";
    const message = `gives a range from ${range.fromHz} Hz down to ${range.toHz} Hz`;
    return [{ path, message, allowed: "fromHz not above toHz" }];
  }
  const count = frequencyCount(range);
  if (count <= limits.frequencies) return [];
  return [
    {
      path: "frequencies.pointsPerDecade",
      message: `gives ${count} frequencies`,
      allowed: `at most ${limits.frequencies} frequencies in all`,
    },
  ];
}

function modelFaults({ model, stack }: ScenarioDocument): Fault[] {
  const faults: Fault[] = [];
  if (model?.absorber !== undefined && model.absorber >= stack.layers.length)
    faults.push({
      path: "model.absorber",
      message: `is ${model.absorber}: the stack has no such layer`,
      allowed: `0 to ${stack.layers.length - 1}`,
    });
  if (model?.kind === "gaertner" && model.overrides?.transferPerS === undefined) {
    for (const name of ["surfaceRecombinationPerS", "helmholtzCapacitanceFPerCm2"] as const)
      if (model.overrides?.[name] !== undefined)
        faults.push({
          path: `model.overrides.${name}`,
          message: "is given without transferPerS",
          allowed: "together with transferPerS, which switches surface transfer on",
        });
  }
  if (model?.kind === "transit") faults.push(...carrierFaults(model.overrides));
  return faults;
}

function carrierFaults({ variant = "twoCarrier", carrier }: { variant?: string; carrier?: string } = {}): Fault[] {
  const path = "model.overrides.carrier";
  if (variant === "twoCarrier" && carrier !== undefined && carrier !== "both")
    return [{ path, message: `is "${carrier}" with the variant twoCarrier`, allowed: `"both" with this variant` }];
  if (variant === "collected" && carrier === "both")
    return [{ path, message: `is "both" with the variant collected`, allowed: `"electron", "hole" with this variant` }];
  return [];
}

/** Every violated condition between fields. */
export function conditionFaults(document: ScenarioDocument): Fault[] {
  return [
    ...document.stack.layers.flatMap((layer, k) => {
      const at = `stack.layers.${k}`;
      return [...lifetimeFaults(layer, at), ...ionFaults(layer, at)];
    }),
    ...interfaceFaults(document.stack),
    ...modelFaults(document),
    ...frequencyFaults(document),
  ];
}

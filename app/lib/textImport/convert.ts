/**
 * File units to ours: IMPS in electrons per incident photon, IMVS and impedance in Ω·cm². Each conversion follows
 * from the definitions Q = δJ/(q δΦ), W = δV/(q δΦ) and from the dimensions of the column's unit.
 */
import { elementaryCharge, planckConstant, speedOfLight } from "@demilune/solver";
import type { Technique } from "./notes";
import { hasDimensions, parseUnit, type Unit } from "./units";

export type Need = "areaCm2" | "modulatedFluxPerCm2S" | "wavelengthNm";

export interface Conditions {
  areaCm2: number | null;
  modulatedFluxPerCm2S: number | null;
  wavelengthNm: number | null;
}

export interface Conversion {
  /** Times the number in the file; not final while something is needed. */
  factor: number;
  needs: Need[];
  /** The file gives an admittance. */
  invert: boolean;
  /** No absolute scale: shape only. */
  relative: boolean;
  reason: string;
}

const squareMetre = 1e-4;
const ready = (factor: number, reason: string): Conversion => ({
  factor,
  needs: [],
  invert: false,
  relative: false,
  reason,
});

/** SI value of each condition, or a note that it is needed. */
function asked(conditions: Conditions, ...names: Need[]) {
  const needs = names.filter((name) => conditions[name] === null);
  return {
    needs,
    area: (conditions.areaCm2 ?? 1) * squareMetre,
    flux: (conditions.modulatedFluxPerCm2S ?? 1) / squareMetre,
    photonVoltage: (planckConstant * speedOfLight) / (elementaryCharge * (conditions.wavelengthNm ?? 1) * 1e-9),
  };
}

const ofImps: readonly [dimensions: Unit["dimensions"], (conditions: Conditions) => Conversion][] = [
  [[0, 0, 0, 0], () => ready(1, "electrons per incident photon")],
  [[1, 0, 0, 1], () => ready(1 / elementaryCharge, "current per photon flux, divided by q")],
  [
    [1, 0, -2, 0],
    (conditions) => {
      const { needs, flux } = asked(conditions, "modulatedFluxPerCm2S");
      return { ...ready(1 / (elementaryCharge * flux), "current density, divided by q and the modulated flux"), needs };
    },
  ],
  [
    [1, 0, 0, 0],
    (conditions) => {
      const { needs, flux, area } = asked(conditions, "areaCm2", "modulatedFluxPerCm2S");
      return {
        ...ready(1 / (elementaryCharge * flux * area), "current, divided by q, the area and the modulated flux"),
        needs,
      };
    },
  ],
  [
    [0, -1, 0, 0],
    (conditions) => {
      const { needs, photonVoltage } = asked(conditions, "wavelengthNm");
      return { ...ready(photonVoltage, "current per light power, times the photon energy over q"), needs };
    },
  ],
  [
    [1, 0, 2, 1],
    (conditions) => {
      const { needs, area } = asked(conditions, "areaCm2");
      return {
        ...ready(1 / (elementaryCharge * area), "current per photon flux density, divided by q and the area"),
        needs,
      };
    },
  ],
];

const resistances: readonly [dimensions: Unit["dimensions"], (conditions: Conditions) => Conversion][] = [
  [[-1, 1, 2, 0], () => ready(1e4, "resistance times area")],
  [
    [-1, 1, 0, 0],
    (conditions) => {
      const { needs, area } = asked(conditions, "areaCm2");
      return { ...ready(area * 1e4, "resistance, times the area"), needs };
    },
  ],
];

const ofImvs: typeof resistances = [
  ...resistances,
  [[0, 1, 2, 1], () => ready(1e4 / elementaryCharge, "voltage per photon flux, divided by q")],
  [
    [0, 1, 0, 0],
    (conditions) => {
      const { needs, flux } = asked(conditions, "modulatedFluxPerCm2S");
      return { ...ready(1e4 / (elementaryCharge * flux), "voltage, divided by q and the modulated flux"), needs };
    },
  ],
  [
    [-1, 0, 2, 0],
    (conditions) => {
      const { needs, photonVoltage } = asked(conditions, "wavelengthNm");
      return { ...ready(1e4 * photonVoltage, "voltage per irradiance, times the photon energy over q"), needs };
    },
  ],
];

const ofImpedance: typeof resistances = [
  ...resistances,
  [[1, -1, -2, 0], () => ({ ...ready(1e-4, "conductance per area, inverted"), invert: true })],
  [
    [1, -1, 0, 0],
    (conditions) => {
      const { needs, area } = asked(conditions, "areaCm2");
      return { ...ready(1e-4 / area, "conductance, inverted, times the area"), invert: true, needs };
    },
  ],
];

const tables: Record<Technique, typeof resistances> = { imps: ofImps, imvs: ofImvs, impedance: ofImpedance };
const assumed: Record<Technique, string> = { imps: "1", imvs: "Ω·cm²", impedance: "Ω·cm²" };

/** How numbers in this unit become ours; null where the unit is none of the technique's. */
export function conversionOf(technique: Technique, unitText: string | null, conditions: Conditions): Conversion | null {
  if (unitText === null) return ready(1, `no unit written; taken as ${assumed[technique]}`);
  const unit = parseUnit(unitText);
  if (!unit) return null;
  if (unit.scale === "relative" || unit.scale === "decibel") {
    return { ...ready(1, "no absolute scale: only the shape is compared"), relative: true };
  }
  if (unit.scale !== "linear") return null;
  const row = tables[technique].find(([dimensions]) => hasDimensions(unit, dimensions));
  if (!row) return null;
  const conversion = row[1](conditions);
  return { ...conversion, factor: conversion.factor * unit.factor };
}

/** The technique whose units fit; the first of IMPS, IMVS, impedance that does. */
export function techniqueOfUnit(unitText: string | null): Technique | null {
  const unit = unitText === null ? null : parseUnit(unitText);
  if (unit?.scale !== "linear") return null;
  if (ofImps.some(([dimensions]) => hasDimensions(unit, dimensions))) return "imps";
  if (resistances.some(([dimensions]) => hasDimensions(unit, dimensions))) return "impedance";
  if (ofImvs.some(([dimensions]) => hasDimensions(unit, dimensions))) return "imvs";
  return ofImpedance.some(([dimensions]) => hasDimensions(unit, dimensions)) ? "impedance" : null;
}

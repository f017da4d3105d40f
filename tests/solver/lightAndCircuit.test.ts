/**
 * Beer–Lambert through the stack against numerical quadrature, the circuit around the cell against its two-port
 * formulas (derived; V_T and photon energies by the SI constants).
 */
import {
  deviceOf,
  elementaryCharge,
  parseScenario,
  planckConstant,
  speedOfLight,
  thermalVoltage,
} from "@demilune/solver";
import { describe, expect, test } from "vitest";
import { atTerminals } from "../../solver/src/circuit.ts";
import { builtInVoltage, neutralFermiDepth } from "../../solver/src/equilibrium.ts";
import { lightThrough } from "../../solver/src/light/generation.ts";
import { scenario } from "./support/scenarios.ts";
import { expectClose } from "./support/spectra.ts";

describe("constants", () => {
  test("thermal voltage and photon energy", () => {
    expect(thermalVoltage(300)).toBeCloseTo(0.0258519997864, 12);
    expect(thermalVoltage(298.15)).toBeCloseTo(0.0256925791211, 12);
    expect(((planckConstant * speedOfLight) / elementaryCharge) * 1e9).toBeCloseTo(1239.84198433, 7);
  });
  test("1 mW/cm² at 635 nm drives at most 0.51216 mA/cm²", () => {
    const photons = (10 * 635e-9) / (planckConstant * speedOfLight);
    expect(elementaryCharge * photons * 0.1).toBeCloseTo(0.512162040022, 11);
  });
});

describe.each(["front", "back"] as const)("light from the %s", (side) => {
  const layers = [
    { thicknessNm: 80, absorptionPerCm: 3e4, carrierYield: 0.8 },
    { thicknessNm: 300, absorptionPerCm: 7e4, modulationAbsorptionPerCm: 1e4 },
    { thicknessNm: 50 },
  ].map((layer) => scenario({ layer: { absorptionPerCm: 0, ...layer } }).stack.layers[0]);
  const light = { fluxPerCm2S: 1, side, frontReflectance: 0.1, backMirrorReflectance: 0.7 };
  const device = deviceOf(parseScenario(scenario({ stackChange: { layers }, light })));

  test.each(["bias", "modulation"] as const)(
    "%s: exact integrals, both passes, add up to what is absorbed",
    (wavelength) => {
      const path = lightThrough(device, wavelength);
      const rate = (layer: number, depth: number) => {
        const { absorption, modulationAbsorption, thickness, carrierYield } = device.layers[layer];
        const alpha = wavelength === "bias" ? absorption : modulationAbsorption;
        const [ahead, behind] = side === "front" ? [depth, thickness - depth] : [thickness - depth, depth];
        return (
          carrierYield *
          alpha *
          (path.reaching[layer] * Math.exp(-alpha * ahead) + path.returning[layer] * Math.exp(-alpha * behind))
        );
      };
      for (const [layer, { thickness }] of device.layers.entries()) {
        const [from, to] = [0.2 * thickness, 0.7 * thickness];
        const points = Array.from({ length: 2001 }, (_, k) => rate(layer, from + ((to - from) * k) / 2000));
        // Simpson's rule.
        const weighted = points.map((value, k) => value * (k === 0 || k === 2000 ? 1 : k % 2 === 1 ? 4 : 2));
        const integral = (weighted.reduce((a, b) => a + b) * (to - from)) / 6000;
        expect(path.generationIn({ layer, from, to })).toBeCloseTo(integral, 13);
      }
      const whole = path.generationOver(
        device.layers.map(({ thickness }, layer) => ({ layer, from: 0, to: thickness })),
      );
      for (const [k, absorbed] of path.absorbed.entries())
        expect(whole[k]).toBeCloseTo(absorbed * device.layers[k].carrierYield, 14);
      const last = side === "front" ? 2 : 0;
      const first = 2 - last;
      const alpha = (k: number) =>
        wavelength === "bias" ? device.layers[k].absorption : device.layers[k].modulationAbsorption;
      const out = path.returning[first] * Math.exp(-alpha(first) * device.layers[first].thickness);
      const mirrored = path.reaching[last] * Math.exp(-alpha(last) * device.layers[last].thickness) * 0.3;
      expect(path.absorbed.reduce((a, b) => a + b) + out + mirrored).toBeCloseTo(0.9, 14);
    },
  );
});

describe("circuit (common practice, no source)", () => {
  const around = (change: object) => deviceOf(parseScenario(scenario({ circuit: change }))).circuit;
  const cell = { photocurrent: { re: 1, im: 0 }, admittance: { re: 0, im: 0 } };

  test("RC attenuation: 5 Ω·cm² and 50 nF/cm² at 1 MHz, corner at 636619.772368 Hz", () => {
    const circuit = around({ seriesResistanceOhmCm2: 5, parallelCapacitanceFPerCm2: 50e-9 });
    expectClose(atTerminals("imps", circuit, 1e6, cell), { re: 0.2884004391, im: -0.4530183505 }, 1e-9);
    expectClose(atTerminals("imps", circuit, 636619.772368, cell), { re: 0.5, im: -0.5 }, 1e-9);
  });
  test("with 100 Ω·cm² in parallel", () => {
    const circuit = around({
      seriesResistanceOhmCm2: 5,
      parallelCapacitanceFPerCm2: 50e-9,
      shuntResistanceOhmCm2: 100,
    });
    expectClose(atTerminals("imps", circuit, 1e6, cell), { re: 0.2941257952, im: -0.4400111607 }, 1e-9);
  });
  test("the source delays IMPS and IMVS, the amplifier IMPS alone, neither the impedance", () => {
    const bare = around({ shuntResistanceOhmCm2: 3 });
    const slow = around({ shuntResistanceOhmCm2: 3, amplifierBandwidthHz: 2e3, sourceBandwidthHz: 1e3 });
    const at = (circuit: typeof bare, technique: "imps" | "imvs" | "impedance") =>
      atTerminals(technique, circuit, 1e3, cell);
    expect(at(slow, "impedance")).toEqual(at(bare, "impedance"));
    const voltage = at(bare, "imvs").re / 2;
    expectClose(at(slow, "imvs"), { re: voltage, im: -voltage }, 1e-14);
    expectClose(at(slow, "imps"), { re: 0.2, im: -0.6 }, 1e-14);
  });
});

describe("contacts in equilibrium", () => {
  test("built-in voltage of a doped pair: V_T ln(N_A N_D/n_i²) (S. M. Sze, Physics of Semiconductor Devices; from memory)", () => {
    const layers = [{ donorsPerCm3: 1e17 }, { acceptorsPerCm3: 3e16 }].map(
      (layer) => scenario({ layer }).stack.layers[0],
    );
    const device = deviceOf(parseScenario(scenario({ stackChange: { layers, front: {}, back: {} } })));
    const thermal = thermalVoltage(300);
    const squared = 1e38 * Math.exp(-1.5 / thermal);
    expect(builtInVoltage(device)).toBeCloseTo(thermal * Math.log((1e17 * 3e16) / squared), 10);
  });
  test("an undoped layer of equal states has its level at mid-gap, at 50 K and a gap of 10 eV too", () => {
    const [layer] = deviceOf(parseScenario(scenario({ layer: { gapEV: 10 } }))).layers;
    expect(neutralFermiDepth(layer, 50)).toBeCloseTo(5, 12);
  });
  test("deep acceptor-like traps of higher density take the electrons of shallow donors: the level sinks to the trap", () => {
    const traps = { densityPerCm3: 2e17, kind: "acceptor" } as const;
    const document = scenario({
      layer: {
        donorsPerCm3: 1e17,
        traps,
        recombination: { electronLifetimeNs: 1, holeLifetimeNs: 1, trapDepthEV: 0.6 },
      },
    });
    const [layer] = deviceOf(parseScenario(document)).layers;
    expect(neutralFermiDepth(layer, 300)).toBeCloseTo(0.6, 6);
  });
});

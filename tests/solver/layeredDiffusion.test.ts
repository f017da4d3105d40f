/** Many layers by finite volumes against one layer in closed form and against two layers joined exactly. */
import type { LayerDocument, ScenarioDocument } from "@demilune/solver";
import { describe, expect, test } from "vitest";
import { type Film, inverseDiffusionLength } from "../../solver/src/closedForm/film.ts";
import { ladderOf } from "../../solver/src/layeredDiffusion/ladder.ts";
import { nodesOf } from "../../solver/src/layeredDiffusion/mesh.ts";
import { add, type Complex, complex, divide, multiply, one, scale } from "../../solver/src/numerics/complex.ts";
import { scenario } from "./support/scenarios.ts";
import { distance, expectClose, solved } from "./support/spectra.ts";

const frequencies = { fromHz: 1e4, toHz: 1e10, pointsPerDecade: 3 };
const spectra: ScenarioDocument["spectra"] = [{ technique: "imps" }, { technique: "imvs" }, { technique: "impedance" }];

const stack = (layers: Partial<LayerDocument>[], side: "front" | "back" = "front"): ScenarioDocument =>
  scenario({
    stackChange: { layers: layers.map((layer) => scenario({ layer }).stack.layers[0]) },
    light: { fluxPerCm2S: 1e16, side },
    spectra,
    frequencies,
  });
const layered = (document: ScenarioDocument, nodes?: number): ScenarioDocument => ({
  ...document,
  model: { kind: "diffusionLayers", ...(nodes ? { nodes } : {}), overrides: { farVelocityCmPerS: 300 } },
});
const single = (document: ScenarioDocument): ScenarioDocument => ({
  ...document,
  model: { kind: "diffusion", overrides: { farVelocityCmPerS: 300 } },
});

const farthest = (document: ScenarioDocument, exact: ScenarioDocument) => {
  const expected = solved(exact);
  return Math.max(...solved(document).map((spectrum, k) => distance(spectrum, expected[k])));
};

describe("one material", () => {
  test.each(["front", "back"] as const)("default mesh within 10⁻⁵ of the closed form, light from the %s", (side) => {
    const document = stack([{}], side);
    expect(farthest(layered(document), single(document))).toBeLessThan(1e-5);
  });

  test("cut into three layers it is the same film", () => {
    const cut = stack([{ thicknessNm: 120 }, { thicknessNm: 300 }, { thicknessNm: 80 }]);
    expect(farthest(layered(cut), single(stack([{}])))).toBeLessThan(1e-5);
  });

  test("the error falls with the square of the step over four meshes", () => {
    const document = stack([{}]);
    const errors = [201, 401, 801, 1601].map((nodes) => farthest(layered(document, nodes), single(document)));
    const orders = errors.slice(1).map((error, k) => Math.log2(errors[k] / error));
    expect(orders.reduce((sum, order) => sum + order) / orders.length).toBeGreaterThan(1.95);
    expect(Math.max(...orders)).toBeLessThan(2.05);
  });
});

test("two layers of different diffusion, lifetime and thickness: the second is a loss at the far face of the first", () => {
  const [front, back]: Film[] = [
    { thickness: 2e-7, diffusion: 2e-6, rate: 1e8, farVelocity: 0 },
    { thickness: 4e-7, diffusion: 3e-7, rate: 2e7, farVelocity: 5 },
  ];
  // Conductance of a layer behind which lies a conductance: the line equation with tanh z.
  const behind = (film: Film, omega: number, far: Complex): Complex => {
    const gamma = inverseDiffusionLength(film, omega);
    const twice = scale(multiply(gamma, complex(-2 * film.thickness)), 1);
    const decay = scale(complex(Math.cos(twice.im), Math.sin(twice.im)), Math.exp(twice.re));
    const tanh = divide(add(one, scale(decay, -1)), add(one, decay));
    const characteristic = scale(gamma, film.diffusion);
    const s = divide(far, characteristic);
    return multiply(characteristic, divide(add(tanh, s), add(one, multiply(s, tanh))));
  };
  const meshes = nodesOf(
    [front, back].map(({ thickness }) => ({ thickness, smallestLength: thickness / 5 })),
    null,
  );
  const solveAt = ladderOf(
    [front, back].map((film, k) => ({ ...film, nodes: meshes[k] })),
    back.farVelocity,
  );
  for (const omega of [0, 1e7, 1e8, 1e9]) {
    const exact = behind(front, omega, behind(back, omega, complex(back.farVelocity)));
    expectClose(solveAt(omega).conductance, exact, 1e-5);
  }
});

test("a thin front layer that neither absorbs nor recombines adds its resistance only", () => {
  const inert = { thicknessNm: 1e-1, absorptionPerCm: 0, recombination: {} };
  expect(farthest(layered(stack([inert, {}])), single(stack([{}])))).toBeLessThan(1e-2);
});

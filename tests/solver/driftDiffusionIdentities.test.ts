/** What the numbers of the full model must satisfy whatever the stack: conservation, reciprocity of limits, convergence. */
import { readFileSync } from "node:fs";
import { parseScenario, type ScenarioDocument, type SolvedSpectrum, solve, thermalVoltage } from "@demilune/solver";
import { LuDecomposition, Matrix } from "ml-matrix";
import { describe, expect, test } from "vitest";
import { assemble, createAssembly } from "../../solver/src/driftDiffusion/assembly.ts";
import { steadyState } from "../../solver/src/driftDiffusion/continuation.ts";
import { buildMesh } from "../../solver/src/driftDiffusion/mesh.ts";
import { operatingPointsOf } from "../../solver/src/driftDiffusion/operatingPoints.ts";
import { linearise, respond } from "../../solver/src/driftDiffusion/smallSignal.ts";
import { copyState, type State } from "../../solver/src/driftDiffusion/state.ts";
import { RealBlockTridiagonal } from "../../solver/src/linearAlgebra/realBlockTridiagonal.ts";
import { randomNumbers } from "../bench/randomStacks.ts";
import { admittance, distance, document, layer } from "./driftDiffusionStacks.ts";

const perovskite: ScenarioDocument = JSON.parse(
  readFileSync(new URL("./cases/perovskite-cations.json", import.meta.url), "utf8"),
);

/** Traps of either kind, anions in two layers, interfaces, Auger, light from the back through a mirror: every term at once. */
const everything: ScenarioDocument = document(
  [
    layer({
      thicknessNm: 60,
      gapEV: 2.4,
      affinityEV: 4.05,
      donorsPerCm3: 5e17,
      electronMobilityCm2PerVs: 0.5,
      recombination: { electronLifetimeNs: 20, holeLifetimeNs: 10 },
      traps: { densityPerCm3: 2e16, kind: "donor" },
    }),
    layer({
      thicknessNm: 250,
      gapEV: 1.5,
      absorptionPerCm: 5e4,
      electronMobilityCm2PerVs: 4,
      holeMobilityCm2PerVs: 2,
      recombination: { electronLifetimeNs: 200, holeLifetimeNs: 80, trapDepthEV: 0.6, radiativeCm3PerS: 1e-10 },
      traps: { densityPerCm3: 1e16, kind: "acceptor" },
      ions: { cationsPerCm3: 2e17, cationMobilityCm2PerVs: 1e-8, anionsPerCm3: 1e17, anionMobilityCm2PerVs: 1e-10 },
    }),
    layer({
      thicknessNm: 150,
      gapEV: 1.6,
      affinityEV: 3.95,
      absorptionPerCm: 2e4,
      carrierYield: 0.9,
      recombination: { augerElectronCm6PerS: 1e-28, augerHoleCm6PerS: 3e-28, radiativeCm3PerS: 1e-11 },
      ions: { anionsPerCm3: 3e17, anionMobilityCm2PerVs: 1e-9 },
    }),
    layer({ thicknessNm: 50, gapEV: 2.6, affinityEV: 2.9, acceptorsPerCm3: 1e18, holeMobilityCm2PerVs: 0.1 }),
  ],
  {
    stack: {
      back: { workFunctionEV: 5.3, electronVelocityCmPerS: 1e3 },
      interfaces: [
        { afterLayer: 0, electronVelocityCmPerS: 300, holeVelocityCmPerS: 500 },
        { afterLayer: 2, electronVelocityCmPerS: 100, holeVelocityCmPerS: 1000 },
      ],
    },
    light: { side: "back", fluxPerCm2S: 8e16, frontReflectance: 0.05, backMirrorReflectance: 0.7 },
    circuit: { seriesResistanceOhmCm2: 2, shuntResistanceOhmCm2: 3000 },
  },
);

const stacks: [string, ScenarioDocument][] = [
  ["a cell with cations", perovskite],
  ["every term at once", everything],
];

const solvedSpectra = (given: ScenarioDocument): SolvedSpectrum[] =>
  solve(given).spectra.map((spectrum) => {
    if (spectrum.status !== "solved") throw new Error(spectrum.failure.message);
    return spectrum;
  });

describe.each(stacks)("%s", (_, given) => {
  test("carries the same current at every depth, from millihertz to gigahertz", () => {
    const biases = ["shortCircuit" as const, "openCircuit" as const, { voltageV: -1 }];
    const spectra = solvedSpectra({
      ...given,
      spectra: biases.flatMap((bias) =>
        (["imps", "imvs", "impedance"] as const).map((technique) => ({ technique, bias })),
      ),
      frequencies: { fromHz: 1e-3, toHz: 1e9, pointsPerDecade: 1 },
    });
    for (const { currentSpread } of spectra) expect(currentSpread).toBeLessThan(1e-7);
  });

  test("tends to the derivatives of the steady current at low frequency, to 10⁻⁴", () => {
    const scenario = parseScenario(given);
    const { problem, steady } = operatingPointsOf(scenario).at({ voltageV: 0.5 }, given.light.fluxPerCm2S);
    const inside = steady.state.voltage * problem.thermalVoltage;
    const current = (voltage: number, flux: number) => {
      const operation = { kind: "voltage", voltage, inside: true } as const;
      const moved = steadyState(problem, operation, { ...steady.drive, flux }, { start: steady.state });
      expect(moved.status).toBe("solved");
      return moved.current;
    };
    const { flux } = steady.drive;
    const [dv, dPhi] = [1e-4, 1e-4 * flux];
    const byVoltage = (current(inside + dv, flux) - current(inside - dv, flux)) / (2 * dv);
    const byFlux = (current(inside, flux + dPhi) - current(inside, flux - dPhi)) / (2 * dPhi);
    const low = respond(linearise(problem, steady.state, steady.drive), Float64Array.of(1e-7));
    expect(Math.abs((low.yieldReal[0] * 1.602176634e-19) / byFlux - 1)).toBeLessThan(1e-4);
    expect(Math.abs(-low.admittanceReal[0] / byVoltage - 1)).toBeLessThan(1e-4);
  });

  test("has a linearisation equal to the directional derivative of its residual", () => {
    const scenario = parseScenario({ ...given, model: { kind: "driftDiffusion", nodes: 80 } });
    const { problem, steady } = operatingPointsOf(scenario).at({ voltageV: 0.4 }, given.light.fluxPerCm2S);
    const matrix = new RealBlockTridiagonal(problem.nodes, 3);
    const target = createAssembly(matrix, false);
    const next = randomNumbers(7);
    const direction = Float64Array.from({ length: problem.nodes * 3 }, () => next() - 0.5);
    const residualAt = (step: number) => {
      const moved: State = copyState(steady.state);
      for (let i = 0; i < problem.nodes; i++) {
        moved.potential[i] += step * direction[i * 3];
        moved.electronEnergy[i] += step * direction[i * 3 + 1];
        moved.holeEnergy[i] += step * direction[i * 3 + 2];
      }
      assemble(problem, moved, steady.drive, target, null);
      return target.residual.slice();
    };
    const step = 1e-4;
    const [above, below] = [residualAt(step), residualAt(-step)];
    assemble(problem, steady.state, steady.drive, target, null);
    let [largest, farthest] = [0, 0];
    for (let i = 0; i < problem.nodes; i++)
      for (let row = 0; row < 3; row++) {
        let [product, size] = [0, 0];
        const add = (blocks: Float64Array, j: number) => {
          for (let c = 0; c < 3; c++) {
            const term = blocks[(i * 3 + row) * 3 + c] * direction[j * 3 + c];
            product -= term;
            size += Math.abs(term);
          }
        };
        if (i > 0) add(matrix.lower, i - 1);
        add(matrix.diagonal, i);
        if (i < problem.nodes - 1) add(matrix.upper, i + 1);
        const derivative = (above[i * 3 + row] - below[i * 3 + row]) / (2 * step);
        if (size === 0) continue;
        largest = Math.max(largest, Math.abs(product) / size);
        farthest = Math.max(farthest, Math.abs(product - derivative) / size);
      }
    expect(largest).toBeGreaterThan(1e-3);
    expect(farthest).toBeLessThan(1e-6);
  });

  test("is a capacitor 1/Σ(t/ε) above every relaxation", () => {
    const [found] = solvedSpectra({
      ...given,
      circuit: {},
      spectra: [{ technique: "impedance", bias: "shortCircuit" }],
      frequencies: { listHz: [1e15] },
    });
    const thickness = given.stack.layers.reduce(
      (sum, each) => sum + (each.thicknessNm * 1e-7) / each.relativePermittivity,
      0,
    );
    const { re, im } = admittance(found);
    const capacitance = 8.8541878128e-14 / thickness;
    expect(Math.abs(im / (2 * Math.PI * 1e15) / capacitance - 1)).toBeLessThan(1e-6);
    expect(Math.abs(re / im)).toBeLessThan(1e-3);
  });

  test("obeys the sum rule of Kramers and Kronig: Q(0) − Q(∞) = −(2/π) ∫ Im Q d ln ω (H. W. Bode 1945, from memory)", () => {
    const perDecade = 40;
    const [q, z] = solvedSpectra({
      ...given,
      circuit: {},
      spectra: [
        { technique: "imps", bias: { voltageV: 0.3 } },
        { technique: "impedance", bias: { voltageV: 0.3 } },
      ],
      frequencies: { fromHz: 1e-5, toHz: 1e13, pointsPerDecade: perDecade },
    });
    const thickness = given.stack.layers.reduce(
      (sum, each) => sum + (each.thicknessNm * 1e-7) / each.relativePermittivity,
      0,
    );
    const conduction = q.frequencyHz.map((frequency, k) => {
      const { re, im } = admittance(z, k);
      return { re, im: im - (2 * Math.PI * frequency * 8.8541878128e-14) / thickness };
    });
    const step = Math.LN10 / perDecade;
    for (const values of [q.re.map((re, k) => ({ re, im: q.im[k] })), conduction]) {
      const integral = values.reduce((sum, { im }) => sum + im, 0) * step;
      const range = Math.max(...values.map(({ re }) => Math.abs(re)));
      const difference = values[0].re - values[values.length - 1].re;
      expect(Math.abs(difference + (2 / Math.PI) * integral) / range).toBeLessThan(5e-3);
    }
  }, 60_000);

  test("has a default mesh within 0.2 % of one eight times finer", () => {
    const asked = { ...given, frequencies: { fromHz: 1e-2, toHz: 1e8, pointsPerDecade: 1 } };
    const spectra = [
      { technique: "imps" as const },
      { technique: "impedance" as const, bias: { voltageV: 0.6 } },
      { technique: "imvs" as const },
    ];
    const coarse = solvedSpectra({ ...asked, spectra });
    const fine = solvedSpectra({ ...asked, spectra, model: { kind: "driftDiffusion", nodes: 4000 } });
    coarse.forEach((spectrum, k) => {
      expect(distance(spectrum, fine[k])).toBeLessThan(2e-3);
    });
  }, 120_000);
});

test.each(stacks)(
  "W = Q·Z to 10⁻⁹ or the stated spread when W is solved with the voltage as an unknown of one dense system: %s",
  (_, given) => {
    const scenario = parseScenario({ ...given, model: { kind: "driftDiffusion", nodes: 25 } });
    const point = operatingPointsOf(scenario).at({ voltageV: 0.6 }, 8e16);
    const { system, state, problem } = linearise(point.problem, point.steady.state, point.steady.drive);
    const { nodes, blockSize: m, byStep, byMean } = system;
    const count = nodes * m + 2 * (nodes - 1) * m;
    const size = count + 1;
    const stepAt = (e: number, c: number) => nodes * m + e * m + c;
    const fluxAt = (e: number, row: number) => stepAt(nodes - 1 + e, row);
    const [light, emf] = [system.drives[0].atNodes!, system.drives[1].inEdges!];
    for (const omega of [1e-1, 1e4, 1e8]) {
      // Rows: balances, steps, fluxes, no current through the circuit; unknowns: deviations, their steps, fluxes, δv. The
      // steps are unknowns of their own because a difference of two deviations would have lost them.
      const dense = Matrix.zeros(2 * size, 2 * size);
      const put = (row: number, column: number, re: number, im: number) => {
        for (const [a, b, value] of [
          [row, column, re],
          [row + size, column + size, re],
          [row + size, column, im],
          [row, column + size, -im],
        ])
          dense.set(a, b, dense.get(a, b) + value);
      };
      for (let e = 0; e < nodes - 1; e++)
        for (let row = 0; row < m; row++) {
          const target = fluxAt(e, row);
          put(target, target, -1, 0);
          for (let c = 0; c < m; c++) {
            const at = (e * m + row) * m + c;
            put(target, e * m + c, 0.5 * byMean[at], 0);
            put(target, (e + 1) * m + c, 0.5 * byMean[at], 0);
            put(target, stepAt(e, c), byStep[at], 0);
          }
          put(target, count, emf[e * m + row], 0);
          put(stepAt(e, row), stepAt(e, row), -1, 0);
          put(stepAt(e, row), e * m + row, -1, 0);
          put(stepAt(e, row), (e + 1) * m + row, 1, 0);
        }
      for (let i = 0; i < nodes; i++)
        for (let row = 0; row < m; row++) {
          const target = i * m + row;
          if (system.held?.[target]) {
            put(target, target, 1, 0);
            continue;
          }
          if (i < nodes - 1) put(target, fluxAt(i, row), -1, 0);
          if (i > 0) put(target, fluxAt(i - 1, row), 1, 0);
          for (let c = 0; c < m; c++)
            put(target, i * m + c, system.local[target * m + c], omega * system.storage[target * m + c]);
        }
      for (const { node, decay, column, row } of system.relaxations ?? []) {
        const length = decay * decay + omega * omega;
        for (let a = 0; a < m; a++)
          for (let c = 0; c < m; c++)
            if (!system.held?.[node * m + a])
              put(
                node * m + a,
                node * m + c,
                (column[a] * row[c] * decay) / length,
                (-column[a] * row[c] * omega) / length,
              );
      }
      for (let row = 0; row < m; row++)
        put(count, fluxAt(state.cut, row), system.reading.weight[row], omega * system.reading.harmonicWeight[row]);
      const { shuntResistance, parallelCapacitance } = problem.device.circuit;
      const perVoltage = thermalVoltage(300) / 1.602176634e-19;
      // J_x/q less what shunt and capacitance take: with the sign of the delivered current.
      put(
        count,
        count,
        (-problem.sign * perVoltage) / shuntResistance,
        -problem.sign * omega * parallelCapacitance * perVoltage,
      );
      const scale = dense.to2DArray().map((row) => 1 / Math.max(...row.map(Math.abs)));
      const right = Matrix.zeros(2 * size, 1);
      light.forEach((value, row) => {
        right.set(row, 0, value * scale[row]);
      });
      for (let row = 0; row < 2 * size; row++) dense.mulRow(row, scale[row]);
      // One step of refinement: the dense factors alone lose up to eight digits of the imaginary part.
      const factors = new LuDecomposition(dense);
      const first = factors.solve(right);
      const solution = Matrix.add(first, factors.solve(Matrix.sub(right, dense.mmul(first))));
      const unit = (thermalVoltage(300) / 1.602176634e-19) * 1e4;
      const direct = { re: solution.get(count, 0) * unit, im: solution.get(count + size, 0) * unit };
      const product = solvedSpectra({
        ...given,
        light: { ...given.light, fluxPerCm2S: 8e16 },
        model: { kind: "driftDiffusion", nodes: 25 },
        spectra: [
          { technique: "imps", bias: { voltageV: 0.6 } },
          { technique: "impedance", bias: { voltageV: 0.6 } },
        ],
        frequencies: { listHz: [omega / (2 * Math.PI)] },
      });
      const [q, z] = product;
      const expected = {
        re: q.re[0] * z.re[0] - q.im[0] * z.im[0],
        im: q.re[0] * z.im[0] + q.im[0] * z.re[0],
      };
      const error = Math.hypot(direct.re - expected.re, direct.im - expected.im);
      // On so coarse a mesh the product may be less exact than 10⁻⁹; its own spread must then say so, and stay small.
      const stated = Math.max(q.currentSpread!, z.currentSpread!);
      expect(stated).toBeLessThan(1e-7);
      expect(error / Math.hypot(expected.re, expected.im)).toBeLessThan(Math.max(1e-9, stated));
    }
  },
  60_000,
);

test("converges with the second order of the spacing over four meshes", () => {
  const smooth = document(
    [
      layer({ thicknessNm: 300, donorsPerCm3: 1e16, absorptionPerCm: 1e4, recombination: { radiativeCm3PerS: 1e-10 } }),
      layer({
        thicknessNm: 300,
        acceptorsPerCm3: 1e16,
        absorptionPerCm: 1e4,
        recombination: { radiativeCm3PerS: 1e-10 },
      }),
    ],
    { light: { fluxPerCm2S: 1e17 }, frequencies: { listHz: [1, 1e6, 1e8] } },
  );
  const solved = [81, 161, 321, 641, 5121].map(
    (nodes) =>
      solvedSpectra({
        ...smooth,
        model: { kind: "driftDiffusion", nodes },
        spectra: [{ technique: "imps", bias: { voltageV: 0.3 } }],
      })[0],
  );
  const errors = solved.slice(0, 4).map((spectrum) => distance(spectrum, solved[4]));
  const orders = errors.slice(1).map((error, k) => Math.log2(errors[k] / error));
  const mean = orders.reduce((sum, order) => sum + order, 0) / orders.length;
  expect(mean).toBeGreaterThan(1.85);
  expect(mean).toBeLessThan(2.3);
});

test("has as many nodes as the document asks for", () => {
  for (const nodes of [10, 57, 400]) {
    const scenario = parseScenario({ ...perovskite, model: { kind: "driftDiffusion", nodes } });
    expect(operatingPointsOf(scenario).at("shortCircuit", 1e15).problem.nodes).toBe(nodes);
  }
  expect(buildMesh([], 0.0259, null).x).toHaveLength(1);
});

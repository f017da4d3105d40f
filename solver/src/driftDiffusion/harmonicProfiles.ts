/**
 * Profiles of the small oscillation at one frequency, in bench units and complex.
 *
 * What is held fixed is the technique's: the terminal voltage for IMPS, the terminal current for IMVS, the light for
 * impedance. The fields of light and of voltage are combined with the voltage that the circuit leaves inside the series
 * resistance. Amplitudes are per unit of the drive: δΦ/Φ̄ = 1 (or one photon cm⁻² s⁻¹ in the dark) for IMPS and IMVS,
 * δV = 1 V at the terminals for impedance.
 */
import { atTerminals } from "../circuit.ts";
import { elementaryCharge } from "../constants.ts";
import { conservativeSolver } from "../linearAlgebra/conservativeSolver.ts";
import type { Profiles } from "../linearAlgebra/conservativeSystem.ts";
import { add, type Complex, complex, divide, multiply, one, scale } from "../numerics/complex.ts";
import type { Failure } from "../result.ts";
import { currentFromSI, fluxToSI } from "../scenario/device.ts";
import type { Bias, Technique } from "../scenario/schema.ts";
import { failureOf } from "./failures.ts";
import { holdIons } from "./ions.ts";
import type { OperatingPoint, OperatingPoints } from "./operatingPoints.ts";
import { edgesToPoints, profilePoints } from "./profiles.ts";
import { type Linearisation, lightColumn, linearise, voltageColumn } from "./smallSignal.ts";
import { boltzmann } from "./statistics.ts";

/** Real and imaginary part over the points of the profiles. */
export interface ComplexProfile {
  re: Float64Array;
  im: Float64Array;
}

export interface HarmonicProfiles {
  status: "solved";
  frequencyHz: number;
  depthNm: Float64Array;
  layer: Int32Array;
  /** Relative to the front contact. */
  potentialV: ComplexProfile;
  electronsPerCm3: ComplexProfile;
  holesPerCm3: ComplexProfile;
  cationsPerCm3: ComplexProfile;
  anionsPerCm3: ComplexProfile;
  /** Delivered current by carrier, the ions together, and displacement; their sum is the same at every depth. */
  electronCurrentMAPerCm2: ComplexProfile;
  holeCurrentMAPerCm2: ComplexProfile;
  ionCurrentMAPerCm2: ComplexProfile;
  displacementCurrentMAPerCm2: ComplexProfile;
}

interface Drives {
  /** δΦ, photons m⁻² s⁻¹. */
  light: number;
  /** δv inside the series resistance. */
  voltage: Complex;
}

/** What drives the cell itself for a technique, given its own response. */
function drivesOf(point: OperatingPoint, technique: Technique, frequency: number, inside: Inside): Drives {
  const { circuit } = point.problem.device;
  const { thermalVoltage } = point.problem;
  const ideal = { ...circuit, amplifierBandwidth: Infinity, sourceBandwidth: Infinity };
  const response = atTerminals(technique, ideal, frequency, inside);
  if (technique === "impedance") {
    // δV_i = δV + R_s δJ with δJ = −δV/Z.
    const share = add(one, scale(divide(one, response), -circuit.seriesResistance));
    return { light: 0, voltage: scale(share, 1 / thermalVoltage) };
  }
  const light = fluxToSI(point.fluxPerCm2S > 0 ? point.fluxPerCm2S : 1);
  // IMPS: δV_i = R_s δJ; IMVS: δV_i = δV.
  const perPhoton = scale(response, elementaryCharge * (technique === "imps" ? circuit.seriesResistance : 1));
  return { light, voltage: scale(perPhoton, light / thermalVoltage) };
}

interface Inside {
  photocurrent: Complex;
  admittance: Complex;
}

/** Values of both drives, [drive][place][unknown], combined. */
function combined({ real, imaginary }: Profiles["unknowns"], drives: Drives): ComplexProfile {
  const { re, im } = drives.voltage;
  const count = real.length / 2;
  const sum = { re: new Float64Array(count), im: new Float64Array(count) };
  for (let k = 0; k < count; k++) {
    const light = lightColumn * count + k;
    const voltage = voltageColumn * count + k;
    sum.re[k] = drives.light * real[light] + re * real[voltage] - im * imaginary[voltage];
    sum.im[k] = drives.light * imaginary[light] + re * imaginary[voltage] + im * real[voltage];
  }
  return sum;
}

/** Delivered currents on all edges: [electrons, holes, ions, displacement]. */
function edgeCurrents({ problem, system }: Linearisation, fluxes: ComplexProfile, omega: number): ComplexProfile[] {
  const edges = problem.nodes - 1;
  const m = system.blockSize;
  const result = Array.from({ length: 4 }, () => ({ re: new Float64Array(edges), im: new Float64Array(edges) }));
  const unit = currentFromSI(problem.sign * elementaryCharge);
  const { weight, harmonicWeight } = system.reading;
  for (let e = 0; e < edges; e++)
    for (let k = 0; k < m; k++) {
      const flow = complex(fluxes.re[e * m + k], fluxes.im[e * m + k]);
      const { re, im } = multiply(flow, complex(unit * weight[k], unit * omega * harmonicWeight[k]));
      const target = result[k === 0 ? 3 : Math.min(k - 1, 2)];
      target.re[e] += re;
      target.im[e] += im;
    }
  return result;
}

function profilesAt(point: OperatingPoint, technique: Technique, frequencyHz: number): HarmonicProfiles | null {
  const { problem, steady } = point;
  const linear = linearise(problem, steady.state, steady.drive);
  const omega = 2 * Math.PI * frequencyHz;
  const solver = conservativeSolver(linear.system);
  const { unknowns, fluxes, status } = solver.profiles(omega);
  const { real, imaginary } = solver.read([omega], { edge: linear.state.cut, everywhere: false });
  if (status === "singular") return null;
  const current = (column: number) => scale(complex(real[column], imaginary[column]), problem.sign);
  const drives = drivesOf(point, technique, frequencyHz, {
    photocurrent: current(lightColumn),
    admittance: scale(current(voltageColumn), -elementaryCharge / problem.thermalVoltage),
  });
  const total = combined(unknowns, drives);
  const { state } = linear;
  const { layers, device } = problem;
  const m = linear.system.blockSize;
  const points = profilePoints(problem);
  const ions = steady.drive.heldIons ?? holdIons(problem, state);
  const jump = scale(drives.voltage, problem.sign);
  const profile = (value: (part: Float64Array, at: number, i: number, k: number, shift: number) => number) => {
    const of = (part: Float64Array, shift: number) =>
      Float64Array.from(points.node, (i, p) => value(part, i * m, i, points.layer[p], i > state.cut ? shift : 0));
    return { re: of(total.re, jump.re), im: of(total.im, jump.im) };
  };
  /** δ density = density · (sign δφ̃ + sign δu): the step behind the cut falls out. */
  const species = (charge: 1 | -1, density: (i: number, k: number) => number, unknown: number) =>
    profile((part, at, i, k) => -charge * 1e-6 * density(i, k) * (part[at] + (unknown < 0 ? 0 : part[at + unknown])));
  const ionUnknown = (charge: 1 | -1) => linear.ionUnknowns.find((ion) => ion.charge === charge)?.unknown;
  const ionProfile = (charge: 1 | -1, densities: Float64Array) => {
    const unknown = ionUnknown(charge);
    const carries = (k: number) => (charge === 1 ? device.layers[k].cations : device.layers[k].anions) > 0;
    return species(charge, (i, k) => (unknown !== undefined && carries(k) ? densities[i] : 0), unknown ?? -1);
  };
  const [electronCurrent, holeCurrent, ionCurrent, displacement] = edgeCurrents(
    linear,
    combined(fluxes, drives),
    omega,
  ).map(({ re, im }) => ({ re: edgesToPoints(problem, points, re), im: edgesToPoints(problem, points, im) }));
  return {
    status: "solved",
    frequencyHz,
    depthNm: Float64Array.from(points.node, (i) => problem.x[i] * 1e9),
    layer: points.layer,
    potentialV: profile((part, at, _i, _k, shift) => (part[at] + shift) * problem.thermalVoltage),
    electronsPerCm3: species(
      -1,
      (i, k) => boltzmann(layers.electronLevel[k] + state.potential[i] + state.electronEnergy[i]),
      1,
    ),
    holesPerCm3: species(1, (i, k) => boltzmann(layers.holeLevel[k] - state.potential[i] - state.holeEnergy[i]), 2),
    cationsPerCm3: ionProfile(1, ions.cations),
    anionsPerCm3: ionProfile(-1, ions.anions),
    electronCurrentMAPerCm2: electronCurrent,
    holeCurrentMAPerCm2: holeCurrent,
    ionCurrentMAPerCm2: ionCurrent,
    displacementCurrentMAPerCm2: displacement,
  };
}

/** Profiles of the oscillation of a technique at a bias, a photon flux (cm⁻² s⁻¹) and a frequency. */
export function harmonicProfilesOf(
  points: OperatingPoints,
  request: { technique: Technique; bias: Bias; fluxPerCm2S: number; frequencyHz: number },
): HarmonicProfiles | { status: "failed"; failure: Failure } {
  const point = points.at(request.bias, request.fluxPerCm2S);
  if (point.steady.status !== "solved") return { status: "failed", failure: failureOf(point) };
  return (
    profilesAt(point, request.technique, request.frequencyHz) ?? {
      status: "failed",
      failure: failureOf(point, `small signal at ${request.frequencyHz} Hz`),
    }
  );
}

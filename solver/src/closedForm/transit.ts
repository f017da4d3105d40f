/**
 * Transit of carriers through a uniform field.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | T_n, T_p | transit times of electrons and holes through the absorber | s |
 * | E | field (V_bi − V_i)/d | V/m |
 * | a = αd | optical depth of the absorber | 1 |
 *
 * `twoCarrier` is the current induced by both carriers with Beer–Lambert generation: G. Lucovsky, R. F. Schwarz and
 * R. B. Emmons, J. Appl. Phys. 35, 622 (1964) (from memory); `induced` its limit for uniform generation, one carrier
 * or both; `collected` the particle flux that arrives at the electrode, without the induced current.
 */
import { type Cell, type Request, requestsOf, spectrumOf } from "../cell.ts";
import { elementaryCharge, vacuumPermittivity } from "../constants.ts";
import { builtInVoltage } from "../equilibrium.ts";
import { add, type Complex, complex, scale } from "../numerics/complex.ts";
import { type Device, fluxToSI } from "../scenario/device.ts";
import { refuse } from "../scenario/errors.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { TransitOverrides } from "../scenario/schema.ts";
import type { SolvedSpectra } from "../solve.ts";
import { type AbsorberLight, lightAtAbsorber } from "./absorber.ts";
import { meanDecay, meanPassage } from "./exponentialIntegrals.ts";

type Variant = NonNullable<TransitOverrides["variant"]>;
type Carriers = NonNullable<TransitOverrides["carrier"]>;

interface TransitTimes {
  electron: number;
  hole: number;
}

const defaultCarrier: Record<Variant, Carriers> = { twoCarrier: "both", collected: "electron", induced: "both" };

/** Response per photon that reaches the absorber, as a function of ω; `holeContactLit` orders the carriers of `twoCarrier`. */
function responseOf(
  variant: Variant,
  carrier: Carriers,
  times: TransitTimes,
  depth: number,
  holeContactLit: boolean,
): (omega: number) => Complex {
  const angle = (omega: number, time: number) => complex(0, omega * time);
  if (variant === "twoCarrier") {
    const [toLit, toDark] = holeContactLit ? [times.hole, times.electron] : [times.electron, times.hole];
    const near = meanPassage(depth, "near");
    const far = meanPassage(depth, "far");
    return (omega) => scale(add(near(angle(omega, toLit)), far(angle(omega, toDark))), depth);
  }
  const fraction = -Math.expm1(-depth);
  if (variant === "collected") {
    const time = carrier === "hole" ? times.hole : times.electron;
    return (omega) => scale(meanDecay(angle(omega, time)), fraction);
  }
  const passage = meanPassage(0, "near");
  const moving = carrier === "both" ? [times.electron, times.hole] : [times[carrier]];
  return (omega) =>
    scale(
      moving.map((time) => passage(angle(omega, time))).reduce((sum, part) => add(sum, part), complex(0)),
      fraction,
    );
}

const needed: Record<Carriers, readonly ("electron" | "hole")[]> = {
  electron: ["electron"],
  hole: ["hole"],
  both: ["electron", "hole"],
};

/** Transit times in ns at an inner voltage; null where nothing gives one and none is needed. */
function transitTimes(
  { scenario, device, path }: Request,
  overrides: TransitOverrides,
  carrier: Carriers,
  inner: number,
) {
  const layer = device.layers[scenario.model.absorber];
  const derivedField = (builtInVoltage(device) - inner) / layer.thickness / 100;
  const field = overrides.fieldVPerCm ?? derivedField;
  const missing = needed[carrier].some((name) => overrides[`${name}TransitTimeNs`] === undefined);
  if (missing && !(field > 0))
    refuse(
      `${path}.bias`,
      `leaves no field that drives the carriers to their contacts (${field.toPrecision(3)} V/cm)`,
      "an inner voltage below the built-in voltage, or the overrides fieldVPerCm or the transit times",
    );
  const time = (name: "electron" | "hole"): number | null => {
    const given = overrides[`${name}TransitTimeNs`];
    const mobility = scenario.stack.layers[scenario.model.absorber][`${name}MobilityCm2PerVs`];
    if (given !== undefined) return given;
    return field > 0 ? (layer.thickness * 1e11) / (mobility * field) : null;
  };
  return { field, electron: time("electron"), hole: time("hole") };
}

function cellOf(request: Request, overrides: TransitOverrides): Cell {
  const { scenario, device, spectrum, path } = request;
  const { technique, bias } = spectrum;
  if (technique !== "imps") refuse(`${path}.technique`, `is "${technique}"`, `"imps" with this model`);
  if (bias === "openCircuit")
    refuse(`${path}.bias`, "is open circuit, where no field is left", `"shortCircuit" or a voltage with this model`);
  const variant = overrides.variant ?? "twoCarrier";
  const carrier = overrides.carrier ?? defaultCarrier[variant];
  const { absorber } = scenario.model;
  const layer = device.layers[absorber];
  const { seriesResistance, shuntResistance } = device.circuit;
  const holeContactLit = device.lightSide !== device.electronContact;
  const inside = ({ absorption, reaching }: AbsorberLight, times: TransitTimes) => {
    const perReaching = responseOf(variant, carrier, times, absorption * layer.thickness, holeContactLit);
    return (omega: number) => scale(perReaching(omega), reaching);
  };
  // The steady response depends on no transit time.
  const steady = inside(lightAtAbsorber(device, absorber, "bias"), { electron: 1, hole: 1 })(0).re;
  const terminal = bias === "shortCircuit" ? 0 : bias.voltageV;
  const light = elementaryCharge * fluxToSI(spectrum.fluxPerCm2S) * steady;
  const current = (light - terminal / shuntResistance) / (1 + seriesResistance / shuntResistance);
  const { field, electron, hole } = transitTimes(request, overrides, carrier, terminal + seriesResistance * current);
  const times = { electron: (electron ?? 0) * 1e-9, hole: (hole ?? 0) * 1e-9 };
  const capacitance = (layer.relativePermittivity * vacuumPermittivity) / layer.thickness;
  return {
    operatingPoint: { voltage: terminal, current },
    photocurrent: inside(lightAtAbsorber(device, absorber, "modulation"), times),
    admittance: (omega) => complex(0, omega * capacitance),
    derived: { variant, carrier, electronTransitTimeNs: electron, holeTransitTimeNs: hole, fieldVPerCm: field },
  };
}

/** Transit in a uniform field; IMPS at short circuit or a voltage. */
export function solveTransit(scenario: ResolvedScenario, device: Device): SolvedSpectra {
  const overrides = scenario.model.kind === "transit" ? scenario.model.overrides : {};
  return {
    spectra: requestsOf(scenario, device).map((request) => spectrumOf(request, cellOf(request, overrides))),
    warnings: [],
  };
}

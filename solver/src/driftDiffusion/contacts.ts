/**
 * Contacts: a work function and a surface recombination velocity for each carrier.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | Φ_c | work function | V below vacuum |
 * | n₀, p₀ | equilibrium densities at the contact | m⁻³ |
 * | S_n, S_p | surface recombination velocities | m/s |
 *
 * Each contact's Fermi level is the zero of the energies on its side, so φ = −Φ_c there at every voltage and the flows
 * into the contact are S_n n₀ (e^{u_n} − 1) and S_p p₀ (e^{−u_p} − 1).
 */
import { workFunctionOf } from "../equilibrium.ts";
import type { Device } from "../scenario/device.ts";
import type { Side } from "../scenario/schema.ts";
import { boltzmann, electronLevel, holeLevel } from "./statistics.ts";

export interface ContactTable {
  /** Work function, V. */
  workFunction: number;
  /** φ̃ at the contact. */
  potential: number;
  electronDensity: number;
  holeDensity: number;
  electronVelocity: number;
  holeVelocity: number;
}

/** A carrier that can neither recombine nor leave: its density would be undetermined. */
export class ContactRefusal extends Error {
  readonly path: string;
  readonly allowed: string;
  constructor(path: string, message: string, allowed: string) {
    super(message);
    this.name = "ContactRefusal";
    this.path = path;
    this.allowed = allowed;
  }
}

export function contactTable(device: Device, side: Side, thermalVoltage: number): ContactTable {
  const contact = device[side];
  const layer = side === "front" ? device.layers[0] : device.layers[device.layers.length - 1];
  const workFunction = workFunctionOf(device, side);
  const potential = -workFunction / thermalVoltage;
  return {
    workFunction,
    potential,
    electronDensity: boltzmann(electronLevel(layer, thermalVoltage) + potential),
    holeDensity: boltzmann(holeLevel(layer, thermalVoltage) - potential),
    electronVelocity: contact.electronVelocity,
    holeVelocity: contact.holeVelocity,
  };
}

/** @throws ContactRefusal where both velocities of a carrier are zero and nothing recombines. */
export function refuseIsolatedCarriers(device: Device): void {
  const recombines =
    device.interfaces.length > 0 ||
    device.layers.some(
      (layer) =>
        layer.electronLifetime !== null || layer.radiative > 0 || layer.augerElectron > 0 || layer.augerHole > 0,
    );
  if (recombines) return;
  const electronSide = device.electronContact;
  const holeSide = electronSide === "front" ? "back" : "front";
  for (const [carrier, field, minoritySide] of [
    ["electrons", "electronVelocity", holeSide],
    ["holes", "holeVelocity", electronSide],
  ] as const)
    if (device.front[field] === 0 && device.back[field] === 0)
      throw new ContactRefusal(
        `stack.${minoritySide}.${field}CmPerS`,
        `is 0 at both contacts while nothing recombines: ${carrier} could neither leave nor recombine`,
        "above 0 at one contact, or recombination in a layer or at an interface",
      );
}

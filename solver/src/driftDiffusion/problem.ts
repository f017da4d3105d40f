/**
 * The discrete problem: a stack on its mesh, as flat arrays.
 *
 * Scaling: potentials in V_T, quasi-Fermi energies in kT, densities in m⁻³, rates in m⁻³ s⁻¹, currents as particle
 * fluxes (J/q, m⁻² s⁻¹), charge per area as a number (m⁻²).
 *
 * | symbol | meaning | unit | shape |
 * |---|---|---|---|
 * | x | depth of the nodes | m | nodes |
 * | edge e | between nodes e and e+1, inside one layer | | nodes − 1 |
 * | piece k | the part of a node's control volume inside one layer; nodes at interfaces have two | | pieces |
 * | D/h | diffusion coefficient over spacing | m/s | edges |
 * | ε V_T/(q h) | permittivity over spacing, as a number of charges per kT | m⁻² | edges |
 */
import { elementaryCharge, thermalVoltage as thermalVoltageAt, vacuumPermittivity } from "../constants.ts";
import { type Interval, lightThrough, type Wavelength } from "../light/generation.ts";
import type { Device } from "../scenario/device.ts";
import { type ContactTable, contactTable, refuseIsolatedCarriers } from "./contacts.ts";
import { type IonGroup, ionGroups } from "./ions.ts";
import type { Mesh } from "./mesh.ts";
import { type InterfaceTable, interfaceTable, type LayerTable, layerTable } from "./recombination.ts";

export interface Problem {
  device: Device;
  thermalVoltage: number;
  /** +1 where the hole contact is at the back, −1 where it is at the front: V raises the back by sign·V. */
  sign: 1 | -1;
  nodes: number;
  x: Float64Array;
  spacing: Float64Array;
  edgeLayer: Int32Array;
  electronConductance: Float64Array;
  holeConductance: Float64Array;
  permittivity: Float64Array;
  pieceNode: Int32Array;
  pieceLayer: Int32Array;
  pieceWidth: Float64Array;
  layers: LayerTable;
  interfaces: InterfaceTable;
  front: ContactTable;
  back: ContactTable;
  ions: IonGroup[];
  /** Pairs per photon in each node's control volume, at the two wavelengths. */
  biasGeneration: Float64Array;
  modulationGeneration: Float64Array;
}

interface Pieces {
  node: Int32Array;
  layer: Int32Array;
  width: Float64Array;
  /** Depths inside the layer, for the light. */
  intervals: Interval[];
}

/** Pieces of control volumes in order of depth. */
function pieces(device: Device, x: Float64Array, edgeLayer: Int32Array): Pieces {
  const starts: number[] = [];
  let total = 0;
  for (const layer of device.layers) {
    starts.push(total);
    total += layer.thickness;
  }
  const node: number[] = [];
  const intervals: Interval[] = [];
  let from = 0;
  const add = (i: number, layer: number, to: number) => {
    node.push(i);
    intervals.push({ layer, from: from - starts[layer], to: to - starts[layer] });
    from = to;
  };
  for (let i = 0; i < x.length; i++) {
    const end = i === x.length - 1 ? x[i] : 0.5 * (x[i] + x[i + 1]);
    const before = i === 0 ? -1 : edgeLayer[i - 1];
    const after = i === x.length - 1 ? -1 : edgeLayer[i];
    if (before >= 0 && after >= 0 && before !== after) {
      add(i, before, x[i]);
      add(i, after, end);
    } else add(i, before >= 0 ? before : after, end);
  }
  return {
    node: Int32Array.from(node),
    layer: Int32Array.from(intervals, ({ layer }) => layer),
    width: Float64Array.from(intervals, (interval) => interval.to - interval.from),
    intervals,
  };
}

/**
 * Prepare a device for solving on a mesh.
 * @throws ContactRefusal where a carrier could neither recombine nor leave
 */
export function prepareProblem(device: Device, { x, edgeLayer }: Mesh): Problem {
  refuseIsolatedCarriers(device);
  const thermalVoltage = thermalVoltageAt(device.temperature);
  const edges = edgeLayer.length;
  const spacing = new Float64Array(edges);
  const electronConductance = new Float64Array(edges);
  const holeConductance = new Float64Array(edges);
  const permittivity = new Float64Array(edges);
  for (let e = 0; e < edges; e++) {
    const layer = device.layers[edgeLayer[e]];
    const h = x[e + 1] - x[e];
    spacing[e] = h;
    electronConductance[e] = (layer.electronMobility * thermalVoltage) / h;
    holeConductance[e] = (layer.holeMobility * thermalVoltage) / h;
    permittivity[e] = (layer.relativePermittivity * vacuumPermittivity * thermalVoltage) / (elementaryCharge * h);
  }
  const part = pieces(device, x, edgeLayer);
  const generation = (wavelength: Wavelength) => {
    const perPiece = lightThrough(device, wavelength).generationOver(part.intervals);
    const sum = new Float64Array(x.length);
    for (let k = 0; k < perPiece.length; k++) sum[part.node[k]] += perPiece[k];
    return sum;
  };
  return {
    device,
    thermalVoltage,
    sign: device.electronContact === "front" ? 1 : -1,
    nodes: x.length,
    x,
    spacing,
    edgeLayer,
    electronConductance,
    holeConductance,
    permittivity,
    pieceNode: part.node,
    pieceLayer: part.layer,
    pieceWidth: part.width,
    layers: layerTable(device, thermalVoltage),
    interfaces: interfaceTable(device, edgeLayer, thermalVoltage),
    front: contactTable(device, "front", thermalVoltage),
    back: contactTable(device, "back", thermalVoltage),
    ions: ionGroups(device, x, edgeLayer, thermalVoltage),
    biasGeneration: generation("bias"),
    modulationGeneration: generation("modulation"),
  };
}

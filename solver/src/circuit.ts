/**
 * What surrounds the cell, per area: shunt and parallel capacitance beside it, a series resistance outside both, a
 * first-order amplifier and light source.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | Q_i | inner response, electrons per incident photon at constant inner voltage | 1 |
 * | Y_i | inner admittance | S/m² |
 * | Y_p = Y_i + 1/R_sh + iωC_p | | S/m² |
 *
 * `Q = Q_i/(1 + R_s Y_p)`, `Z = R_s + 1/Y_p`, `W = Q_i/Y_p`: the linear two-port (common practice, no source).
 */
import { add, type Complex, complex, divide, multiply, one, scale } from "./numerics/complex.ts";
import type { Circuit } from "./scenario/device.ts";
import type { Technique } from "./scenario/schema.ts";

/** Admittance of the cell with what lies beside it, inside the series resistance. */
function parallelAdmittance(circuit: Circuit, frequency: number, admittance: Complex): Complex {
  const { shuntResistance, parallelCapacitance } = circuit;
  return add(admittance, complex(1 / shuntResistance, 2 * Math.PI * frequency * parallelCapacitance));
}

const firstOrder = (frequency: number, bandwidth: number): Complex => divide(one, complex(1, frequency / bandwidth));

/** Whether anything but the cell itself carries alternating current inside the series resistance. */
export const hasParallelPath = ({ shuntResistance, parallelCapacitance }: Circuit): boolean =>
  shuntResistance < Infinity || parallelCapacitance > 0;

/**
 * What is measured at the terminals at one frequency (Hz).
 *
 * @returns Q for IMPS (1), W for IMVS and Z for impedance (both Ω m²).
 */
export function atTerminals(
  technique: Technique,
  circuit: Circuit,
  frequency: number,
  { photocurrent, admittance }: { photocurrent: Complex; admittance: Complex },
): Complex {
  const parallel = parallelAdmittance(circuit, frequency, admittance);
  if (technique === "impedance") return add(complex(circuit.seriesResistance), divide(one, parallel));
  const source = firstOrder(frequency, circuit.sourceBandwidth);
  if (technique === "imvs") return multiply(divide(photocurrent, parallel), source);
  const inside = divide(photocurrent, add(one, scale(parallel, circuit.seriesResistance)));
  return multiply(multiply(inside, source), firstOrder(frequency, circuit.amplifierBandwidth));
}

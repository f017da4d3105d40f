/**
 * Transfer and recombination at the surface of a photoelectrode, first-order rates: E. A. Ponomarev and L. M. Peter,
 * J. Electroanal. Chem. 396, 219 (1995) (from memory).
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | k_tr, k_rec | rates of transfer and recombination | 1/s |
 * | C_H, C_w | Helmholtz and depletion capacitance | F/m² |
 * | r = C_H/(C_w + C_H) | | 1 |
 */
import { type Complex, complex, divide } from "../numerics/complex.ts";
import type { GaertnerOverrides } from "../scenario/schema.ts";

export interface SurfaceTransfer {
  transfer: number;
  recombination: number;
  /** Infinity where it is not given. */
  helmholtz: number;
}

/** The surface of the overrides; null where surface transfer is off. */
export function surfaceTransferOf(overrides: GaertnerOverrides): SurfaceTransfer | null {
  const { transferPerS, surfaceRecombinationPerS = 0, helmholtzCapacitanceFPerCm2 = Infinity } = overrides;
  if (transferPerS === undefined) return null;
  return {
    transfer: transferPerS,
    recombination: surfaceRecombinationPerS,
    helmholtz: helmholtzCapacitanceFPerCm2 * 1e4,
  };
}

/** r for a depletion capacitance in F/m². */
const share = ({ helmholtz }: SurfaceTransfer, capacitance: number): number =>
  helmholtz === Infinity ? 1 : helmholtz / (capacitance + helmholtz);

/** Fraction of the carriers arriving at the surface that is measured: (k_tr + iωr)/(k_tr + k_rec + iω). */
export function transferredFraction(surface: SurfaceTransfer, capacitance: number): (omega: number) => Complex {
  const { transfer, recombination } = surface;
  const r = share(surface, capacitance);
  return (omega) => divide(complex(transfer, omega * r), complex(transfer + recombination, omega));
}

/** iω C_w C_H/(C_w + C_H) in S/m². */
export function surfaceAdmittance(surface: SurfaceTransfer, capacitance: number): (omega: number) => Complex {
  const inSeries = capacitance * share(surface, capacitance);
  return (omega) => complex(0, omega * inSeries);
}

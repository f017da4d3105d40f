/**
 * Dynamic traps in the small signal, eliminated from the unknowns.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | f | steady occupancy | 1 |
 * | C_n, C_p | 1/τ_n, 1/τ_p | s⁻¹ |
 * | d | relaxation rate of the occupancy, [C_n(n+n_1) + C_p(p+p_1)]/N_t | s⁻¹ |
 *
 *     N_t ∂f/∂t = C_n [n(1−f) − n_1 f] − C_p [p f − p_1(1−f)]
 *     δf = [C_n(1−f) δn − C_p f δp] / (N_t (d + iω))
 *
 * Source: W. Shockley, W. T. Read, Phys. Rev. 87, 835 (1952), with the occupancy's own charge kept in Poisson's equation.
 */
import type { Relaxation } from "../linearAlgebra/conservativeSystem.ts";
import type { Assembly, TrapSink } from "./assembly.ts";
import type { Problem } from "./problem.ts";

/** Collects one relaxation a piece and adds the capture at fixed occupancy to the diagonal blocks. */
export function trapRelaxations(problem: Problem, target: Assembly, relaxations: Relaxation[]): TrapSink {
  const { pieceNode, pieceLayer, pieceWidth, layers, nodes } = problem;
  const m = target.blockSize;
  return {
    add(piece, n, p) {
      const node = pieceNode[piece];
      const layer = pieceLayer[piece];
      const width = pieceWidth[piece];
      const density = layers.trapDensity[layer];
      const captureElectrons = 1 / layers.electronLifetime[layer];
      const captureHoles = 1 / layers.holeLifetime[layer];
      const emptying = captureElectrons * layers.trapElectrons[layer] + captureHoles * p;
      const filling = captureElectrons * n + captureHoles * layers.trapHoles[layer];
      const total = emptying + filling;
      const byElectrons = (captureElectrons * n * emptying) / total;
      const byHoles = (captureHoles * p * filling) / total;
      const row = new Float64Array(m);
      row[0] = (byElectrons + byHoles) / density;
      row[1] = byElectrons / density;
      row[2] = byHoles / density;
      const column = new Float64Array(m);
      column[0] = node === 0 || node === nodes - 1 ? 0 : width * density;
      column[1] = -width * captureElectrons * (n + layers.trapElectrons[layer]);
      column[2] = width * captureHoles * (p + layers.trapHoles[layer]);
      relaxations.push({ node, decay: total / density, row, column });
      const d = node * m * m;
      target.diagonal[d + m] += width * byElectrons;
      target.diagonal[d + m + 1] += width * byElectrons;
      target.diagonal[d + 2 * m] -= width * byHoles;
      target.diagonal[d + 2 * m + 2] -= width * byHoles;
    },
  };
}

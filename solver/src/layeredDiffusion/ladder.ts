/**
 * Diffusion and recombination through many layers by finite volumes, one frequency at a time.
 *
 * | symbol | meaning | unit | shape |
 * |---|---|---|---|
 * | n_i | density per unit density at the collecting contact | 1 | nodes |
 * | g_i = D/h_i | conductance of an interval | m/s | nodes − 1 |
 * | v_i | volume per area times rate (1/τ + iω), both half intervals of a node | m/s | nodes |
 * | Y_i | flux drawn beyond node i per unit density there, its own volume included | m/s | nodes |
 *
 * The tridiagonal system `g_{i−1}(n_{i−1} − n_i) − g_i(n_i − n_{i+1}) = v_i n_i` is eliminated from the far side as a
 * ladder network: `Y_i = v_i + g_i Y_{i+1}/(g_i + Y_{i+1})`, `n_{i+1} = n_i g_i/(g_i + Y_{i+1})`. No differences are
 * taken, so nothing cancels. Nodes lie on the faces between layers: n is one number there and the fluxes D n' balance.
 * The system is symmetric, so the flux collected from a generation G_i is Σ n_i G_i.
 */
import { type Complex, complex } from "../numerics/complex.ts";

export interface LadderLayer {
  /** Depths of the nodes inside the layer, both faces included, from the collecting side, m. */
  nodes: Float64Array;
  diffusion: number;
  /** 1/τ. */
  rate: number;
}

export interface LadderState {
  /** Flux drawn by the film per unit density at the collecting contact, m/s. */
  conductance: Complex;
  /** n_i. */
  re: Float64Array;
  im: Float64Array;
}

/** The film from the collecting contact to the far side, ready to be solved at any frequency. */
export function ladderOf(layers: readonly LadderLayer[], farVelocity: number): (omega: number) => LadderState {
  const intervals = layers.reduce((sum, { nodes }) => sum + nodes.length - 1, 0);
  const conductances = new Float64Array(intervals);
  const volumes = new Float64Array(intervals + 1);
  const losses = new Float64Array(intervals + 1);
  let i = 0;
  for (const { nodes, diffusion, rate } of layers)
    for (let k = 1; k < nodes.length; k++, i++) {
      const step = nodes[k] - nodes[k - 1];
      conductances[i] = diffusion / step;
      for (const node of [i, i + 1]) {
        volumes[node] += step / 2;
        losses[node] += (rate * step) / 2;
      }
    }
  losses[intervals] += farVelocity;

  return (omega) => {
    const ratioRe = new Float64Array(intervals);
    const ratioIm = new Float64Array(intervals);
    let drawnRe = losses[intervals];
    let drawnIm = omega * volumes[intervals];
    for (let node = intervals - 1; node >= 0; node--) {
      const g = conductances[node];
      const sum = g + drawnRe;
      const square = sum * sum + drawnIm * drawnIm;
      const re = (g * sum) / square;
      const im = (-g * drawnIm) / square;
      ratioRe[node] = re;
      ratioIm[node] = im;
      const nextRe = losses[node] + re * drawnRe - im * drawnIm;
      drawnIm = omega * volumes[node] + re * drawnIm + im * drawnRe;
      drawnRe = nextRe;
    }
    const re = new Float64Array(intervals + 1);
    const im = new Float64Array(intervals + 1);
    re[0] = 1;
    for (let node = 0; node < intervals; node++) {
      re[node + 1] = re[node] * ratioRe[node] - im[node] * ratioIm[node];
      im[node + 1] = re[node] * ratioIm[node] + im[node] * ratioRe[node];
    }
    return { conductance: complex(drawnRe, drawnIm), re, im };
  };
}

/** Σ n_i G_i: flux collected by a perfect contact from a generation per node. */
export function collectedBy({ re, im }: LadderState, generation: Float64Array): Complex {
  let [sumRe, sumIm] = [0, 0];
  for (let i = 0; i < generation.length; i++) {
    sumRe += re[i] * generation[i];
    sumIm += im[i] * generation[i];
  }
  return complex(sumRe, sumIm);
}

/**
 * A conservative harmonic system at a batch of frequency pairs: fluxes through edges, balances at nodes, arrows between unknowns (all
 * fluxes may contain the first unknown, each contains its own). See elimination.ts and substitution.ts for the method, memory.ts for
 * the layout.
 */
import { blockBytes, blocks, fieldBytes, marks, meetingBlocks, meetingValues, nodeCount, pairs, values } from "./memory";
import { sweep } from "./elimination";
import { meet, substitute } from "./substitution";

export { arrange, extents, fluxes, frequencies, marks, readings, records, solution, table, weights } from "./memory";

/**
 * Solves the batch. The reading edge lies between nodes `meeting` − 1 and `meeting` > 0; with `everywhere` all other edges are compared
 * with it, and with `all` the unknowns and fluxes of every node and edge are left in `solution` and `fluxes`.
 */
export function solve(meeting: i32, everywhere: bool, all: bool): void {
  for (let q: usize = 0; q < pairs; q++) v128.store(marks + q * 16, f64x2.splat(0));
  const first = everywhere ? 0 : meeting - 1;
  sweep(0, meeting, first, meeting, false);
  memory.copy(meetingBlocks, blocks, pairs * blockBytes);
  memory.copy(meetingValues, values, fieldBytes);
  sweep(nodeCount - 1, meeting, first, everywhere ? nodeCount - 1 : meeting, true);
  meet(meeting, all);
  substitute(meeting, first, first, all, true);
  if (everywhere) substitute(meeting, nodeCount - 1, first, all, false);
}

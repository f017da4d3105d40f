/** The way in to harmonic systems. */
import { pivotedHarmonicSolver } from "./harmonicElimination.ts";
import type { HarmonicSolver, HarmonicSystem } from "./harmonicSystem.ts";

/**
 * Prepares a system (scaling, pattern) once; solve it at as many frequencies as wanted.
 * @throws RangeError when an array of the system has the wrong length
 */
export function harmonicSolver(system: HarmonicSystem): HarmonicSolver {
  return pivotedHarmonicSolver(system);
}

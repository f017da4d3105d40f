/** The way in to conservative systems: the fastest safe solver for the system and the machine. */
import { pivotedConservativeSolver } from "./conservativeElimination.ts";
import { kernelConservativeSolver } from "./conservativeKernel.ts";
import type { ConservativeSolver, ConservativeSystem } from "./conservativeSystem.ts";

/**
 * Prepares a system once; read it at as many frequencies as wanted.
 * @throws RangeError when an array of the system has the wrong length
 */
export function conservativeSolver(system: ConservativeSystem): ConservativeSolver {
  return kernelConservativeSolver(system) ?? pivotedConservativeSolver(system);
}

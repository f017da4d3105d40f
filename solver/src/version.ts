/** Version of the solver: part of every hash, so that a new version never answers with an old result. */
export const solverVersion = "0.1.0";

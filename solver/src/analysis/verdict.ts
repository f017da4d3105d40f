/** What every check answers. */
export type Verdict = "holds" | "marginal" | "fails" | "notTested";

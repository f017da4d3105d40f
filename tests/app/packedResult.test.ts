import type { ResultDocument } from "@demilune/solver";
import { describe, expect, it } from "vitest";
import { packResult, unpackResult } from "~/queue/packedResult";

const result: ResultDocument = {
  format: "demilune.result/1",
  solver: "0.1.0",
  hash: "ab",
  status: "notSolved",
  warnings: [],
  spectra: [
    {
      status: "solved",
      technique: "imps",
      bias: "shortCircuit",
      fluxPerCm2S: 1e17,
      unit: "1",
      operatingPoint: { voltageV: 0, currentMAPerCm2: 8 },
      frequencyHz: [0.1, 1, 10],
      re: [0.1 + 0.2, 0.2, 1e-300],
      im: [-1e-5, -0.1, -5e-324],
    },
    {
      status: "notConverged",
      technique: "imvs",
      bias: "openCircuit",
      fluxPerCm2S: 1e17,
      unit: "Ω·cm²",
      failure: {
        step: "open circuit",
        operatingPoint: { voltageV: null, fluxPerCm2S: 1e17 },
        residual: 1,
        iterations: 9,
        message: "",
      },
    },
  ],
};

describe("a result taken apart for storage", () => {
  it("comes back bit for bit, failures included", () => {
    expect(unpackResult(packResult(result))).toEqual(result);
  });

  it("keeps no arrays in its small part", () => {
    expect(JSON.stringify(packResult(result).head)).not.toContain("frequencyHz");
  });
});

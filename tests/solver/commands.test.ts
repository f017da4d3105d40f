/** The commands solve and sweep, as other people's scripts run them. Ours: the contract of the command line. */
import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { ResultDocument } from "@demilune/solver";
import { afterAll, describe, expect, test } from "vitest";
import { scenario } from "./support/scenarios.ts";

const root = fileURLToPath(new URL("../../", import.meta.url));
const folder = mkdtempSync(join(tmpdir(), "commands-"));
afterAll(() => rmSync(folder, { recursive: true }));

const spectra = [{ technique: "imps" }, { technique: "imvs" }] as const;
const document = scenario({
  model: { kind: "diffusion" },
  spectra: [...spectra],
  frequencies: { listHz: [10, 1] },
});
writeFileSync(join(folder, "film.json"), JSON.stringify(document));
writeFileSync(join(folder, "broken.json"), "{");
writeFileSync(
  join(folder, "wrong.json"),
  JSON.stringify({ ...document, circuit: { seriesResistanceOhmCm2: -1, ohm: 2 } }),
);

/** As `npm run` would start it in the caller's folder, without npm's own second. */
function run(command: string, given: string[], input?: string) {
  const program = join(root, `solver/src/commands/${command}.ts`);
  const { status, stdout, stderr } = spawnSync(process.execPath, ["--import", "tsx", program, ...given], {
    cwd: root,
    env: { ...process.env, INIT_CWD: folder },
    encoding: "utf8",
    input,
  });
  return { status, stdout, lines: stderr.split("\n").filter((line) => line !== "") };
}

describe("solve", () => {
  test("by its npm script, with a file named from the caller's folder", () => {
    const given = ["--prefix", root, "run", "--silent", "solve", "--", "film.json"];
    const { status, stdout, stderr } = spawnSync("npm", given, { cwd: folder, encoding: "utf8" });
    expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
    const result: ResultDocument = JSON.parse(stdout);
    expect(result).toMatchObject({ format: "demilune.result/1", status: "solved" });
    expect(result.hash).toMatch(/^[0-9a-f]{64}$/);
    expect(result.spectra.map(({ technique }) => technique)).toEqual(["imps", "imvs"]);
  });

  test("--csv: one row a point, spectra numbered from 0, from standard input", () => {
    const { status, stdout } = run("solve", ["--csv", "-"], JSON.stringify(document));
    const rows = stdout
      .trimEnd()
      .split("\n")
      .map((row) => row.split(","));
    expect(status).toBe(0);
    expect(rows[0].join(",")).toBe("spectrum,technique,frequencyHz,re,im");
    expect(rows.slice(1).map((row) => row.slice(0, 3).join(","))).toEqual([
      "0,imps,1",
      "0,imps,10",
      "1,imvs,1",
      "1,imvs,10",
    ]);
    expect(
      rows.slice(1).every((row) => row.length === 5 && row.slice(3).every((text) => Number.isFinite(Number(text)))),
    ).toBe(true);
  });

  test.each([
    [
      "a document with faults",
      ["wrong.json"],
      ["circuit.seriesResistanceOhmCm2: is -1 Ω·cm²; allowed: 0 to 1e9 Ω·cm²", "circuit.ohm: "],
    ],
    ["a file that is not there", ["none.json"], ["none.json: cannot be read (ENOENT); allowed: "]],
    ["a file that is not JSON", ["broken.json"], ["broken.json: is not JSON"]],
    ["an unknown option", ["film.json", "--table"], ["--table: is not an option; allowed: --help, --csv"]],
    ["no file", [], ["SCENARIO.json: is missing; allowed: "]],
    ["two files", ["film.json", "wrong.json"], ["wrong.json: is one argument too many; allowed: "]],
  ])("%s: exit 2, nothing on standard output, one line a fault", (_, given, starts) => {
    const { status, stdout, lines } = run("solve", given);
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(lines).toHaveLength(starts.length);
    for (const [k, start] of starts.entries()) expect(lines[k].slice(0, start.length)).toBe(start);
  });

  test("--help", () =>
    expect(run("solve", ["--help"])).toMatchObject({ status: 0, lines: [], stdout: expect.stringContaining("Usage") }));
});

describe("sweep", () => {
  test("the product of two paths, the last fastest, tied paths with one value", () => {
    const tied = "stack.layers.0.recombination.electronLifetimeNs+stack.layers.0.recombination.holeLifetimeNs";
    const given = [
      "film.json",
      "--path",
      tied,
      "--values",
      "1,10",
      "--path",
      "circuit.seriesResistanceOhmCm2",
      "--values",
      "0,5,2",
    ];
    const { status, stdout } = run("sweep", given);
    const results: (ResultDocument & { sweep: { path: string; value: number }[] })[] = JSON.parse(stdout);
    expect(status).toBe(0);
    expect(results.map(({ sweep }) => sweep.map(({ value }) => value))).toEqual([
      [1, 0],
      [1, 5],
      [1, 2],
      [10, 0],
      [10, 5],
      [10, 2],
    ]);
    expect(results[0].sweep.map(({ path }) => path)).toEqual([tied, "circuit.seriesResistanceOhmCm2"]);
    expect(new Set(results.map(({ hash }) => hash)).size).toBe(6);
  });

  test("negative values", () => {
    const transit = scenario({ model: { kind: "transit" }, spectra: [{ technique: "imps", bias: { voltageV: 0 } }] });
    const { status, stdout } = run(
      "sweep",
      ["-", "--path", "spectra.0.bias.voltageV", "--values", "-2,-1.5"],
      JSON.stringify(transit),
    );
    expect(status).toBe(0);
    expect(JSON.parse(stdout).map(({ spectra }: ResultDocument) => spectra[0].bias)).toEqual([
      { voltageV: -2 },
      { voltageV: -1.5 },
    ]);
  });

  test.each([
    ["a path to no number", ["film.json", "--path", "stack.layers.0.name", "--values", "1"], "stack.layers.0.name: "],
    [
      "a value out of range",
      ["film.json", "--path", "light.fluxPerCm2S", "--values", "1e16,1e21"],
      "light.fluxPerCm2S: is 1e+21 cm⁻² s⁻¹; allowed: ",
    ],
    ["a value that is no number", ["film.json", "--path", "light.fluxPerCm2S", "--values", "1e16,,3"], "--values: "],
    ["no values", ["film.json", "--path", "light.fluxPerCm2S"], "--values: is missing; allowed: "],
    ["no path", ["film.json"], "--path: "],
  ])("%s: exit 2", (_, given, start) => {
    const { status, stdout, lines } = run("sweep", given);
    expect({ status, stdout }).toEqual({ status: 2, stdout: "" });
    expect(lines[0].slice(0, start.length)).toBe(start);
  });
});

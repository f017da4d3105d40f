/** From the table of a file to spectra in our units and signs, with a reason for each step. */
import { type Causality, causalSign } from "./causality";
import {
  biasWords,
  from,
  quantityFinding,
  resolveBias,
  resolveModulatedFlux,
  resolveNumber,
  resolveTechnique,
  techniqueWords,
} from "./conditions";
import { type Conditions, type Conversion, conversionOf, type Need } from "./convert";
import type { Headings } from "./headings";
import { lineList } from "./lines";
import { type Notes, readNotes } from "./notes";
import type { Finding, ImportedSpectrum, ResolvedSettings, TraceDescription } from "./reading";
import { type Column, evenSteps } from "./roles";
import type { Format } from "./rows";
import { type ImportSettings, importLimits } from "./settings";
import {
  distinguishingColumn,
  groupColumns,
  type SpectrumColumns,
  type Sweep,
  sameFrequencies,
  splitSweeps,
} from "./sweeps";
import type { DataTable } from "./table";
import { hasDimensions, parseUnit } from "./units";
import { countRepeats, type RawSpectrum, readSweep, type Scales } from "./values";

interface Source {
  lines: readonly string[];
  table: DataTable;
  columns: readonly Column[];
  format: Format;
  notes: Notes;
  settings: ImportSettings;
}

interface Understood {
  findings: Finding[];
  questions: string[];
  warnings: string[];
  problem: string | null;
  needs: Need[];
  spectra: ImportedSpectrum[];
  resolved: Omit<ResolvedSettings, "encoding" | "delimiter" | "decimalMark">;
}

/** Columns named as in the data files of the command line, whose units are fixed. */
const isExactFormat = (columns: readonly Column[]) =>
  columns.some(({ name }) => name === "frequency") &&
  columns[0].unit === "Hz" &&
  ["re", "im"].every((word) => columns.some(({ name }) => name === word));

interface RawSet {
  set: SpectrumColumns;
  sweep: Sweep;
  label: string;
  notes: Notes;
  values: RawSpectrum;
}

const article = (count: number, word: string) => `${count} ${word}${count === 1 ? "" : "s"}`;

function phaseUnit(
  columns: readonly Column[],
  table: DataTable,
  sets: readonly SpectrumColumns[],
): { unit: string; reason: string } | null {
  const polar = sets.find((set) => set.kind === "polar");
  if (!polar) return null;
  const written = columns[polar.second].unit;
  if (written !== null && parseUnit(written)) return { unit: written, reason: "from the column's heading" };
  let widest = 0;
  for (const value of table.values[polar.second]) if (Math.abs(value) > Math.abs(widest)) widest = value;
  return Math.abs(widest) > 2 * Math.PI
    ? { unit: "deg", reason: `values reach ${Number(widest.toPrecision(3))}; in radians they could not` }
    : { unit: "rad", reason: `no value beyond ${Number(widest.toPrecision(3))}` };
}

/** Sweeps of every group of columns, and how a frequency that starts again was taken. */
function collect(source: Source, sets: readonly SpectrumColumns[], phase: string) {
  const { table, columns, lines, format, settings } = source;
  const raw: RawSet[] = [];
  const unusable = new Set<number>();
  let restart: { value: "newSpectrum" | "repeat"; reason: string } = {
    value: "newSpectrum",
    reason: "the frequency never starts again",
  };
  let direction: "up" | "down" | "mixed" = "up";
  for (const set of sets) {
    const split = splitSweeps(table, set);
    direction = split.direction;
    for (const row of split.unusable) unusable.add(row);
    let { sweeps } = split;
    if (sweeps.length > 1) {
      restart = decideRestart(source, set, sweeps);
      if (restart.value === "repeat") sweeps = [{ rows: sweeps.flatMap((sweep) => sweep.rows), textBefore: [] }];
    }
    const naming = sweeps.length > 1 ? distinguishingColumn(table, columns, sweeps) : null;
    const scales: Scales = {
      frequencyUnit: columns[set.frequency].unit,
      phaseUnit: phase,
      modulusUnit: columns[set.first].unit,
      timeUnit: set.time === null ? null : columns[set.time].unit,
    };
    for (const sweep of sweeps) {
      if (sweep.rows.length === 0 || raw.length >= importLimits.spectra) continue;
      raw.push({
        set,
        sweep,
        label: labelOf(source, sweep, naming, sweeps.length, sets.length > 1 ? columns[set.first].name : ""),
        notes: readNotes(lines, sweep.textBefore.slice(0, 50), format.decimalMark),
        values: readSweep(table, set, sweep.rows, scales),
      });
    }
  }
  if (settings.restart) restart = { value: settings.restart, reason: "chosen by you" };
  return { raw, unusable: [...unusable], restart, direction };
}

function decideRestart(
  source: Source,
  set: SpectrumColumns,
  sweeps: readonly Sweep[],
): { value: "newSpectrum" | "repeat"; reason: string } {
  const { table, columns, settings } = source;
  if (settings.restart) return { value: settings.restart, reason: "chosen by you" };
  const row = sweeps[1].rows[0];
  const where = `the frequency starts again in line ${table.lineOfRow[row] + 1}`;
  if (isExactFormat(columns)) {
    return { value: "repeat", reason: `${where}; in a file of this format that is a repeat` };
  }
  if (sweeps.slice(1).some((sweep) => sweep.textBefore.length > 0))
    return { value: "newSpectrum", reason: `${where}, after a line of text` };
  if (distinguishingColumn(table, columns, sweeps) !== null)
    return { value: "newSpectrum", reason: `${where}, and another column changes with it` };
  return sweeps.slice(1).every((sweep) => sameFrequencies(table.values[set.frequency], sweeps[0], sweep))
    ? { value: "repeat", reason: `${where} and goes through the same frequencies` }
    : { value: "newSpectrum", reason: `${where} with other frequencies` };
}

function labelOf(source: Source, sweep: Sweep, naming: number | null, count: number, group: string): string {
  if (count > 1 && naming !== null) {
    const { name, unit } = source.columns[naming];
    const value = Number(source.table.values[naming][sweep.rows[0]].toPrecision(4));
    return `${name || `column ${source.columns[naming].index + 1}`} ${value}${unit ? ` ${unit}` : ""}`;
  }
  const text = sweep.textBefore
    .map((line) => source.lines[line].replace(/^\s*[#%;/]+/, "").trim())
    .find((line) => line !== "");
  if (count > 1 && text) return text.slice(0, 80);
  if (group !== "") return group;
  return count > 1 ? `from line ${source.table.lineOfRow[sweep.rows[0]] + 1}` : "";
}

function signFinding(raw: readonly RawSet[], settings: ImportSettings) {
  const votes = raw.map(({ values }) => causalSign(values.frequencyHz, values.re, values.im));
  const clear = votes.filter((vote) => vote.sign !== "unclear");
  const reversed = clear.filter((vote) => vote.sign === "reversed").length;
  const guess: Causality["sign"] =
    clear.length === 0 ? "unclear" : reversed * 2 > clear.length ? "reversed" : "asWritten";
  const value = settings.imaginarySign ?? (guess === "reversed" ? "reversed" : "asWritten");
  const minus = raw.some(({ set }) => set.minusImaginary);
  const reasons: Record<Causality["sign"], string> = {
    asWritten: "Re and Im together are causal as they stand (Kramers–Kronig area rule)",
    reversed: "as written Re and Im would lead the light, not follow it (Kramers–Kronig area rule); turned over",
    unclear: minus ? "the heading says −Im" : "too little of an arc to tell; left as written",
  };
  const question =
    guess === "unclear" && settings.imaginarySign === undefined && !minus
      ? "The sign of Im cannot be told from these numbers. Is it right as drawn?"
      : guess === "reversed" && settings.imaginarySign === undefined
        ? "Im (or the phase) was turned over, because as written the response would precede the light. Is that right?"
        : null;
  return { value, reason: settings.imaginarySign ? "chosen by you" : reasons[guess], question };
}

function polarityFinding(raw: readonly RawSet[], settings: ImportSettings) {
  let negative = 0;
  let count = 0;
  for (const { values } of raw) {
    let peak = 0;
    for (let index = 0; index < values.re.length; index++) {
      if (Math.hypot(values.re[index], values.im[index]) > Math.hypot(values.re[peak], values.im[peak])) peak = index;
    }
    count++;
    if (values.re[peak] < 0 && Math.abs(values.re[peak]) > Math.abs(values.im[peak])) negative++;
  }
  const guess = negative * 2 > count ? ("reversed" as const) : ("asWritten" as const);
  const value = settings.polarity ?? guess;
  return {
    value,
    reason: settings.polarity
      ? "chosen by you"
      : guess === "reversed"
        ? "Re is below zero where the response is largest"
        : "Re is above zero where the response is largest",
    question:
      guess === "reversed" && settings.polarity === undefined
        ? "The whole response was turned over, so that photocurrent and photovoltage count positive. Is that right?"
        : null,
  };
}

/** Applies signs and units to one spectrum. */
function finish(raw: RawSet, conversion: Conversion, imaginary: number, polarity: number): RawSpectrum {
  const scale = conversion.needs.length > 0 ? 1 : conversion.factor;
  const re: number[] = [];
  const im: number[] = [];
  const sigma: number[] | null = raw.values.sigma ? [] : null;
  for (let index = 0; index < raw.values.re.length; index++) {
    const a = polarity * scale * raw.values.re[index];
    const b = polarity * imaginary * scale * raw.values.im[index];
    const square = a * a + b * b;
    const invert = conversion.invert && square > 0;
    re.push(invert ? a / square : a);
    im.push(invert ? -b / square : b);
    sigma?.push(invert ? (raw.values.sigma![index] * scale) / square : raw.values.sigma![index] * scale);
  }
  return { ...raw.values, re, im, sigma };
}

/** Reads all spectra of a table. */
export function readSpectra(source: Source): Understood {
  const { columns, table, notes, settings } = source;
  const sets = groupColumns(columns);
  const phase = phaseUnit(columns, table, sets);
  const { raw, unusable, restart, direction } = collect(source, sets, phase?.unit ?? "rad");
  const questions: string[] = [];
  const warnings: string[] = [];
  const findings: Finding[] = [];
  const unit = sets.length > 0 ? columns[sets[0].first].unit : null;

  const technique = resolveTechnique(settings.technique, notes, columns, unit);
  const bias = resolveBias(settings.bias, notes, technique.value);
  const flux = resolveNumber(settings.fluxPerCm2S, notes.fluxPerCm2S);
  const area = resolveNumber(settings.areaCm2, notes.areaCm2);
  const modulated = resolveModulatedFlux(settings, notes, flux.value);
  const wavelength = resolveNumber(settings.wavelengthNm, notes.wavelengthNm);
  const temperature = resolveNumber(settings.temperatureK, notes.temperatureK);
  const conditions: Conditions = {
    areaCm2: area.value,
    modulatedFluxPerCm2S: modulated.value,
    wavelengthNm: wavelength.value,
  };
  const sign = signFinding(raw, settings);
  const polarity = polarityFinding(raw, settings);
  const needs = new Set<Need>();
  const spectra: ImportedSpectrum[] = [];
  let conversionReason = "";
  let problem: string | null = null;

  raw.forEach((item, index) => {
    const own = settings.spectra?.[String(index)];
    const ofItem =
      own?.technique ?? (settings.technique === undefined ? item.notes.technique?.value : undefined) ?? technique.value;
    const unitText = columns[item.set.first].unit;
    const conversion = conversionOf(ofItem, unitText, conditions);
    if (!conversion) {
      problem = `The unit ${unitText} does not belong to ${techniqueWords[ofItem]}; choose the technique or the unit of the column.`;
      return;
    }
    for (const need of conversion.needs) needs.add(need);
    conversionReason = conversion.reason;
    const values = finish(item, conversion, sign.value === "reversed" ? -1 : 1, polarity.value === "reversed" ? -1 : 1);
    const final = ofItem === "imps" ? "1" : "Ω·cm²";
    if (![...values.re, ...values.im, ...values.frequencyHz].every(Number.isFinite)) {
      problem = "Some numbers are too large to convert; check the units and the decimal sign.";
      return;
    }
    spectra.push({
      label: item.label,
      technique: ofItem,
      bias: own?.bias ?? (settings.bias === undefined ? item.notes.bias?.value : undefined) ?? bias.value,
      fluxPerCm2S:
        own?.fluxPerCm2S ??
        (settings.fluxPerCm2S === undefined ? item.notes.fluxPerCm2S?.value : undefined) ??
        flux.value,
      temperatureK: own?.temperatureK ?? item.notes.temperatureK?.value ?? temperature.value,
      unit: conversion.needs.length > 0 ? (unitText ?? final) : final,
      relative: conversion.relative,
      ...values,
      repeats: countRepeats(values.frequencyHz),
    });
  });

  if (raw.length > 0) {
    const stored = direction === "up" ? "kept" : "will be stored low to high";
    const orders = { up: "low to high frequency", down: "high to low frequency", mixed: "mixed" };
    findings.push({ key: "order", label: "Order", value: orders[direction], reason: stored });
    const repeats = spectra.reduce((sum, spectrum) => sum + spectrum.repeats, 0);
    const counted = spectra.length === 1 ? "one" : `${spectra.length}`;
    findings.push({
      key: "restart",
      label: "Spectra",
      value: repeats > 0 ? `${counted}, ${article(repeats, "repeated point")}` : counted,
      reason: sets.length > 1 ? `${article(sets.length, "group")} of columns; ${restart.reason}` : restart.reason,
    });
    const polar = sets[0].kind === "polar";
    findings.push({
      key: "unit",
      label: polar ? "Modulus" : "Unit",
      value: unit ?? "none written",
      reason: unit === null ? conversionReason : `from the column's heading; ${conversionReason}`,
    });
    if (phase) {
      const degrees = parseUnit(phase.unit)?.scale === "degree";
      findings.push({ key: "phaseUnit", label: "Phase", value: degrees ? "degrees" : "radians", reason: phase.reason });
    }
    const signWords = sign.value === "reversed" ? "turned over" : "as written";
    findings.push({
      key: "imaginarySign",
      label: polar ? "Sign of the phase" : "Sign of Im",
      value: signWords,
      reason: sign.reason,
    });
    findings.push({
      key: "polarity",
      label: "Sign of the whole",
      value: polarity.value === "reversed" ? "turned over" : "as written",
      reason: polarity.reason,
    });
    findings.push({
      key: "technique",
      label: "Technique",
      value: techniqueWords[technique.value],
      reason: technique.reason,
    });
    findings.push({ key: "bias", label: "Operating point", value: biasWords(bias.value), reason: bias.reason });
    findings.push(quantityFinding("fluxPerCm2S", "Flux", flux, "cm⁻² s⁻¹"));
    findings.push(quantityFinding("areaCm2", "Area", area, "cm²"));
    if (needs.has("modulatedFluxPerCm2S") || modulated.value !== null) {
      findings.push(quantityFinding("modulatedFluxPerCm2S", "Modulated flux", modulated, "cm⁻² s⁻¹"));
    }
    if (needs.has("wavelengthNm") || wavelength.value !== null)
      findings.push(quantityFinding("wavelengthNm", "Wavelength", wavelength, "nm"));
    findings.push(quantityFinding("temperatureK", "Temperature", temperature, "K"));
    if (notes.sample)
      findings.push({ key: "sample", label: "Sample", value: notes.sample.value, reason: from(notes.sample) });
    if (technique.assumed) questions.push(`Taken as ${techniqueWords[technique.value]}: ${technique.reason}. Is it?`);
    for (const question of [sign.question, polarity.question]) if (question) questions.push(question);
    if (unit === null && !isExactFormat(columns))
      questions.push("No unit is written beside the numbers. Is the unit below right?");
  }
  if (unusable.length > 0) {
    warnings.push(
      `${article(unusable.length, "row")} with a missing value or a frequency that is not above zero left out: ${lineList(unusable.map((row) => table.lineOfRow[row]))}.`,
    );
  }
  return {
    findings,
    questions,
    warnings,
    problem,
    needs: [...needs],
    spectra,
    resolved: {
      imaginarySign: sign.value,
      polarity: polarity.value,
      restart: restart.value,
      technique: technique.value,
      bias: bias.value,
      fluxPerCm2S: flux.value,
      areaCm2: area.value,
      modulatedFluxPerCm2S: modulated.value,
      wavelengthNm: wavelength.value,
      temperatureK: temperature.value,
    },
  };
}

function electricalUnit(text: string): boolean {
  const unit = parseUnit(text);
  return !!unit && (hasDimensions(unit, [1, 0, 0, 0]) || hasDimensions(unit, [0, 1, 0, 0]));
}

/** Samples over time: a column of time, or counted samples with start and increment in the heading. */
export function describeTrace(
  table: DataTable,
  columns: readonly Column[],
  headings: Headings,
): TraceDescription | null {
  const time = columns.findIndex(({ role }) => role === "time");
  const counted = /^(?:x|sequence|sample|point|index|n|nr|no)$/i.test(columns[0].name);
  const electrical = columns.some(
    ({ name, unit }) => /^(?:ch|math|trace)\b|^ch\s*\d/i.test(name) || (unit !== null && electricalUnit(unit)),
  );
  const steady = columns[0].name === "" && columns.length > 1 && evenSteps(table.values[0]);
  const at = time >= 0 ? time : steady || (counted && electrical) ? 0 : -1;
  if (at < 0 || table.lineOfRow.length < 8) return null;
  const values = table.values[at];
  const rows = values.length;
  const step = (values[rows - 1] - values[0]) / (rows - 1);
  const factor = (columns[at].unit && parseUnit(columns[at].unit ?? "")?.factor) || 1;
  const rebuilt = headings.increment !== null;
  return {
    samples: rows,
    channels: columns
      .filter((column, index) => index !== at && column.role !== "time")
      .map(({ name, index }) => name || `column ${index + 1}`),
    startS: rebuilt ? (headings.start ?? 0) + values[0] * headings.increment! : values[0] * factor,
    intervalS: rebuilt ? headings.increment : step > 0 ? step * factor : null,
  };
}

/** Why a readable table is no spectrum, and what to do. */
export function noSpectrumSentence(
  table: DataTable,
  columns: readonly Column[],
  trace: TraceDescription | null,
): string {
  const size = `${article(table.lineOfRow.length, "row")} of ${article(columns.length, "number")}`;
  if (trace) {
    const every = trace.intervalS === null ? "" : ` every ${Number(trace.intervalS.toPrecision(4))} s`;
    return `This is a trace over time, not a spectrum: ${trace.samples} samples${every} in ${article(trace.channels.length, "channel")} (${trace.channels.slice(0, 6).join(", ")}).`;
  }
  if (!columns.some(({ role }) => role === "frequency")) {
    return `${size} were read, but no column is a frequency. Choose the columns above, if one is.`;
  }
  return `${size} were read, but besides the frequency two columns are needed: Re and Im, or modulus and phase. Choose them above.`;
}

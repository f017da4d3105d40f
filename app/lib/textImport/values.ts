/** Numbers of one sweep in our order: ascending frequency in Hz, Re and Im in the file's unit. */
import type { SpectrumColumns } from "./sweeps";
import type { DataTable } from "./table";
import { parseUnit } from "./units";

export interface RawSpectrum {
  frequencyHz: number[];
  re: number[];
  im: number[];
  sigma: number[] | null;
  timeS: number[] | null;
}

export interface Scales {
  /** Unit texts of the columns; null where nothing says it. */
  frequencyUnit: string | null;
  phaseUnit: string;
  modulusUnit: string | null;
  timeUnit: string | null;
}

function frequencyIn(unitText: string | null): (value: number) => number {
  const unit = unitText === null ? null : parseUnit(unitText);
  if (!unit) return (value) => value;
  return unit.scale === "decade" ? (value) => 10 ** value : (value) => value * unit.factor;
}

/** Re and Im of a row; Im is turned over where its column holds −Im. */
export function readSweep(
  table: DataTable,
  set: SpectrumColumns,
  rows: readonly number[],
  scales: Scales,
): RawSpectrum {
  const toHz = frequencyIn(scales.frequencyUnit);
  const frequency = table.values[set.frequency];
  const order = [...rows].sort((first, second) => frequency[first] - frequency[second]);
  const first = table.values[set.first];
  const second = table.values[set.second];
  const angle = parseUnit(scales.phaseUnit)?.factor ?? 1;
  const decibel = scales.modulusUnit !== null && parseUnit(scales.modulusUnit)?.scale === "decibel";
  const timeFactor = (scales.timeUnit && parseUnit(scales.timeUnit)?.factor) || 1;
  const modulus = (row: number) => (decibel ? 10 ** (first[row] / 20) : first[row]);
  const sign = set.minusImaginary ? -1 : 1;
  const polar = set.kind === "polar";
  const { sigma, time } = set;
  return {
    frequencyHz: order.map((row) => toHz(frequency[row])),
    re: order.map((row) => (polar ? modulus(row) * Math.cos(second[row] * angle) : first[row])),
    im: order.map((row) => (polar ? modulus(row) * Math.sin(second[row] * angle) : sign * second[row])),
    sigma: sigma === null ? null : order.map((row) => Math.abs(table.values[sigma][row])),
    timeS: time === null ? null : order.map((row) => table.values[time][row] * timeFactor),
  };
}

/** How many points share their frequency with one before. */
export function countRepeats(frequencyHz: readonly number[]): number {
  let repeats = 0;
  for (let index = 1; index < frequencyHz.length; index++) if (frequencyHz[index] === frequencyHz[index - 1]) repeats++;
  return repeats;
}

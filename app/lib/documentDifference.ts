/**
 * What differs between two scenario documents, in words and numbers. Compared are the resolved documents, so that a
 * default written out is no difference; layers are matched by name first, so that a moved or added layer does not make
 * every number behind it differ.
 */
import { parametersOf, type Quantity, quantityAt, type ResolvedScenario } from "@demilune/solver";
import { formatNumber, formatQuantity } from "./numberFormat";

export interface Difference {
  /** Words with the place: "thickness (perovskite)". */
  label: string;
  /** As printed; null where that side has nothing there. */
  before: string | null;
  after: string | null;
  /** What the change amounts to: "× 10", "+ 0.05 eV"; null where it is not a number on both sides. */
  change: string | null;
}

/** Layers of `after` by the index of their match in `before`: same name, in order; then the same place. */
function matchLayers(before: ResolvedScenario, after: ResolvedScenario): (number | null)[] {
  const free = new Set(before.stack.layers.keys());
  const take = (index: number | undefined) => {
    if (index === undefined || !free.delete(index)) return null;
    return index;
  };
  const byName = after.stack.layers.map((layer, place) => {
    const candidates = [...free].filter((index) => before.stack.layers[index].name === layer.name);
    return take(candidates.includes(place) ? place : candidates[0]);
  });
  return byName.map((match, place) => match ?? (free.has(place) ? take(place) : null));
}

function changeOf(before: number, after: number, quantity: Quantity): string | null {
  if (quantity.linear || before === 0 || after === 0) {
    const step = after - before;
    return `${step < 0 ? "−" : "+"} ${formatQuantity(Number(Math.abs(step).toPrecision(6)), quantity.unit)}`;
  }
  const ratio = after / before;
  return ratio >= 1
    ? `× ${formatNumber(Number(ratio.toPrecision(4)))}`
    : `÷ ${formatNumber(Number((1 / ratio).toPrecision(4)))}`;
}

const shown = (value: number | null, quantity: Quantity): string =>
  value === null ? (quantity.nullMeans ?? "none") : formatQuantity(value, quantity.unit);

/** Choices that are words, not numbers, by what a person calls them. */
function words(scenario: ResolvedScenario): Map<string, string> {
  const { stack, light, model, spectra, frequencies } = scenario;
  const bias = (value: (typeof spectra)[number]["bias"]) =>
    typeof value === "string"
      ? value === "shortCircuit"
        ? "short circuit"
        : "open circuit"
      : `${formatNumber(value.voltageV)} V`;
  const kind = (value: number | "ohmic") => (value === "ohmic" ? "ohmic" : formatQuantity(value, "eV"));
  const texts = Object.entries(model.overrides).filter(([, value]) => typeof value === "string");
  return new Map([
    ["name", scenario.name],
    ["contact that takes electrons", stack.electronContact],
    ["work function (front contact)", kind(stack.front.workFunctionEV)],
    ["work function (back contact)", kind(stack.back.workFunctionEV)],
    ["side of the light", light.side],
    ["model", model.kind],
    ["layer that gives the model its parameters", stack.layers[model.absorber].name || `layer ${model.absorber + 1}`],
    ...texts.map(([name, value]): [string, string] => [`${name} of the model`, String(value)]),
    [
      "spectra",
      spectra
        .map(
          (one) => `${one.technique === "impedance" ? "impedance" : one.technique.toUpperCase()} at ${bias(one.bias)}`,
        )
        .join("; "),
    ],
    ["frequencies", "listHz" in frequencies ? `${frequencies.listHz.length} listed` : "by decades"],
    [
      "ions",
      stack.ionsFrozenAt
        ? `left at ${bias(stack.ionsFrozenAt.bias)} and ${formatQuantity(stack.ionsFrozenAt.fluxPerCm2S, "cm⁻² s⁻¹")}`
        : "follow the operating point",
    ],
    ...stack.layers.flatMap((layer, index): [string, string][] =>
      layer.traps ? [[`kind of the dynamic traps (${layer.name || `layer ${index + 1}`})`, layer.traps.kind]] : [],
    ),
  ]);
}

/** Numbers that `words` says already. */
const saidInWords = (path: string) =>
  path.endsWith("workFunctionEV") || path === "model.absorber" || path.startsWith("stack.ionsFrozenAt");

interface Row {
  label: string;
  value: number | null;
  quantity: Quantity;
}

/** Numbers by a key that both documents share: layers under the index in `before`, interfaces under their pair. */
function numbersOf(scenario: ResolvedScenario, keyOfLayer: (index: number) => string): Map<string, Row> {
  const rows = new Map<string, Row>();
  for (const { path, label, quantity, value } of parametersOf(scenario)) {
    if (saidInWords(path) || path.startsWith("spectra.")) continue;
    const [part, list, index, ...rest] = path.split(".");
    let key = path;
    let words = label;
    if (part === "stack" && list === "layers") key = `layer ${keyOfLayer(Number(index))} ${rest.join(".")}`;
    if (part === "stack" && list === "interfaces") {
      const { afterLayer } = scenario.stack.interfaces[Number(index)];
      const pair = [afterLayer, afterLayer + 1];
      key = `interface ${pair.map(keyOfLayer).sort().join(" ")} ${rest.join(".")}`;
      const names = pair.map((layer) => scenario.stack.layers[layer].name || `layer ${layer + 1}`);
      words = `${quantityAt(scenario, path).label} (${names.join(" / ")})`;
    }
    rows.set(key, { label: words, value, quantity });
  }
  return rows;
}

/**
 * Every difference between two resolved scenarios: words first, then layers that came, went or moved, then numbers in
 * the order of the document.
 */
export function differencesOf(before: ResolvedScenario, after: ResolvedScenario): Difference[] {
  const differences: Difference[] = [];
  const [wordsBefore, wordsAfter] = [words(before), words(after)];
  for (const label of new Set([...wordsBefore.keys(), ...wordsAfter.keys()])) {
    const [one, other] = [wordsBefore.get(label) ?? null, wordsAfter.get(label) ?? null];
    if (one !== other) differences.push({ label, before: one, after: other, change: null });
  }
  const matches = matchLayers(before, after);
  const name = (scenario: ResolvedScenario, index: number) => scenario.stack.layers[index].name || `layer ${index + 1}`;
  matches.forEach((match, place) => {
    if (match === null)
      differences.push({
        label: "layer",
        before: null,
        after: `${name(after, place)}, place ${place + 1}`,
        change: "added",
      });
    else if (name(before, match) !== name(after, place))
      differences.push({
        label: `name of layer ${place + 1}`,
        before: name(before, match),
        after: name(after, place),
        change: null,
      });
  });
  const kept = matches.filter((match) => match !== null);
  for (const index of before.stack.layers.keys())
    if (!kept.includes(index))
      differences.push({
        label: "layer",
        before: `${name(before, index)}, place ${index + 1}`,
        after: null,
        change: "removed",
      });
  if (kept.some((match, position) => position > 0 && match < kept[position - 1]))
    differences.push({
      label: "order of layers",
      before: before.stack.layers.map((_, index) => name(before, index)).join(", "),
      after: after.stack.layers.map((_, index) => name(after, index)).join(", "),
      change: null,
    });
  const numbersBefore = numbersOf(before, (index) => (kept.includes(index) ? `${index}` : `removed ${index}`));
  const numbersAfter = numbersOf(after, (place) => (matches[place] === null ? `added ${place}` : `${matches[place]}`));
  for (const key of new Set([...numbersBefore.keys(), ...numbersAfter.keys()])) {
    if (/^layer .*\b(added|removed)\b/.test(key)) continue;
    const [one, other] = [numbersBefore.get(key), numbersAfter.get(key)];
    if (one?.value === other?.value) continue;
    const { label, quantity } = (other ?? one)!;
    differences.push({
      label,
      before: one ? shown(one.value, one.quantity) : null,
      after: other ? shown(other.value, other.quantity) : null,
      change:
        typeof one?.value === "number" && typeof other?.value === "number"
          ? changeOf(one.value, other.value, quantity)
          : null,
    });
  }
  return differences;
}

import type { ScenarioDocument, Side } from "@demilune/solver";
import { RichText } from "~/components/ui/RichText";
import { formatNumber, formatQuantity } from "~/lib/numberFormat";
import { drawnHeights, interfaceAfter, layerName } from "~/lib/stackEdits";
import type { Picked } from "./stackProps";

/** What a pickable place of the drawing needs. */
export interface PlaceState {
  "aria-pressed": boolean;
  tabIndex: number;
  onClick: () => void;
}

interface DrawingProps {
  document: ScenarioDocument;
  place: (picked: Picked) => PlaceState;
}

/** Height of all drawn layers together, in px, where they all fit. */
const drawnHeight = 346;
/** Height of a line of text, and the least of a drawn layer. */
const line = 24;
/** Rows beside the drawing hold name and thickness on two lines, unless there are too many. */
const tallRow = 38;
const mostTallRows = 14;
const fills = ["bg-layer-1", "bg-layer-2", "bg-layer-3"];
const pressed =
  "aria-pressed:font-semibold aria-pressed:z-10 aria-pressed:outline-2 aria-pressed:-outline-offset-1 aria-pressed:outline-tide";

const thickness = (nm: number): string =>
  (nm >= 1e4 ? formatQuantity(nm / 1e3, "µm", 4) : formatQuantity(nm, "nm", 4)).replace(/\.0+(?=\D)/, "");

/** Velocities of an interface in one short text. */
function velocities(document: ScenarioDocument, afterLayer: number): string {
  const face = interfaceAfter(document, afterLayer);
  if (!face) return "*S* = 0";
  const { electronVelocityCmPerS: electrons, holeVelocityCmPerS: holes } = face;
  const pair =
    electrons === holes ? formatNumber(electrons, 3) : `${formatNumber(electrons, 2)}, ${formatNumber(holes, 2)}`;
  return `*S* = ${pair.replace(/\.0+(?=\D|$)/, "")} cm/s`;
}

function interfaceLabel(document: ScenarioDocument, afterLayer: number): string {
  const { layers } = document.stack;
  const face = interfaceAfter(document, afterLayer);
  const between = `Interface between ${layerName(layers[afterLayer], afterLayer)} and ${layerName(layers[afterLayer + 1], afterLayer + 1)}`;
  return face
    ? `${between}, recombination velocities ${formatNumber(face.electronVelocityCmPerS)} and ${formatNumber(face.holeVelocityCmPerS)} cm/s`
    : `${between}, no recombination`;
}

function layerLabel(document: ScenarioDocument, index: number): string {
  const layer = document.stack.layers[index];
  return `Layer ${index + 1} of ${document.stack.layers.length}: ${layerName(layer, index)}, ${thickness(layer.thicknessNm)}`;
}

/** Up to five layers: names, thicknesses and velocities stand in the drawing. */
export function PlainStack({ document, place }: DrawingProps) {
  const { layers } = document.stack;
  const heights = drawnHeights(
    layers.map((layer) => layer.thicknessNm),
    drawnHeight,
    layers.map((_, index) => (interfaceAfter(document, index) ? 2 * line : line)),
  );
  return layers.map((layer, index) => {
    const face = interfaceAfter(document, index);
    const twoLines = heights[index] - (face ? line : 0) >= 42;
    return (
      // biome-ignore lint/suspicious/noArrayIndexKey: the place in the stack is what the drawing shows
      <div key={index} className="relative -mt-px first:mt-0" style={{ height: heights[index] + 1 }}>
        <button
          type="button"
          {...place({ kind: "layer", index })}
          aria-label={layerLabel(document, index)}
          title={`${layerName(layer, index)}, ${thickness(layer.thicknessNm)}`}
          className={`absolute inset-0 flex items-start border border-rule px-2 text-left text-small ${fills[index % 3]} ${pressed} ${
            twoLines ? "flex-col pt-1.5" : "justify-between gap-2 pt-0.5"
          }`}
        >
          <span className="max-w-full truncate">{layerName(layer, index)}</span>
          <span className="shrink-0 font-normal text-ink-soft">{thickness(layer.thicknessNm)}</span>
        </button>
        {index < layers.length - 1 && (
          <button
            type="button"
            {...place({ kind: "interface", afterLayer: index })}
            aria-label={interfaceLabel(document, index)}
            className={`absolute right-px bottom-px z-10 h-6 rounded-[2px] px-1.5 text-right text-small text-ink-soft ${pressed} ${
              face ? "" : "opacity-0 hover:opacity-100 focus-visible:opacity-100 aria-pressed:opacity-100"
            } ${heights[index] < 2 * line ? "bg-inherit" : ""}`}
          >
            <RichText text={velocities(document, index)} />
          </button>
        )}
      </div>
    );
  });
}

/** Six layers and more: the drawing keeps to the left, names and velocities stand in a column beside it. */
export function LeaderStack({ document, place, picked }: DrawingProps & { picked: Picked | null }) {
  const { layers } = document.stack;
  const hasRow = (index: number) =>
    index < layers.length - 1 &&
    (interfaceAfter(document, index) !== undefined || (picked?.kind === "interface" && picked.afterLayer === index));
  const rows = layers.flatMap((_, index): Picked[] => [
    { kind: "layer", index },
    ...(hasRow(index) ? [{ kind: "interface" as const, afterLayer: index }] : []),
  ]);
  const heights = drawnHeights(
    layers.map((layer) => layer.thicknessNm),
    Math.max(drawnHeight, rows.length * (rows.length > mostTallRows ? line : tallRow)),
    layers.map(() => line),
  );
  const total = heights.reduce((sum, height) => sum + height, 0);
  const ends = heights.map((_, index) => heights.slice(0, index + 1).reduce((sum, height) => sum + height, 0));
  const rowHeight = total / rows.length;
  const anchor = (row: Picked) =>
    row.kind === "layer"
      ? ends[row.index] - heights[row.index] / 2
      : row.kind === "interface"
        ? ends[row.afterLayer]
        : 0;
  return (
    <div className="grid grid-cols-[24px_16px_minmax(0,1fr)]">
      <div aria-hidden="true">
        {layers.map((_, index) => (
          <div
            // biome-ignore lint/suspicious/noArrayIndexKey: the place in the stack is what the drawing shows
            key={index}
            className={`border-x border-b border-rule ${fills[index % 3]} ${
              picked?.kind === "layer" && picked.index === index ? "outline-2 -outline-offset-1 outline-tide" : ""
            }`}
            style={{ height: heights[index] }}
          />
        ))}
      </div>
      <svg aria-hidden="true" width="16" height={total} className="overflow-visible">
        {rows.map((row, position) => {
          const target = (position + 0.5) * rowHeight;
          return (
            <path
              // biome-ignore lint/suspicious/noArrayIndexKey: rows are places
              key={position}
              d={`M0 ${anchor(row)}H3L12 ${target}H16`}
              className="fill-none stroke-rule"
              strokeDasharray={row.kind === "interface" ? "2 2" : undefined}
            />
          );
        })}
      </svg>
      <div>
        {rows.map((row, position) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: rows are places
          <div key={position} className="flex items-center" style={{ height: rowHeight }}>
            {row.kind === "layer" && (
              <button
                type="button"
                {...place(row)}
                aria-label={layerLabel(document, row.index)}
                title={`${layerName(layers[row.index], row.index)}, ${thickness(layers[row.index].thicknessNm)}`}
                className={`flex w-full justify-between rounded-[2px] px-1 text-left text-small leading-[18px] ${
                  rowHeight < tallRow ? "h-6 items-center gap-1.5" : "h-9 flex-col"
                } ${pressed}`}
              >
                <span className="max-w-full truncate">{layerName(layers[row.index], row.index)}</span>
                <span className="shrink-0 font-normal text-ink-soft">{thickness(layers[row.index].thicknessNm)}</span>
              </button>
            )}
            {row.kind === "interface" && (
              <button
                type="button"
                {...place(row)}
                aria-label={interfaceLabel(document, row.afterLayer)}
                className={`h-6 w-full truncate rounded-[2px] px-1 text-right text-small text-ink-soft ${pressed}`}
              >
                <RichText text={velocities(document, row.afterLayer)} />
              </button>
            )}
          </div>
        ))}
      </div>
    </div>
  );
}

/** The bar of a contact with its name and polarity. */
export function ContactBar({ document, side, state }: { document: ScenarioDocument; side: Side; state: PlaceState }) {
  const takesElectrons = (document.stack.electronContact ?? "front") === side;
  const workFunction = document.stack[side]?.workFunctionEV ?? "ohmic";
  const kind = workFunction === "ohmic" ? "ohmic" : `work function ${formatNumber(workFunction)} eV`;
  const bar = <span aria-hidden="true" className="block h-1.5 w-full bg-ink-soft" />;
  return (
    <button
      type="button"
      {...state}
      aria-label={`${side === "front" ? "Front" : "Back"} contact, ${takesElectrons ? "negative, takes electrons" : "positive, takes holes"}, ${kind}`}
      className={`relative block w-full text-left text-small text-ink-soft ${pressed}`}
    >
      {side === "back" && bar}
      <span className="block h-[22px] truncate pl-0.5 leading-[22px]">
        {side} contact, {takesElectrons ? "−" : "+"}
      </span>
      {side === "front" && bar}
    </button>
  );
}

/** Three arrows on the side where light enters. */
export function LightArrows({ pointing }: { pointing: "down" | "up" }) {
  return (
    <div className="flex h-8 items-center gap-2 text-small text-lamp">
      <svg
        aria-hidden="true"
        width="40"
        height="28"
        viewBox="0 0 40 28"
        className={`fill-none stroke-lamp-fill ${pointing === "up" ? "rotate-180" : ""}`}
      >
        {[6, 20, 34].map((x) => (
          <path key={x} d={`M${x} 2V24M${x - 4} 19L${x} 25L${x + 4} 19`} strokeWidth="2" />
        ))}
      </svg>
      light<span className="sr-only">, from the {pointing === "up" ? "back" : "front"}</span>
    </div>
  );
}

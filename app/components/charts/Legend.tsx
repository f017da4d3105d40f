import { SvgText } from "./SvgText";
import { colourOf, crossesPath, marksPath, type Series } from "./series";

const legendRow = 21;

/** Height that a legend takes inside its plot. */
export function legendHeight(series: readonly Series[]): number {
  const listed = series.filter(({ unlisted }) => !unlisted).length;
  return listed ? listed * legendRow + 16 : 0;
}

function Sample({ series }: { series: Series }) {
  if (series.kind === "measured") {
    return (
      <>
        <path
          d={marksPath([{ x: 13, y: 0, index: 0 }], series.mark ?? "circle")}
          fill="var(--sheet)"
          stroke={colourOf(series)}
        />
        {series.masked && Array.from(series.masked).some(Boolean) && (
          <path d={crossesPath([{ x: 24, y: 0, index: 0 }])} stroke="var(--rule)" fill="none" />
        )}
      </>
    );
  }
  const held = series.kind === "held";
  return (
    <path
      d="M0,0h26"
      fill="none"
      stroke={colourOf(series)}
      strokeWidth={series.width ?? (held ? 1.3 : 2.2)}
      strokeDasharray={series.dash ?? (held ? "5 3" : undefined)}
    />
  );
}

const order = { prediction: 0, measured: 1, held: 2 } as const;

/** The legend, inside the plot, at its upper left or right: predictions, then measurements, then what is held. */
export function Legend({ series, x, y }: { series: readonly Series[]; x: number; y: number }) {
  return series
    .filter(({ unlisted }) => !unlisted)
    .toSorted((one, other) => order[one.kind] - order[other.kind])
    .map((one, row) => (
      <g key={one.id} transform={`translate(${x},${y + row * legendRow})`}>
        <Sample series={one} />
        <SvgText className="fill-ink" x={34} y={4.5} text={one.label} />
      </g>
    ));
}

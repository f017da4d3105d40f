import { Group } from "@visx/group";
import { type ReactNode, useEffect, useId, useRef, useState } from "react";
import { ArcMarks, type ArcsOfSeries, ArcWash } from "./ArcMarks";
import { Axes } from "./Axes";
import { CursorMarks } from "./CursorMarks";
import { Curves } from "./Curves";
import { type Column, labelled, pointInWords, summaryOf } from "./columns";
import { DataTable } from "./DataTable";
import { type Geometry, geometryOf } from "./geometry";
import { Legend } from "./Legend";
import { plotKeyHandler } from "./plotKeys";
import { SvgText } from "./SvgText";
import { type Cursor, nearestIndex, placesOf, type Series } from "./series";
import { Toolbar } from "./Toolbar";
import { ticksOf } from "./ticks";
import { usePlotPointer } from "./usePlotPointer";
import { useWidth } from "./useSize";
import {
  boundsOf,
  type Frame,
  middleOf,
  type ScaleKind,
  stillServes,
  type View,
  withEqualScales,
  zoomed,
} from "./view";

export interface AxisDescription {
  /** Quantity, notation of `richText.ts`. */
  label: string;
  unit: string;
  scale: ScaleKind;
  /** Distance of the ticks where round numbers are not what one wants (45 for a phase). */
  step?: number;
}

export interface PlotFrameProps {
  /** What is plotted of what; names the figure and its files. */
  title: string;
  titleShown?: boolean;
  xAxis: AxisDescription;
  yAxis: AxisDescription;
  series: readonly Series[];
  columns: readonly Column[];
  /** The view that shows everything, for a frame of some size. */
  whole: (frame: Frame) => View;
  equalScales?: boolean;
  monotone?: boolean;
  /** Height of the whole figure, px. */
  height: number;
  /** Width that the server draws with. */
  initialWidth?: number;
  legend?: "left" | "right" | "none";
  /** Below a stack of plots over the same axis only the last one needs its labels. */
  xLabelsHidden?: boolean;
  cursor: Cursor | null;
  onCursor: (cursor: Cursor | null) => void;
  /** While something is dragged lines follow at once instead of gliding. */
  dragging?: boolean;
  /** Further buttons beside zoom, table and files. */
  tools?: ReactNode;
  /** Arcs of one of the series: marks at their peaks, a wash under the lit one. */
  arcs?: ArcsOfSeries;
  /** Beneath the curves: washes, bands. */
  below?: (geometry: Geometry) => ReactNode;
  /** Above the curves: labels. */
  above?: (geometry: Geometry) => ReactNode;
}

const margin = { top: 22, right: 6, bottom: 40, left: 44 } as const;

/** A plot with everything every plot has: axes, legend, cursor, keyboard reading, zoom, table, files, summary. */
export function PlotFrame(props: PlotFrameProps) {
  const { title, xAxis, yAxis, series, columns, height, legend = "left", cursor, onCursor, arcs } = props;
  const [box, width] = useWidth<HTMLDivElement>(props.initialWidth ?? 560);
  const plot = useRef<SVGSVGElement>(null);
  const id = useId();
  const [tableShown, setTableShown] = useState(false);
  const [zoomView, setZoomView] = useState<View | null>(null);

  const bottom = props.xLabelsHidden ? 8 : margin.bottom;
  const frame = {
    width: Math.max(60, width - margin.left - margin.right),
    height: Math.max(40, height - margin.top - bottom),
  };
  const fresh = props.whole(frame);
  const bounds = boundsOf(series, xAxis.scale, yAxis.scale);
  const [kept, setKept] = useState(fresh);
  const serves = bounds !== null && stillServes(kept, bounds, fresh, xAxis.scale, yAxis.scale);
  if (!serves && (kept.x.join() !== fresh.x.join() || kept.y.join() !== fresh.y.join())) setKept(fresh);
  const chosen = zoomView ?? (serves ? kept : fresh);
  const view = props.equalScales ? withEqualScales(chosen, frame) : chosen;
  const geometry = geometryOf(view, frame, xAxis.scale, yAxis.scale);
  const xTicks = ticksOf(view.x, xAxis.scale, frame.width, xAxis.scale === "log" ? 40 : 64, xAxis.step);
  const yTicks = ticksOf(view.y, yAxis.scale, frame.height, Math.min(38, frame.height / 4), yAxis.step);

  // Lines glide where their values changed, never where the axes or the size did.
  const drawn = JSON.stringify([view, frame]);
  const lastDrawn = useRef(drawn);
  const still = lastDrawn.current === drawn;
  useEffect(() => {
    lastDrawn.current = drawn;
  }, [drawn]);

  const read = series.find((one) => one.id === cursor?.seriesId);
  const arched = arcs && series.find(({ id }) => id === arcs.seriesId);
  const readIndex = read && cursor ? nearestIndex(placesOf(read), cursor.at) : -1;

  const zoom = (factor: number | null) => {
    if (factor === null) return setZoomView(null);
    const at = read && readIndex >= 0 ? { x: read.x[readIndex], y: read.y[readIndex] } : null;
    const visible = at && at.x >= view.x[0] && at.x <= view.x[1] && at.y >= view.y[0] && at.y <= view.y[1];
    setZoomView(
      zoomed(view, xAxis.scale, yAxis.scale, visible ? at : middleOf(view, xAxis.scale, yAxis.scale), factor),
    );
  };

  const pointer = usePlotPointer({
    series,
    geometry,
    pick: props.monotone ? "x" : "plane",
    onCursor,
    onZoomTo: setZoomView,
  });
  const onKeyDown = plotKeyHandler({
    series,
    cursor,
    onCursor,
    onZoom: zoom,
    onLeave: () => {
      pointer.cancel();
      onCursor(null);
    },
  });

  const summary = summaryOf(series, columns);
  return (
    <figure ref={box} className="plot relative m-0 min-w-0" style={{ minHeight: height }}>
      <figcaption className={props.titleShown ? "font-semibold" : "sr-only"}>{title}</figcaption>
      <div className="relative">
        <Toolbar
          title={title}
          series={series}
          columns={columns}
          plot={plot}
          tableShown={tableShown}
          onTable={() => setTableShown(!tableShown)}
          zoomedIn={zoomView !== null}
          onZoom={zoom}
        >
          {props.tools}
        </Toolbar>
        {tableShown ? (
          <DataTable
            title={title}
            series={series}
            columns={columns}
            height={height}
            onClose={() => setTableShown(false)}
          />
        ) : (
          <div
            role="slider"
            aria-roledescription="plot"
            aria-label={title}
            aria-valuemin={0}
            aria-valuemax={Math.max(0, (read ?? series[0])?.x.length - 1 || 0)}
            aria-valuenow={Math.max(0, readIndex)}
            aria-valuetext={read && readIndex >= 0 ? pointInWords(read, readIndex, columns) : "no point read"}
            aria-describedby={`${id}-summary`}
            tabIndex={0}
            onKeyDown={onKeyDown}
            className="plot-surface"
          >
            <svg
              ref={plot}
              role="img"
              aria-label={`${title}. ${summary}`}
              viewBox={`0 0 ${width} ${height}`}
              width={width}
              height={height}
            >
              <title>{title}</title>
              <SvgText className="fill-ink" x={6} y={12} text={labelled(yAxis.label, yAxis.unit, yTicks.exponent)} />
              <Group left={margin.left} top={margin.top}>
                <rect className="fill-sheet" width={frame.width} height={frame.height} />
                <clipPath id={`${id}-frame`}>
                  <rect x={-4} y={-4} width={frame.width + 8} height={frame.height + 8} />
                </clipPath>
                <g clipPath={`url(#${id}-frame)`}>
                  {props.below?.(geometry)}
                  {arched && (
                    <ArcWash
                      series={arched}
                      geometry={geometry}
                      arcs={arcs.arcs.filter(({ number }) => number === arcs.lit)}
                    />
                  )}
                  {yAxis.scale === "linear" && view.y[0] < 0 && view.y[1] > 0 && (
                    <path d={`M0,${geometry.y(0)}h${frame.width}`} stroke="var(--rule)" opacity={0.6} />
                  )}
                </g>
                <Axes
                  xScale={geometry.x}
                  yScale={geometry.y}
                  xTicks={props.xLabelsHidden ? { ...xTicks, labels: xTicks.labels.map(() => "") } : xTicks}
                  yTicks={yTicks}
                  height={frame.height}
                />
                <g clipPath={`url(#${id}-frame)`}>
                  <Curves
                    series={series}
                    geometry={geometry}
                    monotone={props.monotone ?? false}
                    glide={still && !props.dragging && !pointer.box}
                  />
                  {props.above?.(geometry)}
                </g>
                {arched && <ArcMarks series={arched} geometry={geometry} arcs={arcs.arcs} stale={arcs.stale} />}
                {legend !== "none" && <Legend series={series} x={legend === "left" ? 18 : frame.width - 150} y={22} />}
                {read && readIndex >= 0 && (
                  <CursorMarks series={read} index={readIndex} geometry={geometry} dropLines={!props.monotone} />
                )}
                {pointer.box && (
                  <rect
                    data-screen-only=""
                    className="fill-wash"
                    stroke="var(--tide)"
                    x={Math.min(pointer.box.from.x, pointer.box.to.x)}
                    y={Math.min(pointer.box.from.y, pointer.box.to.y)}
                    width={Math.abs(pointer.box.to.x - pointer.box.from.x)}
                    height={Math.abs(pointer.box.to.y - pointer.box.from.y)}
                  />
                )}
                <rect
                  data-screen-only=""
                  className="plot-pointer"
                  width={frame.width}
                  height={frame.height}
                  fill="transparent"
                  {...pointer.handlers}
                />
              </Group>
              {!props.xLabelsHidden && (
                <SvgText
                  className="fill-ink"
                  x={width - margin.right}
                  y={height - 4}
                  textAnchor="end"
                  text={labelled(xAxis.label, xAxis.unit, xTicks.exponent)}
                />
              )}
            </svg>
          </div>
        )}
      </div>
      <p id={`${id}-summary`} className="sr-only">
        {summary} Arrow keys move from point to point, page keys by ten, up and down change the curve, plus, minus and 0
        zoom.
      </p>
    </figure>
  );
}

import type { ReactNode, RefObject } from "react";
import { type Column, csvOf } from "./columns";
import { bitmapOf, download, standaloneSvg } from "./exportFigure";
import type { Series } from "./series";

interface ToolbarProps {
  title: string;
  series: readonly Series[];
  columns: readonly Column[];
  plot: RefObject<SVGSVGElement | null>;
  tableShown: boolean;
  onTable: () => void;
  zoomedIn: boolean;
  onZoom: (factor: number | null) => void;
  /** What this plot offers besides. */
  children?: ReactNode;
}

const fileNameOf = (title: string) => title.replace(/[^\p{L}\p{N}]+/gu, "-").replace(/^-|-$/g, "");

/** Zoom, the table and the files of one plot. */
export function Toolbar({
  title,
  series,
  columns,
  plot,
  tableShown,
  onTable,
  zoomedIn,
  onZoom,
  children,
}: ToolbarProps) {
  const name = fileNameOf(title);
  const saveSvg = () => {
    if (plot.current) download(`${name}.svg`, new Blob([standaloneSvg(plot.current)], { type: "image/svg+xml" }));
  };
  const savePng = async () => {
    if (!plot.current) return;
    const { width, height } = plot.current.viewBox.baseVal;
    download(`${name}.png`, await bitmapOf(standaloneSvg(plot.current), width, height, 3));
  };
  return (
    <div className="absolute top-0 right-0 z-10 flex text-small print:hidden">
      {!tableShown && (
        <>
          {children}
          {zoomedIn && (
            <button type="button" className="plot-tool" onClick={() => onZoom(null)}>
              Whole
            </button>
          )}
          <button type="button" className="plot-tool" aria-label={`Zoom in: ${title}`} onClick={() => onZoom(2)}>
            +
          </button>
          <button type="button" className="plot-tool" aria-label={`Zoom out: ${title}`} onClick={() => onZoom(0.5)}>
            −
          </button>
        </>
      )}
      <button type="button" className="plot-tool" aria-pressed={tableShown} onClick={onTable}>
        Table
      </button>
      <button
        type="button"
        className="plot-tool"
        onClick={() =>
          download(`${name}.csv`, new Blob([csvOf(title, series, columns)], { type: "text/csv;charset=utf-8" }))
        }
      >
        CSV
      </button>
      {!tableShown && (
        <>
          <button type="button" className="plot-tool" onClick={saveSvg}>
            SVG
          </button>
          <button type="button" className="plot-tool" onClick={savePng}>
            PNG
          </button>
        </>
      )}
    </div>
  );
}

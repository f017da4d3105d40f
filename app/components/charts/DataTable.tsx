import { RichText } from "~/components/ui/RichText";
import { formatNumber } from "~/lib/numberFormat";
import { type Column, labelled } from "./columns";
import type { Series } from "./series";

const shownRows = 200;

interface DataTableProps {
  title: string;
  series: readonly Series[];
  columns: readonly Column[];
  height: number;
  onClose: () => void;
}

/** The same numbers as the plot, in its place. The file holds what does not fit. */
export function DataTable({ title, series, columns, height, onClose }: DataTableProps) {
  const rows = series.flatMap((one) => Array.from({ length: one.x.length }, (_, index) => ({ one, index })));
  return (
    <section className="overflow-auto" style={{ height }} aria-label={`${title}, table`}>
      <button type="button" className="min-h-6 text-small text-tide" onClick={onClose}>
        Back to the plot
      </button>
      <table className="w-full text-small tabular-nums">
        <caption className="py-1 text-left text-ink-soft">
          {title}
          {rows.length > shownRows && `: first ${shownRows} of ${rows.length} points, all of them in the CSV file`}
        </caption>
        <thead>
          <tr className="text-ink-soft">
            <th scope="col" className="text-left font-normal">
              series
            </th>
            {columns.map(({ label, unit }) => (
              <th key={label} scope="col" className="pl-4 text-right font-normal">
                <RichText text={labelled(label, unit)} />
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.slice(0, shownRows).map(({ one, index }) => (
            <tr key={`${one.id}:${index}`} className="border-line border-t">
              <td>
                <RichText text={one.label} />
                {one.masked?.[index] && " (masked)"}
              </td>
              {columns.map(({ label, value }) => (
                <td key={label} className="pl-4 text-right">
                  <RichText text={formatNumber(value(one, index), 5)} />
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
}

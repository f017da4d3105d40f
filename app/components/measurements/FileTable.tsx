import type { PreviewReading } from "~/lib/textImport/preview";
import { columnRoles } from "~/lib/textImport/settings";
import { roleWords } from "./importChoices";

interface FileTableProps {
  reading: Extract<PreviewReading, { status: "read" }>;
  values: Record<string, string>;
}

/** Columns that get a head of their own; instruments write hundreds. */
const widest = 24;
const textLines = 8;

/** The first lines of the file as they stand, under what each column was taken for. */
export function FileTable({ reading, values }: FileTableProps) {
  const last = reading.columns.at(-1)?.index ?? 0;
  const width = Math.min(last + 1, widest);
  const columns = Array.from({ length: width }, (_, index) => reading.columns.find((column) => column.index === index));
  const texts = reading.preview.filter(({ kind }) => kind === "text");
  const shown = reading.preview.filter(
    (line) => line.kind !== "text" || texts.indexOf(line) >= texts.length - textLines,
  );
  const data = reading.preview.filter(({ kind }) => kind === "data").length;
  const more = reading.rowCount - data;
  return (
    <section aria-labelledby="file-heading">
      <h2 id="file-heading" className="font-semibold">
        The file, as it stands
      </h2>
      {/* biome-ignore lint/a11y/noNoninteractiveTabindex: a region that scrolls must be reachable by keyboard */}
      <section className="mt-1.5 overflow-x-auto bg-sheet" tabIndex={0} aria-label="First lines of the file">
        <table className="w-full border-collapse text-small">
          <thead>
            <tr>
              {columns.map((column, index) => (
                // biome-ignore lint/suspicious/noArrayIndexKey: columns of the file are their numbers
                <th key={index} scope="col" className="min-w-32 px-3 pt-2 pb-1.5 text-right align-top font-normal">
                  <span className="text-ink-soft">column {index + 1}</span>
                  {column ? (
                    <span className="mt-0.5 grid justify-items-end gap-1">
                      <select
                        name={`role-${index}`}
                        defaultValue={values[`role-${index}`] ?? ""}
                        aria-label={`Column ${index + 1} holds`}
                        className="max-w-40 cursor-pointer rounded border border-transparent bg-transparent py-0.5 text-right font-semibold hover:border-rule"
                      >
                        <option value="">{roleWords[column.role]}</option>
                        {columnRoles.map((role) => (
                          <option key={role} value={role}>
                            {roleWords[role]}, chosen
                          </option>
                        ))}
                      </select>
                      <input
                        name={`unit-${index}`}
                        defaultValue={values[`unit-${index}`] ?? ""}
                        placeholder={column.unit ?? "unit"}
                        aria-label={`Unit of column ${index + 1}${column.unit ? `, read as ${column.unit}` : ""}`}
                        autoComplete="off"
                        spellCheck={false}
                        className="w-24 rounded border border-line bg-transparent px-1.5 py-0.5 text-right placeholder:text-ink-soft hover:border-rule"
                      />
                    </span>
                  ) : (
                    <span className="block text-ink-soft">no numbers</span>
                  )}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {shown.map(({ line, kind, cells }) => (
              <tr key={line} className="border-line border-t">
                {kind === "text" ? (
                  <td colSpan={width} className="px-3 py-0.5 text-ink-soft [overflow-wrap:anywhere]">
                    {cells[0]}
                  </td>
                ) : (
                  columns.map((column, index) => (
                    <td
                      // biome-ignore lint/suspicious/noArrayIndexKey: columns of the file are their numbers
                      key={index}
                      className={`px-3 py-0.5 text-right whitespace-nowrap ${
                        kind === "heading" || !column || column.role === "notUsed" ? "text-ink-soft" : ""
                      }`}
                    >
                      {cells[index] ?? ""}
                    </td>
                  ))
                )}
              </tr>
            ))}
            {more > 0 && (
              <tr className="border-line border-t">
                <td colSpan={width} className="px-3 py-0.5 text-ink-soft">
                  {more} more rows, all read
                </td>
              </tr>
            )}
          </tbody>
        </table>
      </section>
      {last >= widest && (
        <p className="mt-1 text-ink-soft text-small">{last + 1 - widest} more columns are not shown.</p>
      )}
    </section>
  );
}

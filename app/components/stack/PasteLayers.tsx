import type { LayerDocument } from "@demilune/solver";
import { useId, useState } from "react";
import { readLayerTable } from "~/lib/layerPaste";

interface PasteLayersProps {
  /** Layers of the stack now: rows named like one of them keep what the table does not give. */
  layers: readonly LayerDocument[];
  onTake: (layers: LayerDocument[], how: "replace" | "append") => void;
}

/** A box for a table from a spreadsheet, with a preview of what was understood before anything changes. */
export function PasteLayers({ layers, onTake }: PasteLayersProps) {
  const id = useId();
  const [text, setText] = useState("");
  const { columns, rows, notes } = readLayerTable(text, layers);
  const read = rows.flatMap(({ layer }) => layer ?? []);
  const wrong = rows.length - read.length;
  function take(how: "replace" | "append") {
    onTake(read, how);
    setText("");
  }
  return (
    <details className="not-printed">
      <summary className="action w-fit">Paste layers from a spreadsheet</summary>
      <div className="mt-2 grid gap-2">
        <label htmlFor={id} className="font-semibold">
          Table of layers
        </label>
        <p className="text-ink-soft text-small">
          One row a layer, or one column a layer; a head row such as “name, thickness (nm), gap (eV)” is understood.
        </p>
        <textarea
          id={id}
          rows={4}
          spellCheck={false}
          value={text}
          onChange={(event) => setText(event.currentTarget.value)}
          className="field max-w-3xl whitespace-pre"
        />
        {notes.map((note) => (
          <p key={note} className="text-ink-soft">
            {note}
          </p>
        ))}
        {rows.length > 0 && (
          // biome-ignore lint/a11y/noNoninteractiveTabindex: a region that scrolls sideways must be reachable by keyboard
          <section aria-label="Preview of the pasted layers" tabIndex={0} className="overflow-x-auto">
            <table className="table w-auto">
              <caption className="sr-only">What was understood of the pasted table</caption>
              <thead>
                <tr>
                  {columns.map((column, index) => (
                    // biome-ignore lint/suspicious/noArrayIndexKey: columns are places
                    <th key={index} scope="col">
                      <span className={column.holds === null ? "line-through" : ""}>{column.head}</span>
                    </th>
                  ))}
                  <th scope="col">row</th>
                </tr>
              </thead>
              <tbody>
                {rows.map((row, place) => (
                  // biome-ignore lint/suspicious/noArrayIndexKey: rows are places
                  <tr key={place}>
                    {row.cells.map((cell, index) => (
                      // biome-ignore lint/suspicious/noArrayIndexKey: cells are places
                      <td key={index} className="max-w-56 tabular-nums">
                        {cell.text || <span className="text-ink-soft">–</span>}
                        {cell.error && (
                          <span className="block text-bad text-small">
                            <span aria-hidden="true">▲ </span>
                            {cell.error}
                          </span>
                        )}
                        {cell.note && <span className="block text-ink-soft text-small">{cell.note}</span>}
                      </td>
                    ))}
                    <td className="max-w-72">
                      {row.layer ? (
                        <span className="text-good">✓ good</span>
                      ) : row.missing ? (
                        <span className="text-bad">▲ missing: {row.missing}</span>
                      ) : (
                        <span className="text-bad">▲ see its cells</span>
                      )}
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </section>
        )}
        {rows.length > 0 && (
          <div className="flex flex-wrap items-center gap-3">
            <button
              type="button"
              disabled={read.length === 0 || wrong > 0}
              onClick={() => take("replace")}
              className="button-quiet disabled:text-ink-soft"
            >
              Replace the stack by {read.length === 1 ? "this layer" : `these ${read.length} layers`}
            </button>
            <button
              type="button"
              disabled={read.length === 0 || wrong > 0}
              onClick={() => take("append")}
              className="button-quiet disabled:text-ink-soft"
            >
              Add behind the stack
            </button>
            <span role="status" className={wrong > 0 ? "text-bad" : "text-ink-soft"}>
              {wrong > 0
                ? `${wrong} of ${rows.length} rows cannot be taken yet.`
                : `${rows.length} of ${rows.length} rows understood.`}
            </span>
          </div>
        )}
      </div>
    </details>
  );
}

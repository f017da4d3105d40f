import { type Quantity, type QuantityName, quantities } from "@demilune/solver";
import { RichText } from "~/components/ui/RichText";
import { fieldAt } from "~/lib/documentNumbers";
import { formatNumber, formatUnit } from "~/lib/numberFormat";
import { symbolNotation } from "~/lib/richText";
import type { PaneContext } from "./pane";

const rowOf = (name: string): Quantity | undefined => quantities[name as QuantityName];

const wordsOf = (name: string) => (name === "variant" ? "current is" : name);

/** The values that a closed form took from the stack or from its overrides. */
export function DerivedNumbers({ spectrum, document }: PaneContext) {
  const derived = spectrum?.status === "solved" ? spectrum.derived : undefined;
  if (!derived) return <p className="text-ink-soft">The model on screen derives no values from the stack.</p>;
  return (
    <table className="table tabular-nums">
      <caption className="sr-only">Values the model uses for the spectrum on screen</caption>
      <thead>
        <tr>
          <th scope="col">value used</th>
          <th scope="col" className="text-right!">
            number
          </th>
          <th scope="col">unit</th>
          <th scope="col">from</th>
        </tr>
      </thead>
      <tbody>
        {Object.entries(derived).map(([name, value]) => {
          const row = rowOf(name);
          const overridden = fieldAt(document, ["model", "overrides", name]) !== undefined;
          return (
            <tr key={name}>
              <td>{row ? <RichText text={`${row.label} ${symbolNotation(row.symbol)}`} /> : wordsOf(name)}</td>
              <td className="text-right">
                <RichText
                  text={typeof value === "number" ? formatNumber(value, 4) : (value ?? row?.nullMeans ?? "none")}
                />
              </td>
              <td className="text-ink-soft">{row && <RichText text={formatUnit(row.unit)} />}</td>
              <td className="text-ink-soft">{overridden ? "typed" : "the stack"}</td>
            </tr>
          );
        })}
      </tbody>
    </table>
  );
}

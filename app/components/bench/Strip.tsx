import { memo } from "react";
import { useMediaQuery } from "~/components/ui/useMediaQuery";
import { panes } from "./panes";
import type { PaneContext } from "./panes/pane";
import { Tabs } from "./Tabs";
import { useAddressChoice } from "./useAddressChoice";

/** The strip under the spectra: as many neighbouring panes as fit stand side by side, two from 1280 px, one below. */
function AllPanes(context: PaneContext) {
  const offered = panes.filter(({ available }) => available?.(context) ?? true);
  const [wanted, choose] = useAddressChoice("pane", offered[0].id);
  const chosen = Math.max(
    0,
    offered.findIndex(({ id }) => id === wanted),
  );
  const wide = useMediaQuery("(min-width: 80rem)");
  const beside = chosen + 1 < offered.length ? chosen + 1 : chosen - 1;
  const shown = (wide ? [chosen, beside] : [chosen]).filter((index) => index >= 0).sort((one, other) => one - other);
  return (
    <section aria-label="Details" className="mt-6">
      <div className="border-line border-b">
        <Tabs
          name="details"
          tabs={offered.map(({ id, label, addition }) => ({ id, label, addition: addition?.(context) }))}
          chosen={offered[chosen].id}
          beside={offered[beside]?.id}
          onChoose={choose}
        />
      </div>
      <div className="grid gap-8 pt-3 xl:grid-cols-2">
        {shown.map((index) => {
          const { id, Content } = offered[index];
          return (
            <div
              key={id}
              id={`details-pane-${id}`}
              role="tabpanel"
              aria-labelledby={`details-tab-${id}`}
              className="min-w-0"
            >
              <Content {...context} />
            </div>
          );
        })}
      </div>
    </section>
  );
}

/** Drawn anew only once a drag has ended and the spectra are there: until then its panes wait anyway. */
export const Strip = memo(AllPanes, (_, { waiting }) => waiting);

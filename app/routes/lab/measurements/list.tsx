import { Form, href, Link } from "react-router";
import { Moment } from "~/components/ui/moment";
import { RichText } from "~/components/ui/RichText";
import { ariaSort, SortLink } from "~/components/ui/SortLink";
import { formatNumber } from "~/lib/numberFormat";
import { biasWords, techniqueNames } from "~/lib/spectrumNames";
import { countMeasurements, listMeasurements } from "~/models/measurements.server";
import { canActAs, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/list";
import { listSchema } from "./list.schema";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const state = listSchema.parse(Object.fromEntries(new URL(args.request.url).searchParams));
  const descending = state.order ? state.order === "down" : state.sort === "updated";
  const archived = state.archive === "1";
  const [found, counts] = await Promise.all([
    listMeasurements(lab.id, { ...state, filter: state.q, descending, archived }),
    countMeasurements(lab.id),
  ]);
  return {
    ...found,
    counts,
    state: { ...state, descending, archived },
    mayWrite: canActAs(role, "researcher"),
    measurements: found.measurements.map(
      ({ id, name, sampleName, technique, bias, fluxPerCm2S, pointCount, invented, updatedAt }) => ({
        id,
        name,
        sampleName,
        technique,
        bias,
        fluxPerCm2S,
        pointCount,
        invented,
        updatedAt,
      }),
    ),
  };
}

export const meta: Route.MetaFunction = () => [{ title: "Measurements · Demilune" }];

export default function Measurements({ loaderData, params: { labId } }: Route.ComponentProps) {
  const { measurements, counts, state, total, pages, mayWrite } = loaderData;
  const to = (changes: Record<string, string | undefined>) => {
    const search = new URLSearchParams();
    const next = { q: state.q, technique: state.technique, sort: state.sort, order: state.order, ...changes };
    if (state.archived && !("archive" in changes)) search.set("archive", "1");
    for (const [name, value] of Object.entries(next)) if (value) search.set(name, value);
    return `?${search}`;
  };
  return (
    <>
      <div className="flex flex-wrap items-baseline gap-x-5 gap-y-2">
        <h1 className="font-semibold text-title">{state.archived ? "Measurements in the archive" : "Measurements"}</h1>
        <div className="ml-auto flex flex-wrap items-center gap-5">
          <Link to={href("/lab/:labId/samples", { labId })} className="action py-0.5">
            Samples
          </Link>
          {(counts.archived > 0 || state.archived) && (
            <Link to={state.archived ? "?" : "?archive=1"} className="action py-0.5">
              {state.archived ? "Back to the kept ones" : `Archive (${counts.archived})`}
            </Link>
          )}
          {mayWrite && (
            <Link to={href("/lab/:labId/measurements/import", { labId })} className="button">
              Import a measurement
            </Link>
          )}
        </div>
      </div>
      {counts.kept === 0 && !state.archived ? (
        <FirstUse labId={labId} mayWrite={mayWrite} />
      ) : (
        <>
          <Form method="get" role="search" className="mt-3 flex flex-wrap items-end gap-3">
            {state.archived && <input type="hidden" name="archive" value="1" />}
            <input type="hidden" name="sort" value={state.sort} />
            {state.order && <input type="hidden" name="order" value={state.order} />}
            <div>
              <label htmlFor="q" className="block text-ink-soft text-small">
                Name, sample or group
              </label>
              <input key={state.q} id="q" name="q" type="search" defaultValue={state.q} className="field w-64" />
            </div>
            <div>
              <label htmlFor="technique" className="block text-ink-soft text-small">
                Technique
              </label>
              <select
                key={state.technique ?? "all"}
                id="technique"
                name="technique"
                defaultValue={state.technique ?? ""}
                className="field"
              >
                <option value="">all</option>
                {Object.entries(techniqueNames).map(([value, name]) => (
                  <option key={value} value={value}>
                    {name}
                  </option>
                ))}
              </select>
            </div>
            <button type="submit" className="button-quiet">
              Filter
            </button>
          </Form>
          {measurements.length === 0 ? (
            <p className="mt-6">
              Nothing fits this filter.{" "}
              <Link to="?" className="link">
                Show all
              </Link>
            </p>
          ) : (
            <div className="mt-3 overflow-x-auto">
              <table className="table">
                <thead>
                  <tr>
                    <th scope="col" aria-sort={ariaSort("name", state)}>
                      <SortLink name="name" label="Name" present={state} />
                    </th>
                    <th scope="col" aria-sort={ariaSort("technique", state)}>
                      <SortLink name="technique" label="Technique" present={state} />
                    </th>
                    <th scope="col" aria-sort={ariaSort("sample", state)}>
                      <SortLink name="sample" label="Sample" present={state} />
                    </th>
                    <th scope="col">Operating point</th>
                    <th scope="col" className="!text-right">
                      <RichText text="Flux *Φ* / cm⁻² s⁻¹" />
                    </th>
                    <th scope="col" className="!text-right">
                      Points
                    </th>
                    <th scope="col" aria-sort={ariaSort("updated", state)}>
                      <SortLink name="updated" label="Changed" present={state} first="down" />
                    </th>
                  </tr>
                </thead>
                <tbody>
                  {measurements.map((measurement) => (
                    <tr key={measurement.id}>
                      <td className="font-semibold">
                        <Link
                          to={href("/lab/:labId/measurements/:measurementId", { labId, measurementId: measurement.id })}
                          className="link"
                        >
                          {measurement.name}
                        </Link>
                        {measurement.invented && <span className="font-normal text-ink-soft"> (invented data)</span>}
                      </td>
                      <td>{techniqueNames[measurement.technique]}</td>
                      <td>{measurement.sampleName ?? "–"}</td>
                      <td className="whitespace-nowrap">{biasWords(measurement.bias)}</td>
                      <td className="!text-right whitespace-nowrap">
                        {measurement.fluxPerCm2S === null ? "–" : formatNumber(measurement.fluxPerCm2S)}
                      </td>
                      <td className="!text-right">{measurement.pointCount}</td>
                      <td className="whitespace-nowrap">
                        <Moment at={measurement.updatedAt} />
                      </td>
                    </tr>
                  ))}
                </tbody>
              </table>
              <p className="mt-2 flex flex-wrap gap-5 text-ink-soft">
                {total === 1 ? "one measurement" : `${total} measurements`}
                {pages > 1 && `, page ${state.page} of ${pages}`}
                {state.page > 1 && (
                  <Link to={to({ page: String(state.page - 1) })} className="link">
                    Previous page
                  </Link>
                )}
                {state.page < pages && (
                  <Link to={to({ page: String(state.page + 1) })} className="link">
                    Next page
                  </Link>
                )}
              </p>
            </div>
          )}
        </>
      )}
    </>
  );
}

function FirstUse({ labId, mayWrite }: { labId: string; mayWrite: boolean }) {
  return (
    <div className="mt-4 max-w-2xl">
      <p>
        No measurement yet. An imported spectrum keeps its raw file, can be laid over any scenario of this lab, and
        shows its residuals there.
      </p>
      <p className="mt-3 text-ink-soft">A file that can be read at once looks like this:</p>
      <pre className="mt-1 overflow-x-auto bg-sheet px-3 py-2 font-mono text-small">
        {
          "# technique: imps\n# bias: shortCircuit\n# fluxPerCm2S: 1e16\nfrequencyHz,re,im\n0.1,0.812,-0.0004\n1,0.811,-0.0041\n…"
        }
      </pre>
      {mayWrite && (
        <p className="mt-3">
          <Link to={href("/lab/:labId/measurements/import", { labId })} className="link">
            Import a file or paste columns
          </Link>
        </p>
      )}
    </div>
  );
}

import type { Technique } from "@demilune/solver";
import { href, Link, useFetcher, useLocation } from "react-router";
import { NumberGroup } from "~/components/stack/NumberGroup";
import { techniqueNames } from "~/lib/spectrumNames";

interface OverlayPanelProps {
  labId: string;
  scenarioId: string;
  attached: readonly { id: string; name: string; technique: Technique; invented: boolean }[];
  /** Measurements of the lab that may be laid over this scenario. */
  attachable: readonly { id: string; name: string; technique: Technique }[];
  readOnly: boolean;
}

/** Which measurements lie over the prediction; plain forms before scripts load. */
export function OverlayPanel({ labId, scenarioId, attached, attachable, readOnly }: OverlayPanelProps) {
  const fetcher = useFetcher();
  const { pathname, search } = useLocation();
  const action = href("/lab/:labId/scenarios/:scenarioId/overlays", { labId, scenarioId });
  const others = attachable.filter(({ id }) => attached.every((one) => one.id !== id));
  const importLink = (
    <Link to={href("/lab/:labId/measurements/import", { labId })} className="link inline-block min-h-6">
      Import one
    </Link>
  );
  return (
    <NumberGroup title="Measurements laid over">
      <ul>
        {attached.map(({ id, name, technique, invented }) => (
          <li key={id} className="flex min-h-6 items-center gap-2 border-line border-b">
            <Link
              to={href("/lab/:labId/measurements/:measurementId", { labId, measurementId: id })}
              className="min-h-6 min-w-0 grow truncate py-0.5 text-tide hover:underline"
              title={invented ? `${name} (invented data)` : name}
            >
              {name}
            </Link>
            <span className="shrink-0 text-ink-soft text-small">{techniqueNames[technique]}</span>
            {!readOnly && (
              <fetcher.Form method="post" action={action} preventScrollReset>
                <input type="hidden" name="to" value={pathname + search} />
                <input type="hidden" name="measurementId" value={id} />
                <button
                  type="submit"
                  name="intent"
                  value="detach"
                  className="action text-small"
                  aria-label={`Take ${name} off`}
                >
                  off
                </button>
              </fetcher.Form>
            )}
          </li>
        ))}
      </ul>
      {attached.length === 0 && <p className="py-1 text-ink-soft text-small">None yet.</p>}
      {!readOnly && others.length > 0 && (
        <fetcher.Form method="post" action={action} preventScrollReset className="mt-1 flex items-center gap-2">
          <input type="hidden" name="to" value={pathname + search} />
          <select
            name="measurementId"
            aria-label="Measurement to lay over the prediction"
            className="h-7 min-w-0 grow rounded border border-rule bg-sheet px-1.5"
          >
            {others.map(({ id, name, technique }) => (
              <option key={id} value={id}>
                {name} ({techniqueNames[technique]})
              </option>
            ))}
          </select>
          <button type="submit" name="intent" value="attach" className="action">
            Lay over
          </button>
        </fetcher.Form>
      )}
      {!readOnly && others.length === 0 && <p className="text-small">{importLink}</p>}
    </NumberGroup>
  );
}

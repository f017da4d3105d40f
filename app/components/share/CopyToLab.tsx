import type { ScenarioDocument } from "@demilune/solver";
import { useEffect } from "react";
import { href, Link, useFetcher } from "react-router";
import type { ChangeDocument } from "~/components/stack/stackProps";

interface CopyToLabProps {
  shareId: string;
  /** As the guest left it. */
  document: ScenarioDocument;
  signedIn: boolean;
  /** Labs of the guest in which they may make a scenario. */
  labs: readonly { id: string; name: string }[];
  /** Called with the document that was on the page before signing in. */
  onReturn: ChangeDocument;
}

/** Takes the scenario along, changes included. Before signing in they wait in this tab of the browser alone. */
export function CopyToLab({ shareId, document, signedIn, labs, onReturn }: CopyToLabProps) {
  const fetcher = useFetcher<{ error?: string }>();
  const key = `share-${shareId}`;
  useEffect(() => {
    const kept = sessionStorage.getItem(key);
    if (!kept) return;
    sessionStorage.removeItem(key);
    onReturn(JSON.parse(kept) as ScenarioDocument, { path: "before signing in", live: false });
  }, [key, onReturn]);
  if (!signedIn) {
    return (
      <Link
        to={`/sign-in?to=${encodeURIComponent(href("/shared/:shareId", { shareId }))}`}
        className="action py-0.5"
        title="After signing in"
        onClick={() => sessionStorage.setItem(key, JSON.stringify(document))}
      >
        Copy to my lab
      </Link>
    );
  }
  return (
    <fetcher.Form method="post" action={href("/shared/:shareId/copy", { shareId })} className="flex items-center gap-2">
      <input type="hidden" name="document" value={JSON.stringify(document)} />
      {labs.length > 1 ? (
        <select name="labId" aria-label="Lab to copy it to" className="h-7 rounded border border-rule bg-sheet px-1.5">
          {labs.map(({ id, name }) => (
            <option key={id} value={id}>
              {name}
            </option>
          ))}
        </select>
      ) : (
        <input type="hidden" name="labId" value={labs[0]?.id ?? ""} />
      )}
      <button type="submit" className="action">
        Copy to my lab
      </button>
      {fetcher.data?.error && (
        <span role="alert" className="text-bad">
          {fetcher.data.error}
        </span>
      )}
    </fetcher.Form>
  );
}

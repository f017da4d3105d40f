import { Form, href, Link } from "react-router";
import { layersOf } from "~/lib/scenarioWords";
import { starters, startersNote } from "~/lib/starters";

/** What a lab without scenarios sees: the next step, with an example that works. */
export function FirstScenario({ labId, canEdit }: { labId: string; canEdit: boolean }) {
  const [example] = starters;
  return (
    <section className="mt-6 max-w-2xl">
      <p>
        A scenario is a layer stack with its light, its circuit, a model and the spectra asked for. It is kept in
        numbered revisions, and every prediction, sweep and fit starts from one.
      </p>
      {canEdit ? (
        <>
          <h2 className="mt-4 font-semibold">Begin with an example</h2>
          <p className="mt-1">
            {example.document.name}: {layersOf(example.document)}. {example.shows}
          </p>
          <Form method="post" className="mt-3 flex flex-wrap gap-3">
            <input type="hidden" name="starter" value={example.key} />
            <button type="submit" name="intent" value="start" className="button">
              Open the example
            </button>
            <Link to={href("/lab/:labId/scenarios/new", { labId })} className="button-quiet">
              Another starter, a blank stack or a document
            </Link>
          </Form>
          <p className="mt-3 text-ink-soft text-small">{startersNote}</p>
        </>
      ) : (
        <p className="mt-2 text-ink-soft">There is none yet. Researchers and owners of this lab can make one.</p>
      )}
    </section>
  );
}

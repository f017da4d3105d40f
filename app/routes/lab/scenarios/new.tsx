import type { Fault } from "@demilune/solver";
import { data, Form, href, Link, redirect } from "react-router";
import { FaultList } from "~/components/scenarios/FaultList";
import { Field } from "~/components/ui/field";
import { readDocumentText } from "~/lib/documentText";
import { layersOf, modelOf, scenarioPath } from "~/lib/scenarioWords";
import { newScenario } from "~/lib/stackEdits";
import { starterNamed, starters, startersNote } from "~/lib/starters";
import { createScenario } from "~/models/scenarios.server";
import { notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/new";
import { newAction } from "./new.schema";

export async function loader(args: Route.LoaderArgs) {
  await requireLab(args, "researcher");
  return null;
}

interface Refused {
  intent: string | null;
  name?: string;
  nameError?: string;
  text?: string;
  faults?: readonly Fault[];
}

const refused = (answer: Refused) => data(answer, { status: 400 });

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const actor = { labId: lab.id, userId: user.id };
  const form = Object.fromEntries(await args.request.formData());
  const parsed = newAction.safeParse(form);
  if (!parsed.success) {
    if (form.intent !== "blank") return refused({ intent: null });
    return refused({ intent: "blank", name: String(form.name ?? ""), nameError: parsed.error.issues[0]?.message });
  }
  const open = (id: string) => redirect(scenarioPath(lab.id, id), 303);
  switch (parsed.data.intent) {
    case "start": {
      const starter = starterNamed(parsed.data.starter);
      if (!starter) throw notFound();
      return open(await createScenario(actor, starter.document, { note: "Starter stack: typical values" }));
    }
    case "blank":
      return open(await createScenario(actor, newScenario(parsed.data.name), { note: "Blank stack: typical values" }));
    case "document": {
      const uploaded = parsed.data.file && parsed.data.file.size > 0 ? await parsed.data.file.text() : null;
      const text = uploaded ?? parsed.data.text;
      const reading = readDocumentText(text);
      if (!reading.ok) return refused({ intent: "document", text, faults: reading.faults });
      return open(await createScenario(actor, reading.document, { note: "From a document" }));
    }
  }
}

export const meta: Route.MetaFunction = () => [{ title: "New scenario · Demilune" }];

export default function NewScenario({ actionData, params: { labId } }: Route.ComponentProps) {
  return (
    <div className="max-w-3xl">
      <h1 className="font-semibold text-title">New scenario</h1>
      {actionData?.faults && (
        <div className="mt-3">
          <FaultList faults={actionData.faults} title="The document was not taken; its text is kept below" />
        </div>
      )}

      <h2 className="mt-5 font-semibold text-large">From a starter stack</h2>
      <p className="text-ink-soft text-small">{startersNote}</p>
      <Form method="post" className="mt-2">
        <input type="hidden" name="intent" value="start" />
        <ul>
          {starters.map(({ key, document, shows }) => (
            <li
              key={key}
              className="flex flex-wrap items-start justify-between gap-x-4 gap-y-1 border-line border-t py-2"
            >
              <div className="min-w-0 flex-1 basis-72">
                <h3 className="font-semibold">{document.name}</h3>
                <p>{shows}</p>
                <p className="text-ink-soft text-small">
                  {layersOf(document)}; {modelOf(document)}
                </p>
              </div>
              <button
                type="submit"
                name="starter"
                value={key}
                className="button-quiet"
                aria-label={`Begin with ${document.name}`}
              >
                Begin
              </button>
            </li>
          ))}
        </ul>
      </Form>

      <h2 className="mt-6 font-semibold text-large">From a blank stack</h2>
      <p className="text-ink-soft text-small">
        One absorbing layer between ohmic contacts; all values are typical values without source.
      </p>
      <Form method="post" className="mt-2 flex flex-wrap items-end gap-3">
        <input type="hidden" name="intent" value="blank" />
        <div className="min-w-64 flex-1">
          <Field
            name="name"
            label="Name"
            type="text"
            maxLength={200}
            required
            defaultValue={actionData?.name}
            error={actionData?.nameError}
          />
        </div>
        <button type="submit" className="button-quiet">
          Begin blank
        </button>
      </Form>

      <h2 className="mt-6 font-semibold text-large">From a scenario document</h2>
      <Form method="post" encType="multipart/form-data" className="mt-2 grid gap-3">
        <input type="hidden" name="intent" value="document" />
        <label className="grid gap-1 font-semibold">
          File
          <input type="file" name="file" accept=".json,application/json" className="field font-normal" />
        </label>
        <label className="grid gap-1 font-semibold">
          Or the document itself
          <textarea
            name="text"
            rows={8}
            spellCheck={false}
            key={actionData?.text}
            defaultValue={actionData?.text}
            aria-invalid={actionData?.faults !== undefined}
            placeholder='{ "format": "demilune.scenario/1", … }'
            className="field font-normal"
          />
        </label>
        <div className="flex gap-4">
          <button type="submit" className="button-quiet">
            Take the document
          </button>
          <Link to={href("/lab/:labId/scenarios", { labId })} className="action self-center">
            Back to the list
          </Link>
        </div>
      </Form>
    </div>
  );
}

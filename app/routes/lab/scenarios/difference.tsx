import { parseScenario } from "@demilune/solver";
import { Form, Link } from "react-router";
import { RichText } from "~/components/ui/RichText";
import { ScrollRegion } from "~/components/ui/scrollRegion";
import { differencesOf } from "~/lib/documentDifference";
import { scenarioPath } from "~/lib/scenarioWords";
import { findRevision, findScenario, listRevisions } from "~/models/scenarios.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/difference";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const { scenarioId } = args.params;
  const search = new URL(args.request.url).searchParams;
  const [scenario, all] = await Promise.all([findScenario(lab.id, scenarioId), listRevisions(lab.id, scenarioId)]);
  if (!scenario) throw notFound();
  const latest = all[0].number;
  const to = Number(search.get("to") ?? latest);
  const from = Number(search.get("from") ?? Math.max(1, to - 1));
  const [before, after] = await Promise.all(
    [from, to].map((number) => (Number.isInteger(number) ? findRevision(lab.id, scenarioId, number) : undefined)),
  );
  if (!before || !after) throw notFound();
  const side = ({ number, note, authorName }: typeof before) => ({ number, note, authorName });
  return {
    name: scenario.name,
    numbers: all.map(({ number }) => number),
    latest,
    before: side(before),
    after: side(after),
    differences: differencesOf(parseScenario(before.document), parseScenario(after.document)),
    canEdit: canActAs(role, "researcher"),
  };
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  {
    title: loaderData
      ? `Revision ${loaderData.before.number} against ${loaderData.after.number} of ${loaderData.name} · Demilune`
      : "Difference · Demilune",
  },
];

export default function DifferencePage({ loaderData, params: { labId, scenarioId } }: Route.ComponentProps) {
  const { name, before, after, differences, numbers, latest, canEdit } = loaderData;
  const path = scenarioPath(labId, scenarioId);
  return (
    <div className="max-w-4xl">
      <div className="flex flex-wrap items-baseline gap-x-4">
        <h1 className="font-semibold text-title">{name}</h1>
        <span className="text-ink-soft">
          revision {before.number} against {after.number}
        </span>
        <Link to={`${path}/revisions`} className="action ml-auto">
          Revisions
        </Link>
      </div>
      <Form method="get" className="not-printed mt-3 flex flex-wrap items-end gap-3">
        <NumberChoice name="from" label="From revision" value={before.number} numbers={numbers} />
        <NumberChoice name="to" label="to revision" value={after.number} numbers={numbers} />
        <button type="submit" className="button-quiet">
          Compare
        </button>
      </Form>
      <p className="mt-4">
        {differences.length === 0
          ? "The two revisions hold the same scenario."
          : differences.length === 1
            ? "One thing differs."
            : `${differences.length} things differ.`}
      </p>
      {differences.length > 0 && (
        <ScrollRegion label="Differences" className="mt-2">
          <table className="table">
            <caption className="sr-only">What differs, side by side</caption>
            <thead>
              <tr>
                <th scope="col">what</th>
                <RevisionHead side={before} path={path} />
                <RevisionHead side={after} path={path} />
                <th scope="col">change</th>
              </tr>
            </thead>
            <tbody>
              {differences.map((difference) => (
                <tr key={`${difference.label} ${difference.before} ${difference.after}`}>
                  <th scope="row" className="max-w-72 border-line border-t py-1.5! align-top! text-base! text-ink!">
                    {difference.label}
                  </th>
                  <Value text={difference.before} />
                  <Value text={difference.after} />
                  <td className="whitespace-nowrap">{difference.change && <RichText text={difference.change} />}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollRegion>
      )}
      {canEdit && before.number !== latest && (
        <Form method="post" action={`${path}/revisions`} className="mt-4">
          <input type="hidden" name="number" value={before.number} />
          <button type="submit" name="intent" value="restore" className="button">
            Restore revision {before.number}
          </button>
        </Form>
      )}
    </div>
  );
}

function Value({ text }: { text: string | null }) {
  return (
    <td className="max-w-72 tabular-nums">
      {text === null ? <span className="text-ink-soft">–</span> : <RichText text={text} />}
    </td>
  );
}

interface RevisionHeadProps {
  side: { number: number; note: string; authorName: string | null };
  path: string;
}

function RevisionHead({ side, path }: RevisionHeadProps) {
  return (
    <th scope="col">
      <Link to={`${path}/revisions/${side.number}`} className="link font-semibold">
        revision {side.number}
      </Link>
      <span className="block">{side.authorName ?? "Demilune"}</span>
      {side.note && <span className="block max-w-56">{side.note}</span>}
    </th>
  );
}

interface NumberChoiceProps {
  name: string;
  label: string;
  value: number;
  numbers: readonly number[];
}

function NumberChoice({ name, label, value, numbers }: NumberChoiceProps) {
  return (
    <label className="grid gap-1 text-ink-soft text-small">
      {label}
      <select name={name} key={value} defaultValue={value} className="field text-base text-ink">
        {numbers.map((number) => (
          <option key={number} value={number}>
            {number}
          </option>
        ))}
      </select>
    </label>
  );
}

import { Form, href, Link, redirect, useSearchParams } from "react-router";
import { FirstScenario } from "~/components/scenarios/FirstScenario";
import { Moment } from "~/components/ui/moment";
import { ScrollRegion } from "~/components/ui/scrollRegion";
import { SortHeader } from "~/components/ui/sortHeader";
import { layersOf, modelOf, scenarioPath } from "~/lib/scenarioWords";
import { starterNamed } from "~/lib/starters";
import {
  countScenarios,
  createScenario,
  duplicateScenario,
  findScenario,
  listScenarios,
  scenariosPerPage,
  setArchived,
} from "~/models/scenarios.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/list";
import { listAction, listState } from "./list.schema";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const search = new URL(args.request.url).searchParams;
  const state = listState.parse(Object.fromEntries(search));
  const descending = state.order === undefined ? state.sort !== "name" : state.order === "down";
  const archivedId = search.get("archived");
  const [{ scenarios, total }, counts, archived] = await Promise.all([
    listScenarios(lab.id, {
      archived: state.show === "archived",
      filter: state.q,
      sort: state.sort,
      descending,
      page: state.page,
    }),
    countScenarios(lab.id),
    archivedId ? findScenario(lab.id, archivedId) : undefined,
  ]);
  return {
    ...state,
    descending,
    counts,
    total,
    pages: Math.max(1, Math.ceil(total / scenariosPerPage)),
    canEdit: canActAs(role, "researcher"),
    justArchived: archived?.archivedAt ? { id: archived.id, name: archived.name } : null,
    rows: scenarios.map(({ id, name, updatedAt, revision }) => ({
      id,
      name,
      updatedAt,
      number: revision.number,
      note: revision.note,
      authorName: revision.authorName,
      layers: layersOf(revision.document),
      model: modelOf(revision.document),
    })),
  };
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const actor = { labId: lab.id, userId: user.id };
  const parsed = listAction.safeParse(Object.fromEntries(await args.request.formData()));
  if (!parsed.success) throw new Response("This form is not known here.", { status: 400 });
  const list = href("/lab/:labId/scenarios", { labId: lab.id });
  switch (parsed.data.intent) {
    case "archive":
      if (!(await setArchived(actor, parsed.data.scenarioId, true))) throw notFound();
      return redirect(`${list}?archived=${parsed.data.scenarioId}`, 303);
    case "bringBack":
      if (!(await setArchived(actor, parsed.data.scenarioId, false))) throw notFound();
      return redirect(list, 303);
    case "duplicate": {
      const copy = await duplicateScenario(actor, parsed.data.scenarioId);
      if (!copy) throw notFound();
      return redirect(scenarioPath(lab.id, copy), 303);
    }
    case "start": {
      const starter = starterNamed(parsed.data.starter);
      if (!starter) throw notFound();
      const id = await createScenario(actor, starter.document, { note: "Starter stack: typical values" });
      return redirect(scenarioPath(lab.id, id), 303);
    }
  }
}

export const meta: Route.MetaFunction = () => [{ title: "Scenarios · Demilune" }];

export default function Scenarios({ loaderData, params: { labId } }: Route.ComponentProps) {
  const { rows, counts, canEdit, justArchived, show, q, sort, descending, total, pages, page } = loaderData;
  const none = counts.kept + counts.archived === 0;
  return (
    <>
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2">
        <h1 className="font-semibold text-title">Scenarios</h1>
        {canEdit && !none && (
          <Link to={href("/lab/:labId/scenarios/new", { labId })} className="button ml-auto">
            New scenario
          </Link>
        )}
      </div>
      {justArchived && (
        <Form
          method="post"
          role="status"
          className="mt-2 flex flex-wrap items-center gap-3 border-tide border-l-2 pl-3"
        >
          <input type="hidden" name="scenarioId" value={justArchived.id} />
          {justArchived.name} is in the archive now.
          {canEdit && (
            <button type="submit" name="intent" value="bringBack" className="action font-semibold">
              Undo
            </button>
          )}
        </Form>
      )}
      {none ? (
        <FirstScenario labId={labId} canEdit={canEdit} />
      ) : (
        <>
          <Form method="get" role="search" className="mt-3 flex flex-wrap items-end gap-x-4 gap-y-2">
            <input type="hidden" name="sort" value={sort} />
            <input type="hidden" name="order" value={descending ? "down" : "up"} />
            <input type="hidden" name="show" value={show} />
            <label className="grid w-64 gap-1 text-small text-ink-soft">
              Name contains
              <input type="search" name="q" key={q} defaultValue={q} className="field text-base text-ink" />
            </label>
            <button type="submit" className="button-quiet">
              Filter
            </button>
            <nav aria-label="Which scenarios" className="flex min-h-8 items-center gap-4">
              <ShowLink show="kept" now={show} count={counts.kept}>
                In use
              </ShowLink>
              <ShowLink show="archived" now={show} count={counts.archived}>
                Archive
              </ShowLink>
            </nav>
          </Form>
          {rows.length === 0 ? (
            <p className="mt-6 text-ink-soft">
              {q
                ? `No scenario ${show === "archived" ? "in the archive " : ""}has “${q}” in its name.`
                : "Nothing here."}
            </p>
          ) : (
            <ScrollRegion label="Scenarios" className="mt-3">
              <table className="table">
                <caption className="sr-only">{`${total} scenarios${q ? ` with “${q}” in the name` : ""}`}</caption>
                <thead>
                  <tr>
                    <SortHeader column="name" sort={sort} descending={descending}>
                      name
                    </SortHeader>
                    <th scope="col" className="max-md:hidden">
                      layers, front first
                    </th>
                    <th scope="col" className="max-lg:hidden">
                      model
                    </th>
                    <th scope="col">revision</th>
                    <SortHeader
                      column="updated"
                      sort={sort}
                      descending={descending}
                      beginsDescending
                      className="max-sm:hidden"
                    >
                      changed
                    </SortHeader>
                    {canEdit && (
                      <th scope="col">
                        <span className="sr-only">actions</span>
                      </th>
                    )}
                  </tr>
                </thead>
                <tbody>
                  {rows.map((row) => (
                    <tr key={row.id}>
                      <td>
                        <Link to={scenarioPath(labId, row.id)} className="link font-semibold">
                          {row.name}
                        </Link>
                      </td>
                      <td className="max-w-80 text-ink-soft max-md:hidden">{row.layers}</td>
                      <td className="text-ink-soft max-lg:hidden">{row.model}</td>
                      <td>
                        <Link
                          to={`${scenarioPath(labId, row.id)}/revisions`}
                          className="link"
                          aria-label={`Revisions of ${row.name}, latest ${row.number}`}
                        >
                          {row.number}
                        </Link>
                        {row.note && <span className="ml-2 text-ink-soft text-small max-lg:hidden">{row.note}</span>}
                      </td>
                      <td className="max-sm:hidden">
                        <Moment at={row.updatedAt} />
                        {row.authorName && <span className="block text-ink-soft text-small">{row.authorName}</span>}
                      </td>
                      {canEdit && (
                        <td>
                          <Form method="post" className="flex flex-wrap items-center justify-end gap-x-4">
                            <input type="hidden" name="scenarioId" value={row.id} />
                            {show === "kept" && (
                              <Link
                                to={`${scenarioPath(labId, row.id)}/stack`}
                                className="action inline-flex items-center"
                                aria-label={`Stack of ${row.name}`}
                              >
                                Stack
                              </Link>
                            )}
                            <button
                              type="submit"
                              name="intent"
                              value="duplicate"
                              className="action"
                              aria-label={`Copy ${row.name}`}
                            >
                              Copy
                            </button>
                            {show === "kept" ? (
                              <button
                                type="submit"
                                name="intent"
                                value="archive"
                                className="action"
                                aria-label={`Archive ${row.name}`}
                              >
                                Archive
                              </button>
                            ) : (
                              <button
                                type="submit"
                                name="intent"
                                value="bringBack"
                                className="action"
                                aria-label={`Take ${row.name} out of the archive`}
                              >
                                Take out
                              </button>
                            )}
                          </Form>
                        </td>
                      )}
                    </tr>
                  ))}
                </tbody>
              </table>
            </ScrollRegion>
          )}
          {pages > 1 && <Pages page={page} pages={pages} />}
        </>
      )}
    </>
  );
}

interface ShowLinkProps {
  show: "kept" | "archived";
  now: string;
  count: number;
  children: string;
}

function ShowLink({ show, now, count, children }: ShowLinkProps) {
  const [search] = useSearchParams();
  const next = new URLSearchParams(search);
  next.set("show", show);
  next.delete("page");
  next.delete("archived");
  const here = show === now;
  return (
    <Link
      to={`?${next}`}
      aria-current={here ? "page" : undefined}
      className={here ? "font-semibold" : "text-ink-soft hover:text-ink"}
    >
      {children} <span className="font-normal text-ink-soft">{count}</span>
    </Link>
  );
}

function Pages({ page, pages }: { page: number; pages: number }) {
  const [search] = useSearchParams();
  const at = (number: number) => {
    const next = new URLSearchParams(search);
    next.set("page", String(number));
    return `?${next}`;
  };
  return (
    <nav aria-label="Pages" className="mt-4 flex items-center gap-4">
      {page > 1 && (
        <Link to={at(page - 1)} className="link">
          Previous
        </Link>
      )}
      <span className="text-ink-soft">
        page {page} of {pages}
      </span>
      {page < pages && (
        <Link to={at(page + 1)} className="link">
          Next
        </Link>
      )}
    </nav>
  );
}

import { Form, href, Link, redirect } from "react-router";
import { z } from "zod";
import { RichText } from "~/components/ui/RichText";
import { ScrollRegion } from "~/components/ui/scrollRegion";
import { countSourced } from "~/lib/materialForm";
import { formatNumber } from "~/lib/numberFormat";
import { countMaterials, findMaterial, listMaterials, setMaterialArchived } from "~/models/materials.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import { seedMaterials } from "../../../../drizzle/seedScenarios";
import type { Route } from "./+types/list";

const listState = z.object({
  q: z.string().trim().max(200).catch(""),
  show: z.enum(["kept", "archived"]).catch("kept"),
});

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const search = new URL(args.request.url).searchParams;
  const { q, show } = listState.parse(Object.fromEntries(search));
  const archivedId = search.get("archived");
  const [materials, counts, archived] = await Promise.all([
    listMaterials(lab.id, { archived: show === "archived", filter: q }),
    countMaterials(lab.id),
    archivedId ? findMaterial(lab.id, archivedId) : undefined,
  ]);
  return {
    q,
    show,
    counts,
    canEdit: canActAs(role, "researcher"),
    justArchived: archived?.archivedAt ? { id: archived.id, name: archived.name } : null,
    materials: materials.map(({ id, name, note, layer, sources }) => ({
      id,
      name,
      note,
      layer,
      ...countSourced(sources),
    })),
  };
}

const materialId = z.string().min(1);
const listAction = z.discriminatedUnion("intent", [
  z.object({ intent: z.literal("archive"), materialId }),
  z.object({ intent: z.literal("bringBack"), materialId }),
  z.object({ intent: z.literal("starterShelf") }),
]);

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const parsed = listAction.safeParse(Object.fromEntries(await args.request.formData()));
  if (!parsed.success) throw new Response("This form is not known here.", { status: 400 });
  const list = href("/lab/:labId/materials", { labId: lab.id });
  if (parsed.data.intent === "starterShelf") {
    await seedMaterials(lab.id, user.id);
    return redirect(list, 303);
  }
  const archived = parsed.data.intent === "archive";
  if (!(await setMaterialArchived({ labId: lab.id, userId: user.id }, parsed.data.materialId, archived)))
    throw notFound();
  return redirect(archived ? `${list}?archived=${parsed.data.materialId}` : list, 303);
}

export const meta: Route.MetaFunction = () => [{ title: "Materials · Demilune" }];

export default function Materials({ loaderData, params: { labId } }: Route.ComponentProps) {
  const { q, show, counts, canEdit, justArchived, materials } = loaderData;
  const none = counts.kept + counts.archived === 0;
  const here = (one: typeof show) => (one === show ? "font-semibold" : "text-ink-soft hover:text-ink");
  return (
    <>
      <div className="flex flex-wrap items-center gap-x-6 gap-y-2">
        <h1 className="font-semibold text-title">Materials</h1>
        {canEdit && (
          <Link to={href("/lab/:labId/materials/new", { labId })} className="button ml-auto">
            New material
          </Link>
        )}
      </div>
      {justArchived && (
        <Form
          method="post"
          role="status"
          className="mt-2 flex flex-wrap items-center gap-3 border-tide border-l-2 pl-3"
        >
          <input type="hidden" name="materialId" value={justArchived.id} />
          {justArchived.name} is in the archive now.
          {canEdit && (
            <button type="submit" name="intent" value="bringBack" className="action font-semibold">
              Undo
            </button>
          )}
        </Form>
      )}
      {none ? (
        <section className="mt-6 max-w-2xl">
          <p>The shelf holds layers to build stacks from: every number with the source it was taken from.</p>
          {canEdit && (
            <Form method="post" className="mt-3">
              <button type="submit" name="intent" value="starterShelf" className="button-quiet">
                Fill it with the starter shelf
              </button>
            </Form>
          )}
        </section>
      ) : (
        <>
          <Form method="get" role="search" className="mt-3 flex flex-wrap items-end gap-x-4 gap-y-2">
            <input type="hidden" name="show" value={show} />
            <label className="grid w-64 gap-1 text-ink-soft text-small">
              Name contains
              <input type="search" name="q" key={q} defaultValue={q} className="field text-base text-ink" />
            </label>
            <button type="submit" className="button-quiet">
              Filter
            </button>
            <nav aria-label="Which materials" className="flex min-h-8 items-center gap-4">
              <Link to="?show=kept" aria-current={show === "kept" ? "page" : undefined} className={here("kept")}>
                On the shelf <span className="font-normal text-ink-soft">{counts.kept}</span>
              </Link>
              <Link
                to="?show=archived"
                aria-current={show === "archived" ? "page" : undefined}
                className={here("archived")}
              >
                Archive <span className="font-normal text-ink-soft">{counts.archived}</span>
              </Link>
            </nav>
          </Form>
          {materials.length === 0 ? (
            <p className="mt-6 text-ink-soft">{q ? `No material has “${q}” in its name.` : "Nothing here."}</p>
          ) : (
            <ScrollRegion label="Materials" className="mt-3">
              <table className="table">
                <caption className="sr-only">Materials by name</caption>
                <thead>
                  <tr>
                    <th scope="col">name</th>
                    <NumberHead symbol="*E*_{g}" unit="eV" words="band gap" />
                    <NumberHead symbol="*ε*_{r}" unit="1" words="relative permittivity" />
                    <NumberHead symbol="*µ*_{n}" unit="cm²/Vs" words="electron mobility" />
                    <NumberHead symbol="*µ*_{p}" unit="cm²/Vs" words="hole mobility" />
                    <th scope="col">sources</th>
                    <th scope="col" className="max-lg:hidden">
                      note
                    </th>
                    {canEdit && (
                      <th scope="col">
                        <span className="sr-only">actions</span>
                      </th>
                    )}
                  </tr>
                </thead>
                <tbody>
                  {materials.map(({ id, name, note, layer, sourced, all }) => (
                    <tr key={id}>
                      <td>
                        <Link
                          to={href("/lab/:labId/materials/:materialId", { labId, materialId: id })}
                          className="link font-semibold"
                        >
                          {name}
                        </Link>
                      </td>
                      <NumberCell value={layer.gapEV} />
                      <NumberCell value={layer.relativePermittivity} />
                      <NumberCell value={layer.electronMobilityCm2PerVs} />
                      <NumberCell value={layer.holeMobilityCm2PerVs} />
                      <td className="whitespace-nowrap text-ink-soft">
                        {sourced} of {all}
                      </td>
                      <td className="max-w-96 text-ink-soft max-lg:hidden">{note}</td>
                      {canEdit && (
                        <td className="text-right">
                          <Form method="post">
                            <input type="hidden" name="materialId" value={id} />
                            <button
                              type="submit"
                              name="intent"
                              value={show === "kept" ? "archive" : "bringBack"}
                              className="action"
                              aria-label={show === "kept" ? `Archive ${name}` : `Take ${name} out of the archive`}
                            >
                              {show === "kept" ? "Archive" : "Take out"}
                            </button>
                          </Form>
                        </td>
                      )}
                    </tr>
                  ))}
                </tbody>
              </table>
            </ScrollRegion>
          )}
        </>
      )}
    </>
  );
}

function NumberHead({ symbol, unit, words }: { symbol: string; unit: string; words: string }) {
  return (
    <th scope="col" className="text-right! max-sm:hidden" title={words}>
      <span className="sr-only">{words}, </span>
      <RichText text={`${symbol} / ${unit}`} />
    </th>
  );
}

function NumberCell({ value }: { value: number }) {
  return (
    <td className="text-right tabular-nums max-sm:hidden">
      <RichText text={formatNumber(value)} />
    </td>
  );
}

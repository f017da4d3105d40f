/** The materials shelf of a lab: layer presets, each value with its source. Every query names the lab. */
import type { LayerDocument } from "@demilune/solver";
import { and, asc, count, eq, isNotNull, isNull, like, sql } from "drizzle-orm";
import { materials } from "../../drizzle/schema";
import { recordActivity } from "./activity.server";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";
import type { Actor } from "./scenarios.server";

export interface MaterialContent {
  name: string;
  layer: LayerDocument;
  /** Field path in the layer → where its value comes from. */
  sources: Record<string, string>;
  note: string;
}

export interface Material extends MaterialContent {
  id: string;
  updatedAt: Date;
  archivedAt: Date | null;
}

const columns = {
  id: materials.id,
  name: materials.name,
  layer: materials.layer,
  sources: materials.sources,
  note: materials.note,
  updatedAt: materials.updatedAt,
  archivedAt: materials.archivedAt,
};

/** Only `createMaterial` and `updateMaterial` write layers, and both take checked ones. */
const asMaterial = (row: Omit<Material, "layer"> & { layer: Record<string, unknown> }): Material => ({
  ...row,
  layer: row.layer as unknown as LayerDocument,
});
const stored = (layer: LayerDocument) => layer as unknown as Record<string, unknown>;

export async function listMaterials(
  labId: string,
  { archived = false, filter = "" }: { archived?: boolean; filter?: string } = {},
): Promise<Material[]> {
  const escaped = filter.replace(/[\\%_]/g, (sign) => `\\${sign}`);
  const rows = await database()
    .select(columns)
    .from(materials)
    .where(
      and(
        eq(materials.labId, labId),
        archived ? isNotNull(materials.archivedAt) : isNull(materials.archivedAt),
        filter === "" ? undefined : sql`${like(materials.name, `%${escaped}%`)} escape '\\'`,
      ),
    )
    .orderBy(asc(sql`lower(${materials.name})`), asc(materials.id));
  return rows.map(asMaterial);
}

/** How many materials the lab has outside and inside the archive. */
export async function countMaterials(labId: string): Promise<{ kept: number; archived: number }> {
  const row = await database()
    .select({ all: count(), archived: count(materials.archivedAt) })
    .from(materials)
    .where(eq(materials.labId, labId))
    .get();
  return { kept: (row?.all ?? 0) - (row?.archived ?? 0), archived: row?.archived ?? 0 };
}

export async function findMaterial(labId: string, materialId: string): Promise<Material | undefined> {
  const row = await database()
    .select(columns)
    .from(materials)
    .where(and(eq(materials.labId, labId), eq(materials.id, materialId)))
    .get();
  return row && asMaterial(row);
}

const happening = ({ labId, userId }: Actor, kind: string, objectId: string, text: string, at: Date) =>
  recordActivity({ labId, userId, kind, objectKind: "material", objectId, text }, at);

/** @returns the new material's id */
export async function createMaterial(actor: Actor, { layer, ...content }: MaterialContent): Promise<string> {
  const at = new Date();
  const id = newId(at.getTime());
  await write(
    database()
      .insert(materials)
      .values({
        id,
        labId: actor.labId,
        ...content,
        layer: stored(layer),
        createdBy: actor.userId,
        createdAt: at,
        updatedAt: at,
      }),
    happening(actor, "added", id, content.name, at),
  );
  return id;
}

/** False where the lab has no such material. */
export async function updateMaterial(
  actor: Actor,
  materialId: string,
  { layer, ...content }: MaterialContent,
): Promise<boolean> {
  if (!(await findMaterial(actor.labId, materialId))) return false;
  const at = new Date();
  await write(
    database()
      .update(materials)
      .set({ ...content, layer: stored(layer), updatedAt: at })
      .where(and(eq(materials.labId, actor.labId), eq(materials.id, materialId))),
    happening(actor, "changed", materialId, content.name, at),
  );
  return true;
}

/** Put a material into the archive or take it out again. False where the lab has no such material. */
export async function setMaterialArchived(actor: Actor, materialId: string, archived: boolean): Promise<boolean> {
  const material = await findMaterial(actor.labId, materialId);
  if (!material) return false;
  const at = new Date();
  await write(
    database()
      .update(materials)
      .set({ archivedAt: archived ? at : null })
      .where(and(eq(materials.labId, actor.labId), eq(materials.id, materialId))),
    happening(actor, archived ? "archived" : "took out of the archive", materialId, material.name, at),
  );
  return true;
}

import { desc, eq } from "drizzle-orm";
import { activity, users } from "../../drizzle/schema";
import { database } from "./database.server";
import { newId } from "./identifier.server";

export interface Happening {
  labId: string;
  userId: string | null;
  /** What was done, as a verb in the past: "created", "saved", "archived", … */
  kind: string;
  objectKind: string;
  objectId: string;
  /** The object's name at that time, and what else one must know. */
  text: string;
}

/** The query that records a happening; give it to `write()` together with what it records, so that both stand or fall. */
export const recordActivity = (happening: Happening, at = new Date()) =>
  database()
    .insert(activity)
    .values({ id: newId(at.getTime()), ...happening, at });

export async function listActivity(labId: string, limit = 100) {
  return database()
    .select({
      id: activity.id,
      kind: activity.kind,
      objectKind: activity.objectKind,
      objectId: activity.objectId,
      text: activity.text,
      at: activity.at,
      userName: users.name,
    })
    .from(activity)
    .leftJoin(users, eq(users.id, activity.userId))
    .where(eq(activity.labId, labId))
    .orderBy(desc(activity.at), desc(activity.id))
    .limit(limit);
}

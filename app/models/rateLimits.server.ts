import { lt, sql } from "drizzle-orm";
import { rateLimits } from "../../drizzle/schema";
import { database, write } from "./database.server";

/**
 * Counts one use of `key` in the present window, in one statement.
 * @param limit how many uses, in how many seconds from the first one
 * @returns whether this use is still within the limit
 */
export async function consume(
  key: string,
  [count, seconds]: readonly [number, number],
  now = new Date(),
): Promise<boolean> {
  const expiresAt = new Date(now.getTime() + seconds * 1000);
  const over = sql`${rateLimits.expiresAt} <= ${now.getTime()}`;
  const [, counted] = await write(
    database()
      .delete(rateLimits)
      .where(lt(rateLimits.expiresAt, new Date(now.getTime() - 86_400_000))),
    database()
      .insert(rateLimits)
      .values({ key, points: 1, expiresAt })
      .onConflictDoUpdate({
        target: rateLimits.key,
        set: {
          points: sql`CASE WHEN ${over} THEN 1 ELSE ${rateLimits.points} + 1 END`,
          expiresAt: sql`CASE WHEN ${over} THEN ${expiresAt.getTime()} ELSE ${rateLimits.expiresAt} END`,
        },
      })
      .returning({ points: rateLimits.points }),
  );
  return Number(counted.rows[0]?.points) <= count;
}

import { eq } from "drizzle-orm";
import { users } from "../../drizzle/schema";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";

export type User = typeof users.$inferSelect;
export type Theme = User["theme"];

/** The user with this (normalised) address, or undefined. */
export async function findUserByEmail(email: string): Promise<User | undefined> {
  return database().select().from(users).where(eq(users.email, email)).get();
}

/** Makes a user, or finds the one who has the address already. */
export async function ensureUser(email: string, name: string, now = new Date()): Promise<User> {
  await write(
    database()
      .insert(users)
      .values({ id: newId(), email, name, createdAt: now })
      .onConflictDoNothing({ target: users.email }),
  );
  return (await findUserByEmail(email))!;
}

export async function setTheme(userId: string, theme: Theme): Promise<void> {
  await write(database().update(users).set({ theme }).where(eq(users.id, userId)));
}

import { and, asc, eq } from "drizzle-orm";
import { labs, memberships, users } from "../../drizzle/schema";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";

export type Lab = typeof labs.$inferSelect;
export type Role = (typeof memberships.$inferSelect)["role"];

/** The lab together with the user's role in it, or undefined: a lab one does not belong to does not exist. */
export async function findMembership(labId: string, userId: string): Promise<{ lab: Lab; role: Role } | undefined> {
  return database()
    .select({ lab: labs, role: memberships.role })
    .from(memberships)
    .innerJoin(labs, eq(labs.id, memberships.labId))
    .where(and(eq(memberships.labId, labId), eq(memberships.userId, userId)))
    .get();
}

export async function listLabsOf(userId: string): Promise<{ id: string; name: string; role: Role }[]> {
  return database()
    .select({ id: labs.id, name: labs.name, role: memberships.role })
    .from(memberships)
    .innerJoin(labs, eq(labs.id, memberships.labId))
    .where(eq(memberships.userId, userId))
    .orderBy(asc(labs.name));
}

export async function listPeople(labId: string): Promise<{ id: string; name: string; email: string; role: Role }[]> {
  return database()
    .select({ id: users.id, name: users.name, email: users.email, role: memberships.role })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.labId, labId))
    .orderBy(asc(users.name));
}

export async function findLabByName(name: string): Promise<Lab | undefined> {
  return database().select().from(labs).where(eq(labs.name, name)).get();
}

/** Makes a lab with its first members in one step. */
export async function createLab(
  name: string,
  members: { userId: string; role: Role }[],
  options: { invented?: boolean } = {},
): Promise<Lab> {
  const lab = { id: newId(), name, invented: options.invented ?? false, createdAt: new Date() };
  await write(
    database().insert(labs).values(lab),
    ...members.map((member) =>
      database()
        .insert(memberships)
        .values({ ...member, labId: lab.id, createdAt: lab.createdAt }),
    ),
  );
  return lab;
}

/** The user who holds this role in the lab, the earliest first. */
export async function findMemberWithRole(labId: string, role: Role): Promise<string | undefined> {
  const member = await database()
    .select({ userId: memberships.userId })
    .from(memberships)
    .where(and(eq(memberships.labId, labId), eq(memberships.role, role)))
    .orderBy(asc(memberships.createdAt), asc(memberships.userId))
    .get();
  return member?.userId;
}

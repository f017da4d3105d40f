/**
 * Files that are looked at before anything is stored: a folder beside the database, each file for its sender in its
 * lab only, forgotten after an hour. Browsers with scripts read the file themselves and need no such place.
 */
import { mkdir, readdir, readFile, rm, stat, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { z } from "zod";
import { settings } from "~/services/settings.server";
import { newId } from "./identifier.server";

const lifetimeMs = 3_600_000;
/** Files a person may have waiting; the oldest goes. */
const waitingLimit = 5;

const headSchema = z.strictObject({ labId: z.string(), userId: z.string(), name: z.string() });

interface Owner {
  labId: string;
  userId: string;
}

const folder = () => join(settings().dataFolder, "incoming");
const isId = (id: string) => /^[0-9A-Z]{26}$/.test(id);
const pathsOf = (id: string) => ({ head: join(folder(), `${id}.json`), body: join(folder(), `${id}.bin`) });

async function remove(id: string) {
  const { head, body } = pathsOf(id);
  await Promise.all([rm(head, { force: true }), rm(body, { force: true })]);
}

async function readHead(id: string) {
  try {
    return headSchema.parse(JSON.parse(await readFile(pathsOf(id).head, "utf8")));
  } catch {
    // Gone in the meantime, or half written when the process was killed.
    return undefined;
  }
}

/** Forgets what is over-age, and the oldest of this person's where there are too many. */
async function tidy(userId: string) {
  const ids = (await readdir(folder()))
    .filter((name) => name.endsWith(".json"))
    .map((name) => name.slice(0, -5))
    .sort();
  const own: string[] = [];
  for (const id of ids) {
    const found = await stat(pathsOf(id).head).catch(() => null);
    if (!found || Date.now() - found.mtimeMs > lifetimeMs) await remove(id);
    else if ((await readHead(id))?.userId === userId) own.push(id);
  }
  for (const id of own.slice(0, Math.max(0, own.length - waitingLimit + 1))) await remove(id);
}

/** Keeps a file for a while and returns its id. */
export async function holdFile(owner: Owner, name: string, bytes: Uint8Array): Promise<string> {
  await mkdir(folder(), { recursive: true, mode: 0o700 });
  await tidy(owner.userId);
  const id = newId();
  const { head, body } = pathsOf(id);
  await writeFile(body, bytes, { mode: 0o600 });
  await writeFile(head, JSON.stringify({ ...owner, name }), { mode: 0o600 });
  return id;
}

/** The file, for whoever sent it and in that lab only; undefined otherwise and after its time. */
export async function findHeldFile(owner: Owner, id: string): Promise<{ name: string; bytes: Uint8Array } | undefined> {
  if (!isId(id)) return undefined;
  const head = await readHead(id);
  if (!head || head.labId !== owner.labId || head.userId !== owner.userId) return undefined;
  try {
    if (Date.now() - (await stat(pathsOf(id).head)).mtimeMs > lifetimeMs) return undefined;
    return { name: head.name, bytes: new Uint8Array(await readFile(pathsOf(id).body)) };
  } catch {
    return undefined;
  }
}

/** Forgets a file. */
export async function dropHeldFile(owner: Owner, id: string): Promise<void> {
  if (await findHeldFile(owner, id)) await remove(id);
}

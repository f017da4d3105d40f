/** The write gate against a second process, migrations against each other. */
import { spawn } from "node:child_process";
import { once } from "node:events";
import { cpSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { createClient } from "@libsql/client";
import { eq, like } from "drizzle-orm";
import { describe, expect, it, vi } from "vitest";
import { database, prepareDatabase, write } from "~/models/database.server";
import { newId } from "~/models/identifier.server";
import { users } from "../../../drizzle/schema";
import { withTemporaryDatabase } from "./temporaryDatabase";

withTemporaryDatabase();

const databaseUrl = () => `file:${process.env.DATA_DIR}/demilune.db`;
const user = (email: string) => ({ id: newId(), email, name: "Iben Holt", createdAt: new Date() });
const insert = (email: string) => database().insert(users).values(user(email));

/** Starts tests/support/secondProcess.ts. */
function start(task: "migrate" | "write" | "hold", folder: string) {
  const child = spawn(process.execPath, ["--import", "tsx", "tests/support/secondProcess.ts", task], {
    env: { ...process.env, DATA_DIR: folder },
    stdio: ["ignore", "pipe", "inherit"],
  });
  return { said: once(child.stdout, "data"), ended: once(child, "exit").then(([code]) => code as number | null) };
}

// Starting processes takes its time on a busy machine.
vi.setConfig({ testTimeout: 120_000 });

describe("the write gate", () => {
  it("writes all of a transaction or nothing", async () => {
    await expect(write(insert("whole@lab.example"), insert("whole@lab.example"))).rejects.toThrow(/UNIQUE/);
    expect(await database().select().from(users).where(eq(users.email, "whole@lab.example"))).toEqual([]);
  });

  it("lets nothing be lost that it acknowledged while another process held the file", async () => {
    const foreign = start("hold", process.env.DATA_DIR!);
    await foreign.said;
    const emails = Array.from({ length: 20 }, (_, number) => `held${number}@lab.example`);
    await Promise.all(emails.map((email) => write(insert(email))));
    expect(await foreign.ended).toBe(0);
    // Read by a third party, who sees only what is really in the file.
    const witness = createClient({ url: databaseUrl() });
    const { rows } = await witness.execute("SELECT count(*) AS kept FROM users WHERE email LIKE 'held%'");
    witness.close();
    expect(rows[0].kept).toBe(20);
  });

  it("keeps every row of two processes that write at once", async () => {
    const theirs = start("write", process.env.DATA_DIR!).ended;
    for (let number = 0; number < 40; number++) await write(insert(`ours${number}@lab.example`));
    expect(await theirs).toBe(0);
    for (const pattern of ["ours%", "theirs%"])
      expect(await database().select().from(users).where(like(users.email, pattern))).toHaveLength(40);
  });
});

describe("preparing the database", () => {
  it("changes nothing the second time", async () => {
    const before = await database().select().from(users);
    await prepareDatabase();
    expect(await database().select().from(users)).toEqual(before);
    expect(readdirSync(process.env.DATA_DIR!).filter((name) => name.endsWith(".lock"))).toEqual([]);
  });

  it("lets three processes that start together migrate one after another", async () => {
    const folder = mkdtempSync(join(tmpdir(), "demilune-race-"));
    expect(await Promise.all([1, 2, 3].map(() => start("migrate", folder).ended))).toEqual([0, 0, 0]);
    rmSync(folder, { recursive: true });
  });

  it("takes a backup before it changes data, and then refuses to run as an older program", async () => {
    const folder = process.env.DATA_DIR!;
    const newer = join(folder, "migrations");
    cpSync("drizzle/migrations", newer, { recursive: true });
    const journalFile = join(newer, "meta/_journal.json");
    const journal = JSON.parse(readFileSync(journalFile, "utf8"));
    journal.entries.push({
      ...journal.entries.at(-1),
      idx: journal.entries.length,
      when: Date.now(),
      tag: "9999_next",
    });
    writeFileSync(journalFile, JSON.stringify(journal));
    writeFileSync(join(newer, "9999_next.sql"), "DELETE FROM users;");
    await write(insert("precious@lab.example"));

    await prepareDatabase(newer);
    expect(await database().select().from(users)).toEqual([]);
    const backup = readdirSync(folder).find((name) => name.startsWith("before-migration-"))!;
    const witness = createClient({ url: `file:${join(folder, backup)}` });
    const { rows } = await witness.execute("SELECT email FROM users WHERE email = 'precious@lab.example'");
    witness.close();
    expect(rows).toHaveLength(1);

    await expect(prepareDatabase()).rejects.toThrow(/newer than this program/);
  });
});

/**
 * The one door to the database file. One process owns the file; reads go through `database()`, writes through `write()`.
 *
 * @libsql/client 0.18.0 can acknowledge writes and lose them after one SQLITE_BUSY (its failed statement is never reset),
 * so every write passes one gate in `write` mode, and at the first BUSY the client is thrown away and opened anew.
 */
import { accessSync, closeSync, constants, mkdirSync, openSync, rmSync, statSync } from "node:fs";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { pathToFileURL } from "node:url";
import { type Client, createClient, type InStatement, type InValue, type ResultSet } from "@libsql/client";
import { drizzle, type LibSQLDatabase } from "drizzle-orm/libsql";
import { migrate } from "drizzle-orm/libsql/migrator";
import { readMigrationFiles } from "drizzle-orm/migrator";
import { projectFolder, SettingsError, settings } from "~/services/settings.server";

interface Handle {
  client: Client;
  database: LibSQLDatabase;
}

/** A query built with drizzle and not yet run. */
export interface Query {
  toSQL(): { sql: string; params: unknown[] };
}

// Development reloads modules; the handle and the gate must survive that, or two gates would guard one file.
const kept = globalThis as typeof globalThis & { demiluneDatabase?: { handle?: Handle; tail: Promise<unknown> } };
kept.demiluneDatabase ??= { tail: Promise.resolve() };
const state = kept.demiluneDatabase;

const databaseFile = () => join(settings().dataFolder, "demilune.db");

function open(): Handle {
  const client = createClient({ url: pathToFileURL(databaseFile()).href, timeout: 10_000 });
  return { client, database: drizzle(client) };
}

function handle(): Handle {
  state.handle ??= open();
  return state.handle;
}

/** Drizzle's query builder, for reading. */
export const database = (): LibSQLDatabase => handle().database;

const isBusy = (error: unknown) =>
  error instanceof Error &&
  /SQLITE_BUSY|statements in progress/.test(`${"code" in error ? error.code : ""} ${error.message}`);

function gate<T>(task: () => Promise<T>): Promise<T> {
  const result = state.tail.then(task, task);
  state.tail = result.catch(() => undefined);
  return result;
}

function reopen() {
  state.handle?.client.close();
  state.handle = undefined;
}

const statement = (query: Query): InStatement => {
  const { sql, params } = query.toSQL();
  return { sql, args: params as InValue[] };
};

/**
 * Runs the queries in order as one transaction: all of them or none.
 * @returns one raw result per query; with RETURNING look at `rows` (`rowsAffected` is 0 there), else at `rowsAffected`.
 */
export function write(...queries: [Query, ...Query[]]): Promise<ResultSet[]> {
  const statements = queries.map(statement);
  return gate(async () => {
    for (let attempt = 0; ; attempt++) {
      try {
        return await handle().client.batch(statements, "write");
      } catch (error) {
        if (!isBusy(error)) throw error;
        reopen();
        if (attempt >= 5) throw error;
        await sleep(50 * 2 ** attempt * (0.5 + Math.random()));
      }
    }
  });
}

/**
 * Opens the file, takes a backup if it is about to change, applies what migrations are missing. Once, before listening.
 * @throws SettingsError where the data folder cannot be written
 */
export async function prepareDatabase(migrationsFolder = join(projectFolder, "drizzle/migrations")): Promise<void> {
  const folder = settings().dataFolder;
  try {
    mkdirSync(folder, { recursive: true });
    accessSync(folder, constants.W_OK);
  } catch (error) {
    const code = error instanceof Error && "code" in error ? error.code : error;
    throw new SettingsError(`DATA_DIR is ${folder}, which is no folder that can be written (${code}).`);
  }
  const lock = join(folder, "migrating.lock");
  const release = await acquire(lock);
  try {
    const { client, database } = handle();
    const mode = (await client.execute("PRAGMA journal_mode=WAL")).rows[0]?.journal_mode;
    if (mode !== "wal")
      throw new Error(
        `The database cannot use write-ahead logging in ${folder} (journal mode "${mode}"); a network share?`,
      );
    const applied = await appliedMigrations(client);
    const known = readMigrationFiles({ migrationsFolder }).length;
    if (applied > known)
      throw new Error(
        `The database in ${folder} is newer than this program (${applied} migrations applied, ${known} known).`,
      );
    if (applied === known) return;
    if (applied > 0) {
      const moment = new Date().toISOString().replaceAll(":", "-");
      await client.execute({ sql: "VACUUM INTO ?", args: [join(folder, `before-migration-${moment}.db`)] });
    }
    await migrate(database, { migrationsFolder });
  } finally {
    release();
  }
}

async function appliedMigrations(client: Client): Promise<number> {
  const table = await client.execute("SELECT 1 FROM sqlite_master WHERE name = '__drizzle_migrations'");
  if (table.rows.length === 0) return 0;
  const rows = await client.execute("SELECT count(*) AS applied FROM __drizzle_migrations");
  return Number(rows.rows[0]?.applied);
}

/** Takes the lock file; one left behind by a process that was killed is taken over after a minute. */
async function acquire(file: string): Promise<() => void> {
  for (;;) {
    try {
      closeSync(openSync(file, "wx"));
      return () => rmSync(file, { force: true });
    } catch (error) {
      if (!(error instanceof Error && "code" in error && error.code === "EEXIST")) throw error;
      const age = Date.now() - (statSync(file, { throwIfNoEntry: false })?.mtimeMs ?? Date.now());
      if (age > 60_000) rmSync(file, { force: true });
      else await sleep(200);
    }
  }
}

/** Waits for the writes in hand, folds the write-ahead log into the file and closes it. */
export async function closeDatabase(): Promise<void> {
  await state.tail;
  await state.handle?.client.execute("PRAGMA wal_checkpoint(TRUNCATE)");
  reopen();
}

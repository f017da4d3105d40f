/**
 * Every table of the database. Times are stored as milliseconds since 1970 (UTC), identifiers as 26-character
 * sortable text (see app/models/identifier.server.ts), spectra as raw little-endian Float64 blobs.
 */
import { sql } from "drizzle-orm";
import { blob, check, index, integer, primaryKey, real, sqliteTable, text, uniqueIndex } from "drizzle-orm/sqlite-core";

const id = () => text("id").primaryKey();
const moment = (name: string) => integer(name, { mode: "timestamp_ms" });
const createdAt = () => moment("created_at").notNull();

// People and sign-in

export const users = sqliteTable("users", {
  id: id(),
  /** Normalised: NFKC, trimmed, lower case. */
  email: text("email").notNull().unique(),
  name: text("name").notNull(),
  theme: text("theme", { enum: ["auto", "light", "dark"] })
    .notNull()
    .default("auto"),
  createdAt: createdAt(),
  disabledAt: moment("disabled_at"),
});

export const sessions = sqliteTable(
  "sessions",
  {
    id: id(),
    /** SHA-256 (hex) of the 256-bit token in the cookie; the token itself is stored nowhere. */
    tokenHash: text("token_hash").notNull().unique(),
    userId: text("user_id")
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    createdAt: createdAt(),
    lastSeenAt: moment("last_seen_at").notNull(),
    /** Absolute end, whatever the activity. */
    expiresAt: moment("expires_at").notNull(),
    userAgent: text("user_agent").notNull().default(""),
    address: text("address").notNull().default(""),
  },
  (table) => [index("sessions_user").on(table.userId)],
);

export const loginChallenges = sqliteTable(
  "login_challenges",
  {
    /** SHA-256 (hex) of the 256-bit challenge id in the browser's cookie. */
    idHash: text("id_hash").primaryKey(),
    email: text("email").notNull(),
    /** HMAC over challenge id and code. */
    codeMac: text("code_mac").notNull(),
    /** The one-time-password package's state, which therefore never leaves the server. */
    state: text("state").notNull(),
    redirectTo: text("redirect_to").notNull(),
    attempts: integer("attempts").notNull().default(0),
    createdAt: createdAt(),
    expiresAt: moment("expires_at").notNull(),
    usedAt: moment("used_at"),
  },
  (table) => [index("login_challenges_email").on(table.email, table.createdAt)],
);

/** Counters that must survive a restart; the busy ones live in memory. */
export const rateLimits = sqliteTable("rate_limits", {
  key: text("key").primaryKey(),
  points: integer("points").notNull(),
  expiresAt: moment("expires_at").notNull(),
});

// Labs

export const labs = sqliteTable("labs", {
  id: id(),
  name: text("name").notNull(),
  /** An invented lab says so on every page. */
  invented: integer("invented", { mode: "boolean" }).notNull().default(false),
  createdAt: createdAt(),
});

const labId = () =>
  text("lab_id")
    .notNull()
    .references(() => labs.id, { onDelete: "cascade" });
const author = (name: string) => text(name).references(() => users.id, { onDelete: "set null" });

export const memberships = sqliteTable(
  "memberships",
  {
    labId: labId(),
    userId: text("user_id")
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    role: text("role", { enum: ["owner", "researcher", "viewer"] }).notNull(),
    createdAt: createdAt(),
  },
  (table) => [primaryKey({ columns: [table.labId, table.userId] }), index("memberships_user").on(table.userId)],
);

// Scenarios

export const scenarios = sqliteTable(
  "scenarios",
  {
    id: id(),
    labId: labId(),
    name: text("name").notNull(),
    createdBy: author("created_by"),
    createdAt: createdAt(),
    updatedAt: moment("updated_at").notNull(),
    archivedAt: moment("archived_at"),
  },
  (table) => [index("scenarios_lab").on(table.labId, table.updatedAt)],
);

/** A revision is written once and never changed. */
export const revisions = sqliteTable(
  "revisions",
  {
    id: id(),
    scenarioId: text("scenario_id")
      .notNull()
      .references(() => scenarios.id, { onDelete: "cascade" }),
    /** Counts from 1 within its scenario. */
    number: integer("number").notNull(),
    /** The scenario document as JSON text. */
    document: text("document").notNull(),
    hash: text("hash").notNull(),
    note: text("note").notNull().default(""),
    authorId: author("author_id"),
    createdAt: createdAt(),
  },
  (table) => [
    uniqueIndex("revisions_number").on(table.scenarioId, table.number),
    index("revisions_hash").on(table.hash),
    check("revisions_number_from_one", sql`${table.number} >= 1`),
  ],
);

export const drafts = sqliteTable(
  "drafts",
  {
    scenarioId: text("scenario_id")
      .notNull()
      .references(() => scenarios.id, { onDelete: "cascade" }),
    userId: text("user_id")
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    /** What was typed, as JSON text; it need not be a valid scenario yet. */
    document: text("document").notNull(),
    baseRevisionNumber: integer("base_revision_number").notNull(),
    updatedAt: moment("updated_at").notNull(),
  },
  (table) => [primaryKey({ columns: [table.scenarioId, table.userId] })],
);

// Runs

export const runs = sqliteTable(
  "runs",
  {
    id: id(),
    labId: labId(),
    /** Hash of resolved document and solver version: nothing is computed twice in a lab. */
    hash: text("hash").notNull(),
    solverVersion: text("solver_version").notNull(),
    /** The document that was computed, as JSON text. */
    document: text("document").notNull(),
    status: text("status", { enum: ["queued", "running", "done", "failed", "cancelled"] }).notNull(),
    /** Everything of the result but its arrays, as JSON. */
    summary: text("summary", { mode: "json" }).$type<unknown>(),
    errorMessage: text("error_message"),
    milliseconds: real("milliseconds"),
    requestedBy: author("requested_by"),
    createdAt: createdAt(),
    startedAt: moment("started_at"),
    finishedAt: moment("finished_at"),
  },
  (table) => [uniqueIndex("runs_hash").on(table.labId, table.hash)],
);

export const runChunks = sqliteTable(
  "run_chunks",
  {
    runId: text("run_id")
      .notNull()
      .references(() => runs.id, { onDelete: "cascade" }),
    index: integer("index").notNull(),
    data: blob("data", { mode: "buffer" }).notNull(),
  },
  (table) => [primaryKey({ columns: [table.runId, table.index] })],
);

// Materials, samples, measurements

export const materials = sqliteTable(
  "materials",
  {
    id: id(),
    labId: labId(),
    name: text("name").notNull(),
    /** A layer of the scenario document, as JSON. */
    layer: text("layer", { mode: "json" }).$type<Record<string, unknown>>().notNull(),
    /** Field path in the layer → where its value comes from. */
    sources: text("sources", { mode: "json" }).$type<Record<string, string>>().notNull(),
    note: text("note").notNull().default(""),
    createdBy: author("created_by"),
    createdAt: createdAt(),
    updatedAt: moment("updated_at").notNull(),
    archivedAt: moment("archived_at"),
  },
  (table) => [index("materials_lab").on(table.labId, table.name)],
);

export const samples = sqliteTable(
  "samples",
  {
    id: id(),
    labId: labId(),
    name: text("name").notNull(),
    group: text("group").notNull().default(""),
    contactSequence: text("contact_sequence").notNull().default(""),
    activeAreaCm2: real("active_area_cm2"),
    litAreaCm2: real("lit_area_cm2"),
    maskedAreaCm2: real("masked_area_cm2"),
    preconditioning: text("preconditioning").notNull().default(""),
    createdBy: author("created_by"),
    createdAt: createdAt(),
    updatedAt: moment("updated_at").notNull(),
    archivedAt: moment("archived_at"),
  },
  (table) => [index("samples_lab").on(table.labId, table.name)],
);

export const rawFiles = sqliteTable(
  "raw_files",
  {
    id: id(),
    labId: labId(),
    name: text("name").notNull(),
    sha256: text("sha256").notNull(),
    /** Bytes. */
    size: integer("size").notNull(),
    uploadedBy: author("uploaded_by"),
    createdAt: createdAt(),
  },
  (table) => [index("raw_files_lab").on(table.labId, table.sha256)],
);

export const rawFileChunks = sqliteTable(
  "raw_file_chunks",
  {
    rawFileId: text("raw_file_id")
      .notNull()
      .references(() => rawFiles.id, { onDelete: "cascade" }),
    index: integer("index").notNull(),
    data: blob("data", { mode: "buffer" }).notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.rawFileId, table.index] }),
    check("raw_file_chunks_at_most_one_mebibyte", sql`length(${table.data}) <= 1048576`),
  ],
);

export const measurements = sqliteTable(
  "measurements",
  {
    id: id(),
    labId: labId(),
    sampleId: text("sample_id").references(() => samples.id, { onDelete: "set null" }),
    rawFileId: text("raw_file_id").references(() => rawFiles.id, { onDelete: "restrict" }),
    name: text("name").notNull(),
    technique: text("technique", { enum: ["imps", "imvs", "impedance"] }).notNull(),
    /** As `spectra[].bias` of the scenario document. */
    bias: text("bias", { mode: "json" }).$type<unknown>().notNull(),
    fluxPerCm2S: real("flux_per_cm2_s"),
    temperatureK: real("temperature_k"),
    importSettings: text("import_settings", { mode: "json" }).$type<unknown>().notNull(),
    note: text("note").notNull().default(""),
    instrument: text("instrument").notNull().default(""),
    measuredAt: text("measured_at").notNull().default(""),
    licence: text("licence").notNull().default(""),
    invented: integer("invented", { mode: "boolean" }).notNull().default(false),
    pointCount: integer("point_count").notNull(),
    createdBy: author("created_by"),
    createdAt: createdAt(),
    updatedAt: moment("updated_at").notNull(),
    archivedAt: moment("archived_at"),
  },
  (table) => [
    index("measurements_lab").on(table.labId, table.updatedAt),
    index("measurements_sample").on(table.sampleId),
    index("measurements_raw_file").on(table.rawFileId),
  ],
);

/** Points as one blob: the columns frequency/Hz, Re, Im, sigma, masked (0 or 1), each `pointCount` Float64 long. */
export const measurementPoints = sqliteTable("measurement_points", {
  measurementId: text("measurement_id")
    .primaryKey()
    .references(() => measurements.id, { onDelete: "cascade" }),
  data: blob("data", { mode: "buffer" }).notNull(),
});

export const overlays = sqliteTable(
  "overlays",
  {
    scenarioId: text("scenario_id")
      .notNull()
      .references(() => scenarios.id, { onDelete: "cascade" }),
    measurementId: text("measurement_id")
      .notNull()
      .references(() => measurements.id, { onDelete: "cascade" }),
    createdBy: author("created_by"),
    createdAt: createdAt(),
  },
  (table) => [
    primaryKey({ columns: [table.scenarioId, table.measurementId] }),
    index("overlays_measurement").on(table.measurementId),
  ],
);

// Sharing, talking, remembering

export const shareLinks = sqliteTable(
  "share_links",
  {
    /** The public identifier in the guest's address; the secret is the token. */
    id: id(),
    labId: labId(),
    scenarioId: text("scenario_id")
      .notNull()
      .references(() => scenarios.id, { onDelete: "cascade" }),
    revisionId: text("revision_id")
      .notNull()
      .references(() => revisions.id, { onDelete: "cascade" }),
    tokenHash: text("token_hash").notNull().unique(),
    note: text("note").notNull().default(""),
    /** Paths of the parameters the guest may move; null means all. */
    exposed: text("exposed", { mode: "json" }).$type<string[]>(),
    measurementIds: text("measurement_ids", { mode: "json" }).$type<string[]>().notNull(),
    createdBy: author("created_by"),
    createdAt: createdAt(),
    expiresAt: moment("expires_at").notNull(),
    revokedAt: moment("revoked_at"),
    openings: integer("openings").notNull().default(0),
    lastOpenedAt: moment("last_opened_at"),
  },
  (table) => [index("share_links_scenario").on(table.scenarioId), index("share_links_lab").on(table.labId)],
);

export const comments = sqliteTable(
  "comments",
  {
    id: id(),
    labId: labId(),
    objectKind: text("object_kind").notNull(),
    objectId: text("object_id").notNull(),
    authorId: author("author_id"),
    text: text("text").notNull(),
    createdAt: createdAt(),
    deletedAt: moment("deleted_at"),
  },
  (table) => [index("comments_object").on(table.labId, table.objectKind, table.objectId)],
);

export const activity = sqliteTable(
  "activity",
  {
    id: id(),
    labId: labId(),
    userId: author("user_id"),
    kind: text("kind").notNull(),
    objectKind: text("object_kind").notNull(),
    objectId: text("object_id").notNull(),
    text: text("text").notNull(),
    at: moment("at").notNull(),
  },
  (table) => [index("activity_lab").on(table.labId, table.at)],
);

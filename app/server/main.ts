/** Entry of the server build: one bundle holds server, loaders and database, so that they share one of each. */
import { createServer, type Server } from "node:http";
import { setTimeout as sleep } from "node:timers/promises";
import type { RequestHandler } from "express";
import type { ServerBuild } from "react-router";
import { closeDatabase, prepareDatabase } from "~/models/database.server";
import { announceStop, stopping } from "~/services/lifetime.server";
import { log } from "~/services/log.server";
import { finishMails } from "~/services/mail/mail.server";
import { SettingsError, settings } from "~/services/settings.server";
import { createEdge } from "./edge";

interface Running {
  /** Where it answers, without a slash at the end. */
  address: string;
  stop(): Promise<void>;
}

/** How long open answers may go on after they were told to end, in ms. */
const grace = 300;

/** How long mails under way are waited for at the end, in ms. */
const mailGrace = 1000;

/**
 * Prepares the database, seeds the demo if it is one, and listens.
 * @throws SettingsError for a setting that cannot be used
 */
async function start(build: ServerBuild | (() => Promise<ServerBuild>), before?: RequestHandler): Promise<Running> {
  const current = settings();
  await prepareDatabase();
  if (current.demo) {
    const { seedDemo } = await import("../../drizzle/seed");
    await seedDemo();
  }
  const server = createServer(createEdge(current, build, before));
  server.keepAliveTimeout = 65_000;
  server.headersTimeout = 66_000;
  server.requestTimeout = 120_000;
  await listen(server, current.port, current.host);
  if (current.demo) {
    const { keepFirstRun } = await import("../../drizzle/seed");
    keepFirstRun(stopping).catch((error: unknown) => log.warn({ event: "firstRunNotKept", error: String(error) }));
  }
  log.info({
    event: "started",
    origin: current.origin,
    demo: current.demo,
    mail: current.mail === "mailbox" ? "mailbox" : "smtp",
  });
  return {
    address: current.origin,
    async stop() {
      announceStop();
      const closed = new Promise<void>((resolve) => server.close(() => resolve()));
      server.closeIdleConnections();
      const timer = setTimeout(() => server.closeAllConnections(), grace);
      await closed;
      clearTimeout(timer);
      await Promise.race([finishMails(), sleep(mailGrace, undefined, { ref: false })]);
      await closeDatabase();
      log.info({ event: "stopped" });
    },
  };
}

function listen(server: Server, port: number, host: string): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once("error", (error: NodeJS.ErrnoException) =>
      reject(
        error.code === "EADDRINUSE"
          ? new SettingsError(`PORT ${port} is taken by another program; set PORT to a free one.`)
          : error,
      ),
    );
    server.listen(port, host, resolve);
  });
}

/**
 * Runs until it is told to stop.
 * @throws SettingsError for a setting that cannot be used
 */
export async function run(build: ServerBuild | (() => Promise<ServerBuild>), before?: RequestHandler): Promise<void> {
  const running = await start(build, before);
  process.stdout.write(`Demilune${settings().demo ? " (demo)" : ""} is ready at ${running.address}\n`);
  const stop = () => {
    setTimeout(() => process.exit(1), 15_000).unref();
    running.stop().then(() => process.exit(0));
  };
  process.once("SIGTERM", stop);
  process.once("SIGINT", stop);
}

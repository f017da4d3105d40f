/**
 * The edge: what every request passes before React Router sees it. The rules are plain functions; Express only
 * strings them together.
 */
import { createHash, randomBytes } from "node:crypto";
import type { IncomingHttpHeaders } from "node:http";
import { join } from "node:path";
import { createRequestHandler } from "@react-router/express";
import compression from "compression";
import express, { type NextFunction, type Request, type RequestHandler, type Response } from "express";
import { RateLimiterMemory } from "rate-limiter-flexible";
import { RouterContextProvider, type ServerBuild } from "react-router";
import { requestContext } from "~/services/context.server";
import { stopping } from "~/services/lifetime.server";
import { limits } from "~/services/limits.server";
import { log } from "~/services/log.server";
import { projectFolder, type Settings } from "~/services/settings.server";
import { contentPolicy, fixedHeaders, isSharePath, shareHeaders, workerPolicy } from "./headers";

const unsafe = (method: string) => !["GET", "HEAD", "OPTIONS"].includes(method);

/**
 * Whether an unsafe request comes from our own pages. A browser says so in `Sec-Fetch-Site`; one that does not send it
 * names the page's origin. Nothing at all is refused. A bearer token without any cookie is no browser's doing.
 */
function isOwnRequest(headers: IncomingHttpHeaders, ownOrigin: string): boolean {
  if (headers.authorization?.startsWith("Bearer ") && !headers.cookie) return true;
  const site = headers["sec-fetch-site"];
  return site === undefined ? headers.origin === ownOrigin : site === "same-origin";
}

/** Paths that take files; everything else takes forms. */
const bodyCeiling = (path: string) =>
  /^\/lab\/[^/]+\/measurements(\/|$)/.test(path) ? limits.body.upload : limits.body.usual;

/** The path as it may be logged: without its query, and without the secret of a share link. */
const loggedPath = (url: string) => url.split("?", 1)[0].replace(/^\/s\/[^/]+/, "/s/…");

/** Refuses with one plain sentence; these are not pages people come to. */
function refuse(request: Request, response: Response, status: number, event: string, reason: string) {
  log.warn({
    event,
    reqId: response.locals.id,
    ip: request.ip,
    method: request.method,
    path: loggedPath(request.path),
    status,
  });
  response.status(status).type("text/plain").send(`${reason}\n`);
}

function limitRequests(perMinute: number): RequestHandler {
  const limiter = (factor: number) => new RateLimiterMemory({ points: perMinute * factor, duration: 60 });
  const visitors = limiter(limits.requests.visitor);
  const sessions = limiter(limits.requests.session);
  const addresses = limiter(limits.requests.address);
  return async (request, response, next) => {
    const address = request.ip ?? "";
    // A made-up cookie gives a fresh counter of its own; the one for all of an address still counts.
    const cookie = /(?:^|; )(?:__Host-)?sid=([^;]+)/.exec(request.headers.cookie ?? "")?.[1];
    try {
      await addresses.consume(address);
      if (cookie) await sessions.consume(address + createHash("sha256").update(cookie).digest("base64"));
      else await visitors.consume(address);
      next();
    } catch {
      response.set("Retry-After", "60");
      refuse(request, response, 429, "rateLimited", "Too many requests; wait a minute and try again.");
    }
  };
}

/**
 * The Express application.
 * @param build the React Router build, or a function that gives the present one (development)
 * @param before middleware that answers first (the development server's)
 */
export function createEdge(
  settings: Settings,
  build: ServerBuild | (() => Promise<ServerBuild>),
  before?: RequestHandler,
): express.Express {
  const edge = express();
  edge.disable("x-powered-by");
  edge.set("trust proxy", settings.trustedProxies);
  const development = before !== undefined;

  edge.use((request, response, next) => {
    const started = performance.now();
    response.locals.id = randomBytes(8).toString("hex");
    response.set({ ...fixedHeaders(settings.secure), "X-Request-Id": response.locals.id });
    if (isSharePath(request.path)) response.set(shareHeaders);
    response.on("finish", () =>
      log.info({
        event: "request",
        reqId: response.locals.id,
        ip: request.ip,
        method: request.method,
        path: loggedPath(request.originalUrl),
        status: response.statusCode,
        ms: Math.round(performance.now() - started),
      }),
    );
    next();
  });

  edge.get("/healthz", (_request, response) => {
    response
      .status(stopping.aborted ? 503 : 200)
      .set("Cache-Control", "no-store")
      .json({ status: stopping.aborted ? "stopping" : "ok" });
  });

  edge.use((request, response, next) => {
    // Only the configured origin counts; a proxy's opinion of the host does not.
    delete request.headers["x-forwarded-host"];
    const origin = `${request.protocol}://${request.headers.host}`;
    if (!settings.origins.includes(origin))
      return refuse(
        request,
        response,
        421,
        "hostRefused",
        `This server answers for ${settings.origin} only${settings.secure && request.protocol !== "https" ? ", and over https only" : ""}.`,
      );
    if (request.method === "TRACE")
      return refuse(request, response, 405, "methodRefused", "TRACE is not answered here.");
    next();
  });

  const clientFolder = join(projectFolder, "build/client");
  if (before) edge.use(before);
  else {
    edge.use(compression());
    edge.use("/assets", (request, response, next) => {
      if (/\.worker-[\w-]+\.js$/.test(request.path)) response.set("Content-Security-Policy", workerPolicy);
      next();
    });
    edge.use(
      "/assets",
      express.static(join(clientFolder, "assets"), { immutable: true, maxAge: "1y", redirect: false }),
    );
    edge.use("/assets", (_request: Request, response: Response) => {
      response.status(404).type("text/plain").send("No such file.\n");
    });
    edge.use(express.static(clientFolder, { maxAge: "1h", index: false, redirect: false }));
  }

  edge.use(limitRequests(settings.requestsPerMinute));
  edge.use((request, response, next) => {
    if (!unsafe(request.method)) return next();
    if (!isOwnRequest(request.headers, `${request.protocol}://${request.headers.host}`))
      return refuse(request, response, 403, "crossSiteRefused", "This request did not come from a page of this site.");
    const ceiling = bodyCeiling(request.path);
    const isTooLong = Number(request.headers["content-length"] ?? 0) > ceiling;
    // What is refused is not read either; the connection ends with the answer.
    if (isTooLong || request.headers["transfer-encoding"]) response.set("Connection", "close");
    if (request.headers["transfer-encoding"])
      return refuse(request, response, 411, "bodyRefused", "Say how long the body is (Content-Length).");
    if (isTooLong) return refuse(request, response, 413, "bodyRefused", `At most ${ceiling} bytes are taken here.`);
    next();
  });

  edge.use((_request, response, next) => {
    response.set("Cache-Control", "private, no-store");
    response.locals.nonce = development ? undefined : randomBytes(16).toString("base64");
    if (!development) response.set("Content-Security-Policy", contentPolicy(response.locals.nonce));
    next();
  });
  edge.use(
    createRequestHandler({
      build,
      getLoadContext(request, response) {
        const context = new RouterContextProvider();
        context.set(requestContext, {
          id: response.locals.id,
          nonce: response.locals.nonce,
          address: request.ip ?? "",
        });
        return context;
      },
    }),
  );
  edge.use((error: unknown, _request: Request, response: Response, next: NextFunction) => {
    log.error({
      event: "defect",
      reqId: response.locals.id,
      error: error instanceof Error ? error.stack : String(error),
    });
    if (response.headersSent) return next(error);
    response.status(500).type("text/plain").send(`Something went wrong on our side (request ${response.locals.id}).\n`);
  });
  return edge;
}

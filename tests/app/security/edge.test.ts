/** The edge, over real sockets against the built server. Requirements: OWASP ASVS 5.0.0, numbers beside the tests. */
import { readdirSync } from "node:fs";
import { type IncomingMessage, request } from "node:http";
import { connect } from "node:net";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { freePort, type RunningServer, startServer } from "../../support/server";

interface Answer {
  status: number;
  headers: IncomingMessage["headers"];
  text: string;
}

/** Sends exactly these headers, which `fetch` would not. */
function send(
  port: number,
  method: string,
  path: string,
  headers: Record<string, string>,
  body?: string,
): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const sent = request({ host: "127.0.0.1", port, method, path, headers, setHost: false }, (response) => {
      let text = "";
      response.setEncoding("utf8").on("data", (chunk) => {
        text += chunk;
      });
      response.on("end", () => resolve({ status: response.statusCode!, headers: response.headers, text }));
    });
    sent.on("error", reject).end(body);
  });
}

let server: RunningServer;
let port: number;
let host: string;

beforeAll(async () => {
  server = await startServer();
  host = new URL(server.origin).host;
  port = Number(new URL(server.origin).port);
});
afterAll(() => server.stop());

describe("the host", () => {
  it.each(["elsewhere.example", "localhost", "localhost:1", "localhost.elsewhere.example"])(
    "refuses %s (421)",
    async (name) => {
      expect((await send(port, "GET", "/", { host: name })).status).toBe(421);
    },
  );

  it("answers under every name of this machine", async () => {
    for (const name of ["localhost", "127.0.0.1"])
      expect((await send(port, "GET", "/", { host: `${name}:${port}` })).status).toBe(200);
  });

  it("takes no other host from a proxy's header (4.1.3)", async () => {
    const answer = await send(port, "GET", "/account", {
      host,
      "x-forwarded-host": "elsewhere.example",
      "x-forwarded-proto": "https",
    });
    expect(answer.status).toBe(303);
    expect(JSON.stringify(answer.headers)).not.toContain("elsewhere");
  });

  it("answers the health check under any name", async () => {
    expect(await send(port, "GET", "/healthz", { host: "10.0.0.7" })).toMatchObject({
      status: 200,
      text: '{"status":"ok"}',
    });
  });
});

describe("headers", () => {
  const asset = () => `/assets/${readdirSync("build/client/assets").find((name) => name.endsWith(".css"))}`;

  it.each([
    ["a page", () => "/"],
    ["a missing page", () => "/no/such/page"],
    ["a file", asset],
    ["a file without a hash", () => "/favicon.svg"],
    ["a missing file", () => "/assets/missing.js"],
    ["the health check", () => "/healthz"],
  ])("are on %s (3.4.4, 3.4.5)", async (_name, path) => {
    const { headers } = await send(port, "GET", path(), { host });
    expect(headers).toMatchObject({
      "x-content-type-options": "nosniff",
      "referrer-policy": "same-origin",
      "cross-origin-opener-policy": "same-origin",
      "x-request-id": expect.stringMatching(/^[0-9a-f]{16}$/),
    });
    expect(headers).not.toHaveProperty("x-powered-by");
    expect(headers).not.toHaveProperty("strict-transport-security");
  });

  it.each(["/", "/no/such/page", "/lab/none"])(
    "hold %s to a content policy with a nonce of its own (3.4.3)",
    async (path) => {
      const policies = [];
      for (const _turn of [1, 2]) {
        const { headers, text, status } = await send(port, "GET", path, { host });
        const policy = String(headers["content-security-policy"]);
        const nonce = /script-src 'nonce-([^']+)' 'strict-dynamic'/.exec(policy)![1];
        expect(Buffer.from(nonce, "base64")).toHaveLength(16);
        for (const directive of [
          "object-src 'none'",
          "base-uri 'none'",
          "frame-ancestors 'none'",
          "form-action 'self'",
        ])
          expect(policy).toContain(directive);
        const scripts = [...text.matchAll(/<script[^>]*>/g)].map(([tag]) => tag);
        if (status !== 303) expect(scripts.length).toBeGreaterThan(0);
        for (const script of scripts) expect(script).toContain(`nonce="${nonce}"`);
        policies.push(policy);
      }
      expect(policies[0]).not.toBe(policies[1]);
    },
  );

  it("let hashed files be kept for a year and pages not at all (14.3.2)", async () => {
    expect((await send(port, "GET", asset(), { host })).headers["cache-control"]).toBe(
      "public, max-age=31536000, immutable",
    );
    const page = await send(port, "GET", "/", { host });
    expect(page.headers["cache-control"]).toBe("private, no-store");
    expect(page.headers["content-type"]).toBe("text/html; charset=utf-8");
  });

  it("let a worker's script run WebAssembly, and no page", async () => {
    // The rule goes by the name, so it holds for a script that is not there as well.
    const { headers } = await send(port, "GET", "/assets/some.worker-Ab1_2-c.js", { host });
    expect(headers["content-security-policy"]).toContain("script-src 'self' 'wasm-unsafe-eval'");
    for (const path of ["/", "/assets/worker.js"]) {
      const policy = (await send(port, "GET", path, { host })).headers["content-security-policy"] ?? "";
      expect(policy).not.toContain("unsafe-eval");
    }
  });

  it("compress what is long", async () => {
    const { headers } = await send(port, "GET", asset(), { host, "accept-encoding": "gzip" });
    expect(headers["content-encoding"]).toBe("gzip");
  });

  it.each([
    "/../package.json",
    "/assets/..%2f..%2f..%2fpackage.json",
    "/.git/config",
    "/assets/",
    "/build/server/index.js",
  ])("serve nothing at %s (13.4)", async (path) => {
    const answer = await send(port, "GET", path, { host });
    expect(answer.status).toBeGreaterThanOrEqual(400);
    expect(answer.text).not.toContain("devDependencies");
  });
});

describe("unsafe requests (3.5.1)", () => {
  const form = { "content-type": "application/x-www-form-urlencoded" };
  const post = (path: string, headers: Record<string, string>) =>
    send(port, "POST", path, { host, ...form, "content-length": "10", ...headers }, "theme=dark");

  // A page's route, its data, and a resource route, which React Router itself would let through.
  describe.each(["/sign-in", "/sign-in.data", "/theme"])("to %s", (path) => {
    const origin = () => server.origin;
    it.each([
      ["with no signal at all", () => ({})],
      ["from another origin", () => ({ origin: "https://elsewhere.example" })],
      ["from an opaque origin", () => ({ origin: "null" })],
      ["from our origin over another scheme", () => ({ origin: origin().replace("http:", "https:") })],
      ["that a browser calls cross-site", () => ({ origin: origin(), "sec-fetch-site": "cross-site" })],
      ["that a browser calls same-site", () => ({ origin: origin(), "sec-fetch-site": "same-site" })],
      ["with a bearer token beside a cookie", () => ({ authorization: "Bearer x", cookie: "sid=x" })],
    ])("%s are refused", async (_name, headers) => {
      expect((await post(path, headers() as Record<string, string>)).status).toBe(403);
    });

    it.each([
      ["from our own page", () => ({ origin: origin() })],
      ["that a browser calls same-origin", () => ({ origin: origin(), "sec-fetch-site": "same-origin" })],
      ["with a bearer token and no cookie", () => ({ authorization: "Bearer x" })],
    ])("%s are let through", async (_name, headers) => {
      const { status } = await post(path, headers() as Record<string, string>);
      expect(status).not.toBe(403);
      expect(status).toBeLessThan(500);
    });
  });

  it.each(["PUT", "PATCH", "DELETE"])("%s counts as unsafe too", async (method) => {
    expect((await send(port, method, "/theme", { host })).status).toBe(403);
  });

  it("may not be too long, nor of unknown length", async () => {
    const own = { host, origin: server.origin, ...form };
    expect((await send(port, "POST", "/theme", { ...own, "content-length": "1048577" })).status).toBe(413);
    expect((await send(port, "POST", "/theme", { ...own, "transfer-encoding": "chunked" }, "theme=dark")).status).toBe(
      411,
    );
  });
});

describe("over https, behind a proxy", () => {
  it("marks cookies __Host-, Secure, HttpOnly and Lax, and asks for https from now on (3.3, 3.4.1)", async () => {
    const behind = await freePort();
    const secure = await startServer({
      PORT: String(behind),
      DEMO: "off",
      APP_ORIGIN: "https://demilune.example",
      MAIL_URL: "smtp://127.0.0.1:1",
      TRUST_PROXY: "1",
    });
    const proxied = { host: "demilune.example", "x-forwarded-proto": "https", "x-forwarded-for": "192.0.2.1" };
    const form = { origin: "https://demilune.example", "content-type": "application/x-www-form-urlencoded" };
    const asked = await send(
      behind,
      "POST",
      "/sign-in",
      { ...proxied, ...form, "content-length": "33" },
      "email=somebody%40demilune.example",
    );
    expect(asked.status).toBe(303);
    expect(asked.headers["strict-transport-security"]).toBe("max-age=31536000; includeSubDomains");
    const cookie = String(asked.headers["set-cookie"]);
    for (const part of ["__Host-login=", "Path=/", "Secure", "HttpOnly", "SameSite=Lax"])
      expect(cookie).toContain(part);
    expect(cookie).not.toContain("Domain");
    // The same request without TLS in front, and the demo's doors, which are not there.
    expect((await send(behind, "GET", "/", { ...proxied, "x-forwarded-proto": "http" })).status).toBe(421);
    expect((await send(behind, "GET", "/mailbox", proxied)).status).toBe(404);
    expect(
      (await send(behind, "POST", "/demo", { ...proxied, ...form, "content-length": "10" }, "role=owner")).status,
    ).toBe(404);
    await secure.stop();
  });
});

describe("too many requests", () => {
  it("are answered 429 with the time to wait, files and health apart; a made-up session gives no fresh start", async () => {
    const small = await startServer({ REQUESTS_PER_MINUTE: "10" });
    const at = Number(new URL(small.origin).port);
    const ask = (path: string, headers = {}) => send(at, "GET", path, { host: `localhost:${at}`, ...headers });
    const statuses = [];
    for (let turn = 0; turn < 12; turn++) statuses.push((await ask("/sign-in")).status);
    expect(statuses).toEqual([...Array(10).fill(200), 429, 429]);
    expect((await ask("/sign-in")).headers["retry-after"]).toBe("60");
    expect((await ask("/healthz")).status).toBe(200);
    expect((await ask("/favicon.svg")).status).toBe(200);
    const made = [];
    for (let turn = 0; turn < 120; turn++) made.push((await ask("/theme", { cookie: `sid=${turn}` })).status);
    expect(made).toContain(429);
    await small.stop();
  });
});

describe("the end", () => {
  it("comes with code 0 after SIGTERM, though a request hangs", async () => {
    const ending = await startServer();
    const at = Number(new URL(ending.origin).port);
    const socket = connect(at, "127.0.0.1");
    socket.on("error", () => {});
    socket.write(
      `POST /theme HTTP/1.1\r\nhost: localhost:${at}\r\norigin: ${ending.origin}\r\ncontent-length: 10\r\n\r\nth`,
    );
    await new Promise((resolve) => setTimeout(resolve, 200));
    // A server that waited for the request would be ended by its own last resort, with code 1.
    expect(await ending.stop()).toBe(0);
    socket.destroy();
  });
});

/** Runs the built application as a process of its own, with data in a temporary folder. */
import { type ChildProcess, spawn } from "node:child_process";
import { mkdtempSync, rmSync } from "node:fs";
import { type AddressInfo, createServer } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";

export interface RunningServer {
  origin: string;
  dataFolder: string;
  process: ChildProcess;
  /** Everything printed so far. */
  output(): string;
  /** Asks it to end; resolves with its exit code. */
  stop(): Promise<number | null>;
}

/** A port nobody listens on at this moment. */
export function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer().once("error", reject);
    probe.listen(0, "127.0.0.1", () => {
      const { port } = probe.address() as AddressInfo;
      probe.close(() => resolve(port));
    });
  });
}

/** Starts the built server and waits until it says that it is ready. */
export async function startServer(settings: Record<string, string> = {}): Promise<RunningServer> {
  const port = settings.PORT ?? String(await freePort());
  const dataFolder = settings.DATA_DIR ?? mkdtempSync(join(tmpdir(), "demilune-test-"));
  const child = spawn(process.execPath, ["app/server/serve.mjs"], {
    env: {
      PATH: process.env.PATH,
      NODE_ENV: "production",
      DEMO: "on",
      LOG_LEVEL: "info",
      REQUESTS_PER_MINUTE: "100000",
      ...settings,
      PORT: port,
      DATA_DIR: dataFolder,
    },
    stdio: ["ignore", "pipe", "pipe"],
  });
  let printed = "";
  const ended = new Promise<number | null>((resolve) => child.once("exit", resolve));
  const origin = await new Promise<string>((resolve, reject) => {
    const read = (chunk: Buffer) => {
      printed += chunk;
      const ready = /is ready at (\S+)/.exec(printed);
      if (ready) resolve(ready[1]);
    };
    child.stdout.on("data", read);
    child.stderr.on("data", read);
    ended.then((code) => reject(new Error(`The server ended with ${code}:\n${printed}`)));
  });
  return {
    origin,
    dataFolder,
    process: child,
    output: () => printed,
    async stop() {
      child.kill("SIGTERM");
      const code = await ended;
      if (!settings.DATA_DIR) rmSync(dataFolder, { recursive: true, force: true });
      return code;
    },
  };
}

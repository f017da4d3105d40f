/** Worker threads for what is computed on the server. The threads know neither database nor secrets. */
import { availableParallelism } from "node:os";
import { join } from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { Piscina } from "piscina";
import { stopping } from "~/services/lifetime.server";
import { log } from "~/services/log.server";
import { projectFolder } from "~/services/settings.server";
import type { SolveOutcome, SolveTask } from "./solve.worker";

/** Longest time of one run, ms. */
const timeLimit = 120_000;
/** After a polite request to stop the thread has this long before it is ended, ms. */
const grace = 1000;

export type PoolOutcome =
  | SolveOutcome
  | { ok: false; code: "busy" | "cancelled" | "timeLimit" | "memory" | "defect"; message: string };

// Development reloads modules; there must be one pool.
const kept = globalThis as typeof globalThis & { demilunePool?: Piscina };

function pool(): Piscina {
  if (kept.demilunePool) return kept.demilunePool;
  const threads = Math.max(1, availableParallelism() - 1);
  const fresh = new Piscina({
    filename: join(projectFolder, import.meta.env.DEV ? "app/queue/solve.worker.ts" : "build/server/solve.worker.js"),
    // The built server runs plain JavaScript; development runs the sources through tsx.
    execArgv: import.meta.env.DEV ? ["--import", "tsx"] : [],
    minThreads: threads,
    maxThreads: threads,
    niceIncrement: 10,
    maxQueue: 4 * threads,
    env: {},
    resourceLimits: { maxOldGenerationSizeMb: 512, stackSizeMb: 4 },
  });
  fresh.on("error", (error: Error) => log.error({ event: "poolError", error: error.message }));
  stopping.addEventListener("abort", () => void fresh.destroy(), { once: true });
  kept.demilunePool = fresh;
  return fresh;
}

const words = {
  busy: "The server has as many runs waiting as it takes; try again in a moment.",
  cancelled: "The run was stopped.",
  timeLimit: `The run took longer than ${timeLimit / 1000} s and was stopped.`,
  memory: "The run needed more memory than it may have; ask for fewer mesh nodes or frequencies.",
  defect: "The run ended by a defect of the program, which has been logged.",
} as const;

const failed = (code: keyof typeof words) => ({ ok: false, code, message: words[code] }) as const;

/**
 * Solve a document in a thread.
 *
 * @param cancelled the caller's own reason to stop, such as a request that was closed
 */
export async function solveInPool(document: unknown, cancelled?: AbortSignal): Promise<PoolOutcome> {
  const cancel = new SharedArrayBuffer(4);
  const limit = AbortSignal.timeout(timeLimit);
  const stop = AbortSignal.any([limit, ...(cancelled ? [cancelled] : [])]);
  const end = new AbortController();
  const askToStop = async () => {
    Atomics.store(new Int32Array(cancel), 0, 1);
    await sleep(grace, undefined, { ref: false });
    end.abort();
  };
  stop.addEventListener("abort", askToStop, { once: true });
  if (stop.aborted) return failed("cancelled");
  try {
    const task: SolveTask = { document, cancel };
    const outcome: SolveOutcome = await pool().run(task, { signal: end.signal });
    if (stop.aborted) return failed(limit.aborted ? "timeLimit" : "cancelled");
    return outcome;
  } catch (error) {
    if (stop.aborted) return failed(limit.aborted ? "timeLimit" : "cancelled");
    if (!(error instanceof Error)) throw error;
    if (/queue is at limit/.test(error.message)) return failed("busy");
    if ("code" in error && error.code === "ERR_WORKER_OUT_OF_MEMORY") return failed("memory");
    log.error({ event: "runFailed", error: error.stack });
    return failed("defect");
  } finally {
    stop.removeEventListener("abort", askToStop);
  }
}

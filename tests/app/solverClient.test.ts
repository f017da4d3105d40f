import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { SolverClient, type WorkerLike } from "~/workers/solverClient";
import type { SolveAnswer, SolveRequest } from "~/workers/solverMessages";

/** A worker whose answers the test gives by hand. */
class ScriptedWorker implements WorkerLike {
  onmessage: WorkerLike["onmessage"] = null;
  onerror: WorkerLike["onerror"] = null;
  readonly requests: SolveRequest[] = [];
  ended = false;
  postMessage(request: unknown) {
    this.requests.push(request as SolveRequest);
  }
  terminate() {
    this.ended = true;
  }
  answer(sequence: number) {
    const data: SolveAnswer = { kind: "refused", sequence, milliseconds: 1, faults: [] };
    this.onmessage?.call(this as unknown as Worker, new MessageEvent("message", { data }));
  }
}

describe("the client of the solver worker", () => {
  let workers: ScriptedWorker[];
  let answers: number[];
  const start = () =>
    new SolverClient(
      () => {
        workers.push(new ScriptedWorker());
        return workers[workers.length - 1];
      },
      ({ sequence }) => answers.push(sequence),
    );

  beforeEach(() => {
    workers = [];
    answers = [];
    vi.useFakeTimers();
  });
  afterEach(() => vi.useRealTimers());

  it("passes on answers to the latest document only", () => {
    const client = start();
    client.solve("one", 0);
    client.solve("two", 0);
    workers[0].answer(1);
    expect(answers).toEqual([]);
    workers[0].answer(2);
    expect(answers).toEqual([2]);
  });

  it("replaces a worker that is stuck while a newer document waits, and asks again", () => {
    const client = start();
    client.solve("one", 0);
    client.solve("two", 0);
    vi.advanceTimersByTime(3000);
    expect(workers[0].ended).toBe(true);
    expect(workers[1].requests.map(({ document }) => document)).toEqual(["two"]);
    workers[1].answer(2);
    expect(answers).toEqual([2]);
  });

  it("lets a long solve end while nothing newer waits", () => {
    start().solve("one", 0);
    vi.advanceTimersByTime(60_000);
    expect(workers[0].ended).toBe(false);
  });
});

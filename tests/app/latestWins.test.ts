import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { LatestWins, type NumberedRequest, type WorkerLike } from "~/workers/latestWins";

/** A worker whose answers the test gives by hand. */
class ScriptedWorker implements WorkerLike {
  onmessage: WorkerLike["onmessage"] = null;
  onerror: WorkerLike["onerror"] = null;
  readonly requests: (NumberedRequest & { document: string })[] = [];
  ended = false;
  postMessage(request: unknown) {
    this.requests.push(request as NumberedRequest & { document: string });
  }
  terminate() {
    this.ended = true;
  }
  answer(sequence: number) {
    this.onmessage?.call(this as unknown as Worker, new MessageEvent("message", { data: { sequence } }));
  }
}

describe("the client of a worker", () => {
  let workers: ScriptedWorker[];
  let answers: number[];
  const start = () =>
    new LatestWins<{ document: string }, NumberedRequest>(
      () => {
        workers.push(new ScriptedWorker());
        return workers[workers.length - 1];
      },
      ({ sequence }) => answers.push(sequence),
      () => answers.push(-1),
    );

  beforeEach(() => {
    workers = [];
    answers = [];
    vi.useFakeTimers();
  });
  afterEach(() => vi.useRealTimers());

  it("passes on answers to the latest document only", () => {
    const client = start();
    client.ask({ document: "one" });
    client.ask({ document: "two" });
    workers[0].answer(1);
    expect(answers).toEqual([]);
    workers[0].answer(2);
    expect(answers).toEqual([2]);
  });

  it("replaces a worker that is stuck while a newer document waits, and asks again", () => {
    const client = start();
    client.ask({ document: "one" });
    client.ask({ document: "two" });
    vi.advanceTimersByTime(3000);
    expect(workers[0].ended).toBe(true);
    expect(workers[1].requests.map(({ document }) => document)).toEqual(["two"]);
    workers[1].answer(2);
    expect(answers).toEqual([2]);
  });

  it("lets a long solve end while nothing newer waits", () => {
    start().ask({ document: "one" });
    vi.advanceTimersByTime(60_000);
    expect(workers[0].ended).toBe(false);
  });
});

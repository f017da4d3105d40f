import type { SolveAnswer, SolveRequest } from "./solverMessages";

/** A worker that stays silent for so long while a newer document waits is stuck in an old one, ms. */
const patience = 3000;

/** What the client needs of a Web Worker. */
export type WorkerLike = Pick<Worker, "postMessage" | "terminate" | "onmessage" | "onerror">;

/** Talks to one solver worker: the latest document wins, late answers are dropped, a stuck worker is replaced. */
export class SolverClient {
  private worker: WorkerLike;
  private latest: SolveRequest | null = null;
  private outstanding = false;
  private timer: ReturnType<typeof setTimeout> | undefined;

  constructor(
    private readonly createWorker: () => WorkerLike,
    private readonly onAnswer: (answer: SolveAnswer) => void,
  ) {
    this.worker = this.connect();
  }

  solve(document: unknown, shown: number): void {
    this.latest = { sequence: (this.latest?.sequence ?? 0) + 1, document, shown };
    this.worker.postMessage(this.latest);
    if (this.outstanding) this.timer ??= setTimeout(() => this.replace(), patience);
    this.outstanding = true;
  }

  close(): void {
    clearTimeout(this.timer);
    this.worker.terminate();
  }

  private connect(): WorkerLike {
    const worker = this.createWorker();
    worker.onmessage = ({ data }: MessageEvent<SolveAnswer>) => {
      clearTimeout(this.timer);
      this.timer = undefined;
      if (data.sequence !== this.latest?.sequence) return;
      if (data.kind !== "partly") this.outstanding = false;
      this.onAnswer(data);
    };
    worker.onerror = (event: ErrorEvent) => {
      this.outstanding = false;
      const message = event.message || "The solver could not be loaded.";
      this.onAnswer({ kind: "defect", sequence: this.latest?.sequence ?? 0, milliseconds: 0, message });
    };
    return worker;
  }

  private replace(): void {
    this.timer = undefined;
    this.worker.terminate();
    this.worker = this.connect();
    this.worker.postMessage(this.latest);
  }
}

/** A worker that stays silent for so long while something newer waits is stuck in what is old, ms. */
const patience = 3000;

/** What the client needs of a Web Worker. */
export type WorkerLike = Pick<Worker, "postMessage" | "terminate" | "onmessage" | "onerror">;

export interface NumberedRequest {
  /** Counts up; an answer with a lower number than the last request is out of date. */
  sequence: number;
}

export interface NumberedAnswer {
  sequence: number;
  /** More of the same answer follows. */
  more?: boolean;
}

/** Talks to one worker: the latest request wins, late answers are dropped, a stuck worker is replaced. */
export class LatestWins<Question extends object, Answer extends NumberedAnswer> {
  private worker: WorkerLike;
  private latest: (Question & NumberedRequest) | null = null;
  private outstanding = false;
  private timer: ReturnType<typeof setTimeout> | undefined;

  constructor(
    private readonly createWorker: () => WorkerLike,
    private readonly onAnswer: (answer: Answer) => void,
    private readonly onDefect: (message: string) => void,
  ) {
    this.worker = this.connect();
  }

  ask(question: Question): void {
    this.latest = { ...question, sequence: (this.latest?.sequence ?? 0) + 1 };
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
    worker.onmessage = ({ data }: MessageEvent<Answer>) => {
      clearTimeout(this.timer);
      this.timer = undefined;
      if (data.sequence !== this.latest?.sequence) return;
      if (!data.more) this.outstanding = false;
      this.onAnswer(data);
    };
    worker.onerror = (event: ErrorEvent) => {
      this.outstanding = false;
      this.onDefect(event.message || "The solver could not be loaded.");
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

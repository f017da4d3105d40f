/** One thing wrong with a document: where, what, and what is allowed there. */
export interface Fault {
  /** Dotted, list indices from 0: "stack.layers.1.thicknessNm". */
  path: string;
  message: string;
  allowed: string;
}

/** The document cannot be solved as written, or the model refuses what is asked; carries every fault found. */
export class ScenarioError extends Error {
  readonly faults: readonly Fault[];

  constructor(faults: readonly Fault[]) {
    super(faults.map(faultLine).join("\n"));
    this.name = "ScenarioError";
    this.faults = faults;
  }
}

/** A fault in one line, as the commands write it. */
export function faultLine({ path, message, allowed }: Fault): string {
  return `${path}: ${message}; allowed: ${allowed}`.replaceAll(/\s+/g, " ");
}

/** Refuse a request: throws a ScenarioError with this one fault. */
export function refuse(path: string, message: string, allowed: string): never {
  throw new ScenarioError([{ path, message, allowed }]);
}

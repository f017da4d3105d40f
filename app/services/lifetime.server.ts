/** The process's life as seen from inside a request: long-lived answers end when `stopping` aborts. */
const kept = globalThis as typeof globalThis & { demiluneStop?: AbortController };
kept.demiluneStop ??= new AbortController();

export const stopping: AbortSignal = kept.demiluneStop.signal;
export const announceStop = () => kept.demiluneStop?.abort();

import type { NumberedRequest } from "./latestWins";

const channel = new MessageChannel();

/** Let messages that have arrived be handled. */
export const breath = () =>
  new Promise<void>((resolve) => {
    channel.port1.onmessage = () => resolve();
    channel.port2.postMessage(null);
  });

/**
 * The worker's side of `LatestWins`: one request at a time, always the newest.
 *
 * @param answer answers one request; it may ask between its steps, after a `breath()`, whether its request is still the newest
 */
export function serveLatest<Request extends NumberedRequest>(
  answer: (request: Request, isLatest: () => boolean) => void | Promise<void>,
): { asked: () => boolean } {
  let latest: Request | null = null;
  let running = false;
  self.onmessage = async ({ data }: MessageEvent<Request>) => {
    latest = data;
    if (running) return;
    running = true;
    for (let request = latest; ; request = latest) {
      await answer(request, () => latest === request);
      await breath();
      if (latest === request) break;
    }
    running = false;
  };
  return { asked: () => latest !== null };
}

import { PassThrough } from "node:stream";
import { createReadableStreamFromReadable } from "@react-router/node";
import { isbot } from "isbot";
import { renderToPipeableStream } from "react-dom/server";
import { type EntryContext, type HandleErrorFunction, type RouterContextProvider, ServerRouter } from "react-router";
import { requestContext } from "~/services/context.server";
import { log } from "~/services/log.server";

/** Deferred parts that are not there after this time are given up, in ms. */
export const streamTimeout = 10_000;

export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  routerContext: EntryContext,
  loadContext: RouterContextProvider,
): Promise<Response> {
  const { nonce, id } = loadContext.get(requestContext);
  return new Promise((resolve, reject) => {
    let started = false;
    const { pipe, abort } = renderToPipeableStream(
      <ServerRouter context={routerContext} url={request.url} nonce={nonce} />,
      {
        nonce,
        // People see the page grow; machines that index get it whole.
        [isbot(request.headers.get("user-agent")) ? "onAllReady" : "onShellReady"]() {
          started = true;
          const body = new PassThrough();
          headers.set("Content-Type", "text/html; charset=utf-8");
          resolve(new Response(createReadableStreamFromReadable(body), { status, headers }));
          pipe(body);
        },
        onShellError: reject,
        onError(error: unknown) {
          status = 500;
          if (started)
            log.error({
              event: "renderFailed",
              reqId: id,
              error: error instanceof Error ? error.stack : String(error),
            });
        },
      },
    );
    setTimeout(abort, streamTimeout + 1000).unref();
  });
}

export const handleError: HandleErrorFunction = (error, { request, context }) => {
  if (request.signal.aborted) return;
  log.error({
    event: "defect",
    reqId: context.get(requestContext).id,
    path: new URL(request.url).pathname,
    error: error instanceof Error ? error.stack : String(error),
  });
};

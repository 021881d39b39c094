// Streams a page with the response's nonce on every script, and reports what no page expected.
import { PassThrough } from "node:stream";
import { createReadableStreamFromReadable } from "@react-router/node";
import { isbot } from "isbot";
import { renderToPipeableStream } from "react-dom/server";
import {
  isRouteErrorResponse,
  RouterContextProvider,
  ServerRouter,
  type EntryContext,
  type HandleErrorFunction,
} from "react-router";
import { log, pathWithoutSecrets } from "~/services/log.server";
import { requestFactsContext, type RequestFacts } from "~/services/request.server";

export const streamTimeout = 10_000;

/** Called by the host for each request: the router's context with what only the host knows. */
export function createLoadContext(facts: RequestFacts): RouterContextProvider {
  const context = new RouterContextProvider();
  context.set(requestFactsContext, facts);
  return context;
}

export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  entry: EntryContext,
  context: RouterContextProvider,
): Promise<Response> {
  const { nonce } = context.get(requestFactsContext);
  return new Promise((resolve, reject) => {
    let shellRendered = false;
    let responseStatus = status;
    const ready = isbot(request.headers.get("User-Agent") ?? "") || entry.isSpaMode ? "onAllReady" : "onShellReady";
    const { pipe, abort } = renderToPipeableStream(<ServerRouter context={entry} url={request.url} nonce={nonce} />, {
      nonce,
      [ready]() {
        shellRendered = true;
        const body = new PassThrough();
        headers.set("Content-Type", "text/html; charset=utf-8");
        resolve(new Response(createReadableStreamFromReadable(body), { headers, status: responseStatus }));
        pipe(body);
      },
      onShellError: reject,
      onError(error: unknown) {
        responseStatus = 500;
        if (shellRendered) log.error({ err: error }, "rendering failed");
      },
    });
    setTimeout(abort, streamTimeout + 1_000).unref();
  });
}

/** A fault is logged; an answer such as 404, or a visitor who left, is none. */
export const handleError: HandleErrorFunction = (error, { request, context }) => {
  if (request.signal.aborted || isRouteErrorResponse(error)) return;
  const { requestId } = context.get(requestFactsContext);
  log.error({ err: error, requestId, path: pathWithoutSecrets(new URL(request.url).pathname) }, "request failed");
};

// Refuses what another site sends: the framework's own check covers neither resource routes nor requests without Origin.
import { data, type MiddlewareFunction } from "react-router";
import { config } from "~/config.server";

const SAFE_METHODS = new Set(["GET", "HEAD", "OPTIONS"]);

/** True for a request that changes something and does not come from our own pages. */
export function isForeign(request: Request, appUrl: string): boolean {
  if (SAFE_METHODS.has(request.method)) return false;
  const site = request.headers.get("Sec-Fetch-Site");
  if (site !== null) return site !== "same-origin";
  return request.headers.get("Origin") !== new URL(appUrl).origin;
}

export const refuseForeignOrigin: MiddlewareFunction<Response> = ({ request }) => {
  if (isForeign(request, config().appUrl)) throw data("Sent from another site", { status: 403 });
};

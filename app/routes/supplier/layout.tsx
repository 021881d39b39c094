// Lets in people of a supplier only.
import { Outlet } from "react-router";
import { onlyFor } from "~/services/request.server";
import type { Route } from "./+types/layout";

/** Middleware, because a guard in a layout's loader guards neither its children's loaders nor their actions. */
export const middleware: Route.MiddlewareFunction[] = [onlyFor("supplier")];

export default function Layout() {
  return <Outlet />;
}

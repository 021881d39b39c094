// The document of every page: theme, navigation, the error page, and the middleware every request passes.
import type { ReactNode } from "react";
import {
  isRouteErrorResponse,
  Links,
  Meta,
  Outlet,
  Scripts,
  ScrollRestoration,
  useRouteLoaderData,
} from "react-router";
import type { Route } from "./+types/root";
import "./app.css";
import { LinkButton } from "./components/button";
import { documentLinks } from "./components/document-links";
import { Page } from "./components/page";
import { ProductNav, type ProductNavUser } from "./components/product-nav";
import { ThemeContext } from "./components/theme-switch";
import { refuseForeignOrigin } from "./services/origin.server";
import { currentPerson, identify, noStore, refuseOtherBodies, requestFactsContext } from "./services/request.server";
import { readTheme } from "./services/theme.server";

export const middleware: Route.MiddlewareFunction[] = [refuseForeignOrigin, refuseOtherBodies, identify, noStore];

export const links: Route.LinksFunction = () => [
  ...documentLinks,
  { rel: "icon", href: "/mark.svg", type: "image/svg+xml" },
];

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = currentPerson(context);
  return {
    theme: await readTheme(request),
    nonce: context.get(requestFactsContext).nonce,
    user: person
      ? { name: person.name, role: person.role, organisation: person.organisationName, kind: person.organisationKind }
      : null,
  };
}

export const meta: Route.MetaFunction = () => [{ title: "Tenderband" }];

const BUYER_LINKS = [
  { to: "/open-points", label: "Open points" },
  { to: "/specifications", label: "Specifications" },
  { to: "/rfqs", label: "RFQs" },
  { to: "/suppliers", label: "Suppliers" },
  { to: "/organisation", label: "Organisation" },
];
const SUPPLIER_LINKS = [{ to: "/supplier/open-points", label: "Open points" }];

interface Navigation {
  readonly links: typeof BUYER_LINKS;
  readonly user?: ProductNavUser | undefined;
}

function navigationFor(user: (ProductNavUser & { kind: "buyer" | "supplier" }) | null | undefined): Navigation {
  if (!user) return { links: [] };
  return { links: user.kind === "buyer" ? BUYER_LINKS : SUPPLIER_LINKS, user };
}

export function Layout({ children }: { children: ReactNode }) {
  const data = useRouteLoaderData<typeof loader>("root");
  const theme = data?.theme ?? "system";
  return (
    <html lang="en" data-theme={theme === "system" ? undefined : theme}>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <meta name="color-scheme" content={theme === "system" ? "light dark" : theme} />
        <Meta />
        <Links nonce={data?.nonce} />
      </head>
      <body>
        <ThemeContext value={theme}>
          <ProductNav {...navigationFor(data?.user)} />
          {children}
        </ThemeContext>
        <ScrollRestoration nonce={data?.nonce} />
        <Scripts nonce={data?.nonce} />
      </body>
    </html>
  );
}

export default function App() {
  return <Outlet />;
}

const ANSWERS: Record<number, { title: string; help: string }> = {
  400: { title: "This request was not understood", help: "Go back, load the page again and repeat the step." },
  403: { title: "Your role does not allow this", help: "Ask a colleague whose role does, or an administrator." },
  404: {
    title: "Nothing is here",
    help: "The address may be mistyped, or what it named is not yours to see. Your open points list what is.",
  },
  409: { title: "This has changed meanwhile", help: "Load the page again to see how things stand now." },
  413: { title: "That was too large", help: "A file may have 64 MiB at most." },
};

const FOREIGN = {
  title: "This was sent from another page",
  help: "Only our own pages may send forms here. Load the page again and repeat the step.",
};

/** Says what happened and where to go on; never what went wrong inside. */
export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  const status = isRouteErrorResponse(error) ? error.status : 500;
  const isForeign = isRouteErrorResponse(error) && error.data === "Sent from another site";
  const answer = (isForeign ? FOREIGN : ANSWERS[status]) ?? {
    title: "This did not work",
    help: "The fault is ours and has been recorded. What was stored before this step is kept. Try again in a minute.",
  };
  return (
    <Page>
      <div className="mt-14 max-w-160">
        <p className="text-13 text-quiet">{status}</p>
        <h1 className="mt-1 text-24 font-bold">{answer.title}</h1>
        <p className="mt-3 mb-6">{answer.help}</p>
        <LinkButton to="/" kind="filled">
          Open points
        </LinkButton>
      </div>
    </Page>
  );
}

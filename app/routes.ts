// Every address of the product, by hand, grouped by area: the table of contents.
import { index, layout, prefix, route, type RouteConfig } from "@react-router/dev/routes";

export default [
  // Everybody
  index("routes/public/home.tsx"),
  route("health", "routes/public/health.tsx"),
  route("theme", "routes/public/theme.tsx"),
  route("sign-in", "routes/public/sign-in.tsx"),
  route("sign-out", "routes/public/sign-out.tsx"),
  route("forgotten-password", "routes/public/forgotten-password.tsx"),
  route("password-reset/:token", "routes/public/password-reset-link.tsx"),
  route("password-reset", "routes/public/password-reset.tsx"),
  route("invitation/:token", "routes/public/invitation-link.tsx"),
  route("invitation", "routes/public/invitation-accept.tsx"),

  // Anybody signed in
  layout("routes/account/layout.tsx", [
    route("account", "routes/account/account.tsx"),
    route("files/:fileId", "routes/api/file-download.tsx"),
    ...prefix("api/v1", [
      route("quotes/:quoteId/measurements", "routes/api/quote-measurements.tsx"),
      route("quotes/:quoteId/progress", "routes/api/quote-progress.tsx"),
      route("quotes/:quoteId/traces", "routes/api/quote-traces.tsx"),
      route("quotes/:quoteId/curves", "routes/api/quote-curves.tsx"),
      route("measurements/:measurementId", "routes/api/measurement.tsx"),
    ]),
  ]),

  // Buyer
  layout("routes/open-points/buyer-layout.tsx", [
    route("open-points", "routes/open-points/buyer.tsx"),
    ...prefix("specifications", [
      index("routes/specifications/specification-list.tsx"),
      route("new", "routes/specifications/specification-new.tsx"),
      route(":specificationId", "routes/specifications/specification.tsx"),
      route(":specificationId/edit", "routes/specifications/specification-edit.tsx"),
      route(":specificationId/revisions/:letter", "routes/specifications/specification-revision.tsx"),
    ]),
    ...prefix("rfqs", [
      index("routes/rfqs/rfq-list.tsx"),
      route("new", "routes/rfqs/rfq-new.tsx"),
      route(":rfqId", "routes/rfqs/rfq-overview.tsx"),
      route(":rfqId/edit", "routes/rfqs/rfq-edit.tsx"),
      route(":rfqId/invitations", "routes/rfqs/rfq-invitations.tsx"),
      route(":rfqId/comparison", "routes/rfqs/rfq-comparison.tsx"),
      route(":rfqId/decision", "routes/rfqs/rfq-decision.tsx"),
      route(":rfqId/history", "routes/rfqs/rfq-history.tsx"),
    ]),
    ...prefix("quotes/:quoteId", [
      index("routes/quotes/quote-results.tsx"),
      route("curves", "routes/quotes/quote-curves.tsx"),
      route("outlook", "routes/quotes/quote-outlook.tsx"),
      route("terms", "routes/quotes/quote-terms.tsx"),
      route("files", "routes/quotes/quote-files.tsx"),
    ]),
    route("suppliers", "routes/suppliers/supplier-list.tsx"),
    route("organisation", "routes/organisation/organisation.tsx"),
  ]),

  // Supplier
  layout("routes/supplier/layout.tsx", [
    ...prefix("supplier", [
      route("open-points", "routes/supplier/open-points.tsx"),
      route("invitations/:invitationId", "routes/supplier/invitation.tsx"),
      route("quotes/:quoteId", "routes/supplier/quote-data.tsx"),
      route("quotes/:quoteId/terms", "routes/supplier/quote-terms.tsx"),
      route("quotes/:quoteId/declarations", "routes/supplier/quote-declarations.tsx"),
      route("quotes/:quoteId/review", "routes/supplier/quote-review.tsx"),
      route("quotes/:quoteId/results", "routes/supplier/quote-results.tsx"),
    ]),
  ]),

  // The local mail sink's mailbox; not found where mail goes to a real server
  route("development/mailbox", "routes/development/mailbox.tsx"),
  route("development/mailbox/:mailId", "routes/development/mail.tsx"),

  route("*", "routes/public/not-found.tsx"),
] satisfies RouteConfig;

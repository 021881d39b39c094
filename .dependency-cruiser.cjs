/** Which folder may import which. Each rule says why; `npm run depcruise` checks it. */
const only = (name, from, allowed, comment) => ({
  name,
  comment,
  severity: "error",
  from: { path: from, pathNot: "^app/(root|entry\\.server|server|worker|start|create-administrator|routes)\\.tsx?$" },
  to: { path: "^(app|db|emails)/", pathNot: allowed },
});
const alone = (name, from, allowed, comment) => ({
  name,
  comment,
  severity: "error",
  from: { path: from },
  to: { pathNot: allowed },
});

module.exports = {
  forbidden: [
    alone(
      "rf-is-alone",
      "^app/rf/",
      "^app/rf/",
      "The numbers must run without the app: in a page, a worker, a notebook.",
    ),
    alone(
      "workflow-is-alone",
      "^app/workflow/",
      "^app/workflow/",
      "Who may do what, when, is decided without a database or a request.",
    ),
    alone(
      "commerce-is-alone",
      "^app/commerce/",
      "^(app/commerce/|node_modules/decimal\\.js/)",
      "Money is arithmetic, with decimals and nothing else.",
    ),
    only("forms", "^app/forms/", "^app/(forms|rf|workflow|commerce)/", "A schema runs in the browser too."),
    only(
      "components",
      "^app/components/",
      "^app/(components|forms|charts|workers|rf|workflow|commerce)/",
      "A part gets its data as props.",
    ),
    only("charts", "^app/charts/", "^app/(charts|components|rf|workflow|commerce)/", "A plot gets its data as props."),
    only(
      "workers",
      "^app/workers/",
      "^app/(workers|rf|commerce)/",
      "What runs in the browser's worker is the cores, and what it says is theirs.",
    ),
    only(
      "services",
      "^app/services/",
      "^(app/(services|forms|rf|workflow|commerce|config\\.server)|db|emails)",
      "A use case knows nothing of pages.",
    ),
    only(
      "jobs",
      "^app/jobs/",
      "^(app/(jobs|services|rf|workflow|commerce|config\\.server)|db|emails)",
      "A loop calls use cases; it draws nothing.",
    ),
    only(
      "routes",
      "^app/routes/",
      "^app/(routes/|components|charts|forms|rf|workflow|commerce|services|\\+types)",
      "A page asks a service; it never queries.",
    ),
    only(
      "db",
      "^db/(?!seeds/)",
      "^(db/|app/workflow/|app/rf/|app/config\\.server)",
      "Models know the shapes they store, and nothing else of the app.",
    ),
    only(
      "emails",
      "^emails/",
      "^(emails/|app/(rf|commerce|config\\.server))",
      "A template is a function of its props.",
    ),
    {
      name: "no-cycles",
      comment: "Two files that need each other are one file.",
      severity: "error",
      from: {},
      to: { circular: true },
    },
  ],
  options: {
    tsConfig: { fileName: "tsconfig.json" },
    tsPreCompilationDeps: true,
    doNotFollow: { path: "node_modules" },
    exclude: { path: "^\\.react-router/|^build/" },
  },
};

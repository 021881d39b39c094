// The host of the built pages: express, because react-router-serve sends assets without our headers and answers TRACE with 500.
import { randomBytes, randomUUID } from "node:crypto";
import { createServer, type Server } from "node:http";
import { isIP } from "node:net";
import path from "node:path";
import { pathToFileURL } from "node:url";
import { createRequestHandler } from "@react-router/express";
import compression from "compression";
import express, { type Express, type NextFunction, type Request, type Response } from "express";
import type { RouterContextProvider, ServerBuild } from "react-router";
import { config } from "./config.server";
import { securityHeaders } from "./security-headers.server";
import { log, pathWithoutSecrets } from "./services/log.server";
import type { RequestFacts } from "./services/request.server";

interface EntryWithContext {
  createLoadContext(facts: RequestFacts): RouterContextProvider;
}

const settings = config();
const development = settings.mode === "development";

/** Headers for every answer, and the nonce for this one. */
function prepareAnswer(request: Request, response: Response, next: NextFunction): void {
  const nonce = randomBytes(16).toString("base64");
  response.locals.nonce = nonce;
  response.locals.requestId = randomUUID();
  response.set(securityHeaders({ nonce, secure: settings.appUrl.startsWith("https://"), development }));
  // The adapter appends a route's headers: one that states a header of ours replaces it, and only cookies add up.
  const append = response.append.bind(response);
  response.append = (name, value) =>
    name.toLowerCase() !== "set-cookie" && response.hasHeader(name) ? response.set(name, value) : append(name, value);
  if (request.method === "TRACE" || request.method === "CONNECT") {
    response.status(405).type("text/plain").send("Method not allowed\n");
    return;
  }
  next();
}

const ownHosts = new Set([new URL(settings.appUrl).host, `127.0.0.1:${settings.port}`, `localhost:${settings.port}`]);

/** An unknown Host could be written into links or slip past the origin check. */
function refuseForeignHost(request: Request, response: Response, next: NextFunction): void {
  if (ownHosts.has(request.headers.host ?? "")) next();
  else response.status(421).type("text/plain").send("This server does not answer for that host\n");
}

function refuseMalformedAddress(request: Request, response: Response, next: NextFunction): void {
  try {
    if (decodeURIComponent(request.path).includes("\0") || request.originalUrl.length > 8_000) throw new URIError();
    next();
  } catch {
    response.status(400).type("text/plain").send("Malformed address\n");
  }
}

const LARGEST_FORM_BYTES = 2 * 1024 * 1024;
const TAKES_FILES = /^\/(api\/v1\/quotes\/[^/]+\/measurements|supplier\/quotes\/[^/]+)(\.data)?$/;

/** Every form but that of files is read into memory as a whole, so how large it is has to be said before, and kept to. */
function refuseLargeForm(request: Request, response: Response, next: NextFunction): void {
  const isUpload = TAKES_FILES.test(request.path) && request.is("multipart/form-data") !== false;
  if (isUpload || (Number(request.headers["content-length"] ?? 0) <= LARGEST_FORM_BYTES && !isChunked(request))) next();
  else response.status(413).type("text/plain").send("That was too large\n");
}

const isChunked = (request: Request): boolean => request.headers["transfer-encoding"] !== undefined;

function logRequest(request: Request, response: Response, next: NextFunction): void {
  const started = performance.now();
  response.on("finish", () => {
    const { requestId } = response.locals as { requestId: string };
    const milliseconds = Math.round(performance.now() - started);
    const { method } = request;
    const path = pathWithoutSecrets(request.path);
    log.info({ requestId, method, path, status: response.statusCode, milliseconds });
  });
  next();
}

/** The handler of a build, with what only this host knows of a request; made once, for it indexes all routes. */
function handlerOf(build: ServerBuild) {
  const entry = build.entry.module as unknown as EntryWithContext;
  return createRequestHandler({
    build,
    mode: settings.mode,
    getLoadContext: (request, response) => {
      const { nonce, requestId } = response.locals as { nonce: string; requestId: string };
      // What a proxy forwards need not be an address, and the column holds nothing else.
      return entry.createLoadContext({ nonce, requestId, ...(isIP(request.ip ?? "") > 0 ? { ip: request.ip } : {}) });
    },
  });
}

async function prepareHost(app: Express, host: Server): Promise<void> {
  app.disable("x-powered-by");
  app.set("trust proxy", "loopback");
  app.use(prepareAnswer, refuseForeignHost, refuseMalformedAddress);
  let load: () => Promise<ReturnType<typeof handlerOf>>;
  if (development) {
    const vite = await import("vite");
    const server = await vite.createServer({ server: { middlewareMode: true, ws: { server: host } } });
    app.use(server.middlewares);
    load = async () => handlerOf((await server.ssrLoadModule("virtual:react-router/server-build")) as ServerBuild);
  } else {
    app.use(compression());
    app.use(
      "/assets",
      express.static(path.join(settings.buildFolder, "client", "assets"), { immutable: true, maxAge: "1y" }),
    );
    app.use(express.static(path.join(settings.buildFolder, "client"), { maxAge: "1h", index: false }));
    const build = (await import(
      pathToFileURL(path.resolve(settings.buildFolder, "server", "index.js")).href
    )) as ServerBuild;
    const handler = handlerOf(build);
    load = () => Promise.resolve(handler);
  }
  app.use(logRequest, refuseLargeForm);
  app.all("*", (request, response, next) => {
    load()
      .then((handle) => handle(request, response, next))
      .catch(next);
  });
}

const app = express();
const server = createServer(app);
await prepareHost(app, server);
server.listen(settings.port, settings.host, () => log.info(`listening on ${settings.host}:${settings.port}`));
server.on("error", (error: NodeJS.ErrnoException) => {
  const taken = error.code === "EADDRINUSE";
  console.error(taken ? `Port ${settings.port} is taken: set PORT to a free one.` : error.message);
  process.exit(taken ? 98 : 1);
});

let ending = false;
function end(): void {
  if (ending) return;
  ending = true;
  server.close(() => process.exit(0));
  server.closeIdleConnections();
  setTimeout(() => process.exit(0), 8_000).unref();
}
process.on("SIGTERM", end);
process.on("SIGINT", end);
process.on("disconnect", end);
// A database socket that dies emits on its own; the pool replaces it, the process must outlive it.
process.on("uncaughtException", (error) => log.error({ err: error }, "uncaught"));
process.on("unhandledRejection", (error) => log.error({ err: error }, "unhandled"));

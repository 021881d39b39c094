// What `npm start` runs after provisioning: database, migrations, demo, mail sink, worker and server; one signal ends all.
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import type { Child } from "~/db/child-process";
import { isPortFree } from "~/db/free-port";
import { takeLock, type Lock } from "~/db/lock";
import { ConfigurationError } from "./config.server";
import { buildIfStale } from "./start/build";
import { migrateExternal, prepareEmbedded, runMariadb } from "./start/embedded-database";
import { keepRunning, type Kept } from "./start/keep-running";
import { endLeftovers, logFileOf, logTail, startProgram } from "./start/programs";
import { readSettings, type StartSettings } from "./start/settings";

/** A signal ends all within 10 s: programs first, then the database they use. */
const PROGRAMS_END_WITHIN_MS = 6_000;
const DATABASE_ENDS_WITHIN_MS = 3_000;
const ALL_END_WITHIN_MS = 9_700;
const HEALTHY_WITHIN_MS = 90_000;

/** Something the person at the terminal can put right: told in a line, without a stack. */
class StartError extends Error {
  override name = "StartError";
}

const folder = process.env.TENDERBAND_FOLDER || ".tenderband";
const development = process.argv.includes("--dev");
const say = (line: string) => console.log(`[start] ${line}`);

const held: { lock?: Lock; database?: Kept; programs: Kept[] } = { programs: [] };

async function start(): Promise<void> {
  held.lock = await lockFolder();
  await endLeftovers(folder, say);
  const settings = await readSettings(process.env, folder, development);
  const { config } = settings;
  await held.lock.describe(config.appUrl);
  if (!(await isPortFree(config.port, config.host))) throw portTaken(config.port);
  Object.assign(process.env, settings.environment); // the demo and the migrations run in this process

  if (settings.mariadb) {
    held.database = await runMariadb(settings.mariadb, say);
    await prepareEmbedded(config.databaseOwnerUrl, folder, say);
  } else {
    await migrateExternal(config.databaseOwnerUrl, say);
  }
  if (!development)
    settings.environment.BUILD_FOLDER = await buildIfStale({ logFile: logFileOf(folder, "build"), say });
  await runSink(settings);
  await Promise.all([runServer(settings), runWorker(settings)]);
  await tellAddress(settings);
}

async function lockFolder(): Promise<Lock> {
  const taken = await takeLock(path.join(folder, "start.lock"));
  if (taken.ok) return taken.lock;
  const { note, pid } = taken.holder;
  throw new StartError(`Tenderband runs here already, at ${note || "an address not known yet"} (process ${pid}).`);
}

function portTaken(port: number): StartError {
  return new StartError(
    `Port ${port} is taken by another program: set PORT to a free one, as in PORT=${port + 1} npm start`,
  );
}

async function runSink({ sink, environment }: StartSettings): Promise<void> {
  if (!sink) return;
  await Promise.all([sink.smtp.release(), sink.pop.release()]);
  const ports = ["--smtp-port", String(sink.smtp.port), "--pop-port", String(sink.pop.port)];
  const parameters = [...ports, "--folder", sink.folder];
  say(`starting the mail sink: SMTP on 127.0.0.1:${sink.smtp.port}, POP3 on 127.0.0.1:${sink.pop.port}`);
  await keep("mail sink", () => startProgram("emails/sink.ts", parameters, { folder, name: "mail-sink", environment }));
}

async function runWorker({ environment }: StartSettings): Promise<void> {
  const options = { folder, name: "worker", environment, visible: development };
  await keep("worker", () => startProgram("app/worker.ts", [], options));
}

async function runServer({ config, environment }: StartSettings): Promise<void> {
  say("starting the server");
  const options = { folder, name: "server", environment, visible: development };
  let first = true;
  await keep("server", async () => {
    const child = await startProgram("app/server.ts", [], options);
    if (first) await waitUntilHealthy(child, config.host, config.port);
    first = false;
    return child;
  });
}

async function keep(name: string, run: () => Promise<Child>): Promise<void> {
  held.programs.push(await keepRunning(name, run, say));
}

async function waitUntilHealthy(child: Child, host: string, port: number): Promise<void> {
  const address = `http://${host === "0.0.0.0" ? "127.0.0.1" : host}:${port}/health`;
  const deadline = Date.now() + HEALTHY_WITHIN_MS;
  while (!child.hasExited() && Date.now() < deadline) {
    const healthy = await fetch(address, { signal: AbortSignal.timeout(5_000) }).then(
      (response) => response.ok,
      () => false,
    );
    if (healthy) return;
    await delay(100);
  }
  await child.stop(0);
  if (!(await isPortFree(port, host))) throw portTaken(port);
  throw new StartError(`the server does not answer; its log ends:\n${await logTail(folder, "server")}`);
}

async function tellAddress({ config, mariadb, sink }: StartSettings): Promise<void> {
  console.log(`\nTenderband answers at ${config.appUrl}/`);
  if (mariadb) {
    const { demoSignIns } = await import("~/db/seeds/demo");
    console.log("Demo sign-ins:");
    for (const { email, password, role } of demoSignIns) console.log(`  ${email}  ${password}  ${role}`);
  }
  if (sink) console.log(`Mail stays here: ${config.appUrl}/development/mailbox`);
  console.log(`Logs: ${path.join(folder, "logs")}. Ctrl-C ends all.`);
}

async function end(): Promise<void> {
  await Promise.all(held.programs.map((program) => program.stop(PROGRAMS_END_WITHIN_MS)));
  await held.database?.stop(DATABASE_ENDS_WITHIN_MS);
  await held.lock?.release();
}

function report(error: unknown): void {
  const told = error instanceof StartError || error instanceof ConfigurationError;
  console.error(told ? error.message : error);
}

const signalled = new Promise<"signalled">((resolve) => {
  for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"] as const) process.on(signal, () => resolve("signalled"));
});
const failed = await Promise.race([
  start().then(
    () => false,
    (error: unknown) => {
      report(error);
      return true;
    },
  ),
  signalled,
]);
if (failed === false) await signalled;
if (failed !== true) say("ending");
// What a start that was interrupted still starts, ends with this process.
setTimeout(() => process.exit(failed === true ? 1 : 0), ALL_END_WITHIN_MS).unref();
await end();
process.exit(failed === true ? 1 : 0);

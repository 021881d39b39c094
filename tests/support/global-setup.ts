// Before a test run: decides where its MariaDB is, and starts it only if a test asks for it.
import http from "node:http";
import type { TestProject } from "vitest/node";
import { reservePort } from "../../db/free-port";
import { takeLock, type Lock } from "../../db/lock";
import { readAccounts, serverAddresses, startMariadb, type Mariadb } from "../../db/mariadb";

declare module "vitest" {
  export interface ProvidedContext {
    testServer: TestServer;
  }
}

export interface TestServer {
  /** Address of the owner's account, ending in a slash for the database's name. */
  ownerUrl: string;
  /** Address of the app's account, likewise. */
  applicationUrl: string;
  /** A GET of this address is answered once the server runs; absent if it runs already. */
  startUrl?: string;
}

/** Runs beside each other take different folders; a folder's data is kept, so that the next run starts at once. */
const FOLDER_COUNT = 16;

export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const { TEST_DATABASE_SERVER_URL: ownerUrl, TEST_DATABASE_APPLICATION_URL: applicationUrl } = process.env;
  if (ownerUrl && applicationUrl) {
    project.provide("testServer", { ownerUrl, applicationUrl });
    return () => Promise.resolve();
  }
  const { folder, lock } = await takeFolder();
  const reserved = await reservePort();
  const addresses = serverAddresses(reserved.port, await readAccounts(folder));
  let starting: Promise<Mariadb> | undefined;
  const start = async () => {
    await reserved.release();
    return startMariadb({ folder, port: reserved.port });
  };
  const doorbell = await listen(() => (starting ??= start()));
  project.provide("testServer", {
    ownerUrl: addresses.ownerUrl(""),
    applicationUrl: addresses.url(""),
    startUrl: doorbell.url,
  });
  return async () => {
    await doorbell.close();
    const server = await starting?.catch(() => undefined);
    await server?.stop();
    await lock.release();
  };
}

async function takeFolder(): Promise<{ folder: string; lock: Lock }> {
  for (let number = 1; number <= FOLDER_COUNT; number += 1) {
    const folder = `.tenderband/vitest-${number}`;
    const taken = await takeLock(`${folder}.lock`);
    if (taken.ok) return { folder, lock: taken.lock };
  }
  throw new Error(`${FOLDER_COUNT} test runs are under way in this checkout already`);
}

async function listen(answer: () => Promise<unknown>): Promise<{ url: string; close: () => Promise<void> }> {
  const server = http.createServer((_request, response) => {
    answer().then(
      () => response.writeHead(204).end(),
      (error: unknown) => response.writeHead(500).end(error instanceof Error ? error.message : String(error)),
    );
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const address = server.address();
  const port = address && typeof address !== "string" ? address.port : 0;
  const close = () =>
    new Promise<void>((resolve) => {
      server.close(() => resolve());
      server.closeAllConnections();
    });
  return { url: `http://127.0.0.1:${port}/`, close };
}

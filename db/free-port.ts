// TCP ports of 127.0.0.1 that nobody uses.
import net from "node:net";

export interface ReservedPort {
  port: number;
  /** Frees the port for the server it was kept for. */
  release(): Promise<void>;
}

/**
 * Holds a port until its server starts, so that nobody else is given it meanwhile.
 *
 * @param wanted taken if it is free; otherwise, or if absent, the system chooses
 */
export async function reservePort(wanted?: number): Promise<ReservedPort> {
  const server = (await listen(wanted ?? 0)) ?? (await listen(0));
  const address = server?.address();
  if (!server || !address || typeof address === "string") throw new Error("no free TCP port on 127.0.0.1");
  return { port: address.port, release: () => new Promise((resolve) => server.close(() => resolve())) };
}

/** True if nothing listens on the port of this host. */
export async function isPortFree(port: number, host = "127.0.0.1"): Promise<boolean> {
  const server = await listen(port, host);
  if (!server) return false;
  await new Promise((resolve) => server.close(resolve));
  return true;
}

function listen(port: number, host = "127.0.0.1"): Promise<net.Server | undefined> {
  return new Promise((resolve) => {
    const server = net.createServer();
    server.unref();
    server.once("error", () => resolve(undefined));
    server.listen({ port, host, exclusive: true }, () => resolve(server));
  });
}

import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import type { Express } from "express";
import { AppError } from "../../orchestrator/contract/index.ts";

/** How long an answer may still take when the server closes: the one to "stop" is given at that very moment. */
const GRACE_MS = 500;

/** A server that listens. */
export interface Serving {
  readonly host: string;
  readonly port: number;
  /** Takes no more requests, lets those being answered finish for a moment, and cuts the rest. */
  close(): Promise<void>;
}

/**
 * Serves an app; port 0 takes any free one.
 *
 * @throws STATE_CONFLICT where the port is taken, USAGE where it may not be used
 */
export async function serveApp(
  app: Express,
  { host, port }: { host: string; port: number },
): Promise<Serving> {
  const server = createServer(app);
  server.headersTimeout = 10_000;
  server.requestTimeout = 30_000;
  await listening(server, host, port);
  return {
    host,
    port: (server.address() as AddressInfo).port,
    close: () =>
      new Promise((resolve) => {
        const cut = setTimeout(() => server.closeAllConnections(), GRACE_MS);
        server.close(() => {
          clearTimeout(cut);
          resolve();
        });
        server.closeIdleConnections();
      }),
  };
}

function listening(server: Server, host: string, port: number): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once("error", (error: NodeJS.ErrnoException) => reject(listenFailure(error, host, port)));
    server.listen(port, host, () => resolve());
  });
}

function listenFailure(error: NodeJS.ErrnoException, host: string, port: number): AppError {
  const where = `${host}:${port}`;
  if (error.code === "EADDRINUSE")
    return new AppError("STATE_CONFLICT", `another program listens on ${where} already`, {
      where,
      fix: "Choose another port.",
      cause: error,
    });
  return new AppError("USAGE", `cannot listen on ${where}: ${error.message}`, {
    where,
    fix: "Choose a port above 1023 and an address of this machine.",
    cause: error,
  });
}

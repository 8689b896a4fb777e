import { createServer } from "node:http";
import type { Server } from "node:http";
import type { AddressInfo } from "node:net";
import { createApp } from "./app.ts";
import type { Config } from "./config.ts";
import { closeContext, createContext } from "./context.ts";
import type { Context } from "./context.ts";
import { completePending } from "./features/builds/complete.ts";
import { ensureAdministrator } from "./features/invitations/firstAdministrator.ts";

export interface RunningServer {
  /** Address that it listens at, without a slash at the end. */
  readonly url: string;
  readonly context: Context;
  /** One-time link for the first administrator, where nobody is known yet. */
  readonly setUpLink: string | null;
  /** Takes nothing new, finishes what has begun, closes the database. */
  close(): Promise<void>;
}

/** Connections that stay open after their last answer are cut after this long. */
const LINGER_MS = 2000;

/** Opens the record, migrates it and listens. Port 0 takes a free one. */
export async function startServer(config: Config): Promise<RunningServer> {
  const context = await createContext(config);
  const setUpLink = await ensureAdministrator(context);
  // Before anything new comes: what was acknowledged but not judged against its lane when the server was stopped.
  await completePending(context);
  const server = createServer(createApp(context));
  // A posting of the allowed size may take longer than node's five minutes on a slow line.
  server.requestTimeout = 30 * 60 * 1000;
  const inFlight = countInFlight(server);
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(config.port, config.host, resolve);
  }).catch(async (error: unknown) => {
    await closeContext(context);
    throw error;
  });
  const { port } = server.address() as AddressInfo;
  const host = config.host.includes(":") ? `[${config.host}]` : config.host;
  let closing: Promise<void> | null = null;
  const close = async () => {
    context.startDraining();
    await inFlight.none();
    await stopListening(server);
    await closeContext(context);
  };
  return { url: `http://${host}:${port}`, context, setUpLink, close: () => (closing ??= close()) };
}

function stopListening(server: Server): Promise<void> {
  return new Promise((resolve) => {
    const cut = setTimeout(() => server.closeAllConnections(), LINGER_MS);
    server.close(() => {
      clearTimeout(cut);
      resolve();
    });
    server.closeIdleConnections();
  });
}

/** Requests whose answer is not finished. While there are any the server keeps listening, so that new ones are told 503. */
function countInFlight(server: Server): { none(): Promise<void> } {
  let count = 0;
  let waiting: (() => void)[] = [];
  server.on("request", (_request, response) => {
    count += 1;
    response.once("close", () => {
      count -= 1;
      if (count > 0) return;
      for (const wake of waiting) wake();
      waiting = [];
    });
  });
  return { none: () => (count === 0 ? Promise.resolve() : new Promise((resolve) => waiting.push(resolve))) };
}

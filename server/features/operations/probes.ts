import { timingSafeEqual } from "node:crypto";
import { Router } from "express";
import type { Request } from "express";
import type { Context } from "../../context.ts";
import { Unauthorized, Unavailable } from "../../http/problem.ts";

const READY_WITHIN_MS = 5000;

/** What watchers ask: alive, ready, and the figures. */
export function probes(context: Context): Router {
  const router = Router();
  router.get(["/livez", "/healthz"], (_request, response) => {
    response.set("Cache-Control", "no-store").json({ status: "alive" });
  });
  router.get("/readyz", async (_request, response) => {
    if (context.draining()) throw new Unavailable("draining", "The server is being stopped.");
    if (!(await writable(context))) throw new Unavailable("not-ready", "The database cannot be written just now.");
    response.set("Cache-Control", "no-store").json({ status: "ready" });
  });
  router.get("/metrics", async (request, response) => {
    requireWatcher(context, request);
    const { registry } = context.metrics;
    response
      .set("Cache-Control", "no-store")
      .type(registry.contentType)
      .send(await registry.metrics());
  });
  return router;
}

/** True when a write transaction can be had soon; a long posting before it in the queue counts as not ready. */
async function writable(context: Context): Promise<boolean> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<boolean>((resolve) => {
    timer = setTimeout(() => resolve(false), READY_WITHIN_MS);
  });
  const written = context.db
    .write((writer) => writer.select("SELECT 1"))
    .then(
      () => true,
      (error: unknown) => {
        context.logger.error({ err: error }, "the database cannot be written");
        return false;
      },
    );
  try {
    return await Promise.race([written, late]);
  } finally {
    clearTimeout(timer);
  }
}

/** Figures are for this machine, or for whoever has the token. What came through a proxy did not come from this machine. */
function requireWatcher(context: Context, request: Request): void {
  const { metricsToken } = context.config;
  const given = /^Bearer +(\S+)$/i.exec(request.headers.authorization ?? "")?.[1];
  if (metricsToken !== null && given !== undefined && sameText(given, metricsToken)) return;
  const forwarded = ["forwarded", "x-forwarded-for", "via"].some((name) => request.headers[name] !== undefined);
  if (!forwarded && isLoopback(request.socket.remoteAddress ?? "")) return;
  throw new Unauthorized("Figures are told on this machine, or to whoever sends CLINOGRAPH_METRICS_TOKEN.");
}

function isLoopback(address: string): boolean {
  return address === "::1" || /^(::ffff:)?127\./.test(address);
}

function sameText(a: string, b: string): boolean {
  const [left, right] = [Buffer.from(a), Buffer.from(b)];
  return left.length === right.length && timingSafeEqual(left, right);
}

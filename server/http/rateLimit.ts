import { ipKeyGenerator, rateLimit } from "express-rate-limit";
import type { Request, Response } from "express";
import { actorKey } from "./actor.ts";
import type { Actor } from "./actor.ts";
import { TooManyRequests } from "./problem.ts";

const WINDOW_MS = 60_000;
export type Limiter = (actor: Actor, request: Request, response: Response) => Promise<void>;

/** Counts requests of each token, person or (where nobody is known) network address; 0 = no limit. */
export function requestLimiter(perMinute: number): Limiter {
  if (perMinute === 0) return () => Promise.resolve();
  const actors = new WeakMap<Request, Actor>();
  const keyOf = (request: Request) => {
    const actor = actors.get(request);
    return actor === undefined || actor.kind === "anyone"
      ? `ip:${ipKeyGenerator(request.ip ?? "unknown")}`
      : actorKey(actor);
  };
  const limit = rateLimit({
    windowMs: WINDOW_MS,
    limit: perMinute,
    standardHeaders: "draft-8",
    legacyHeaders: false,
    keyGenerator: keyOf,
    handler: (_request, response, next) => {
      const seconds = Number(response.getHeader("Retry-After") ?? WINDOW_MS / 1000);
      next(new TooManyRequests(`More than ${perMinute} requests in a minute.`, Math.max(1, Math.ceil(seconds))));
    },
  });
  return (actor, request, response) => {
    actors.set(request, actor);
    return new Promise((resolve, reject) => limit(request, response, (e?: unknown) => (e ? reject(e) : resolve())));
  };
}

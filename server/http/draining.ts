import type { RequestHandler } from "express";
import type { Context } from "../context.ts";
import { Unavailable } from "./problem.ts";

const RETRY_AFTER_SECONDS = 10;

/** While the server is being stopped, what has begun is finished and nothing new is taken. */
export function refuseWhileDraining(context: Context): RequestHandler {
  return (request, response, next) => {
    const changes = request.method !== "GET" && request.method !== "HEAD";
    if (!context.draining() || !changes) {
      next();
      return;
    }
    response.set("Connection", "close");
    next(new Unavailable("draining", "The server is being stopped; nothing was kept.", RETRY_AFTER_SECONDS));
  };
}

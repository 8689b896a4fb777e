import type { RequestHandler } from "express";
import type { Metrics } from "./metrics.ts";

/** Observes every request by the pattern of its route: ids in addresses would make a series each. */
export function measureRequests(metrics: Metrics): RequestHandler {
  return (request, response, next) => {
    const begun = performance.now();
    response.on("close", () => {
      const route = typeof response.locals.route === "string" ? response.locals.route : "other";
      const seconds = (performance.now() - begun) / 1000;
      metrics.observeRequest({ method: request.method, route, status: response.statusCode }, seconds);
    });
    next();
  };
}

import cookieParser from "cookie-parser";
import express from "express";
import type { Express } from "express";
import type { Context } from "./context.ts";
import { pages } from "./features/operations/pages.ts";
import { probes } from "./features/operations/probes.ts";
import { problemPages } from "./features/operations/problemPages.ts";
import { ROUTES } from "./features/routes.ts";
import { refuseWhileDraining } from "./http/draining.ts";
import { measureRequests } from "./http/measureRequests.ts";
import { mountRoutes } from "./http/mountRoutes.ts";
import { NotFound } from "./http/problem.ts";
import { problemHandler } from "./http/problemHandler.ts";
import { requestLog } from "./http/requestLog.ts";
import { securityHeaders } from "./http/securityHeaders.ts";

/** Assembles the application; who calls it listens. */
export function createApp(context: Context): Express {
  const app = express();
  app.disable("x-powered-by");
  // Answers are told once and not cached: hashing them for an ETag would only cost time.
  app.disable("etag");
  app.set("trust proxy", context.config.trustedProxies);
  app.use(requestLog(context.logger));
  app.use(measureRequests(context.metrics));
  app.use(securityHeaders(context.config));
  app.use(probes(context));
  app.use("/api/v1", refuseWhileDraining(context), cookieParser(), mountRoutes(context, ROUTES));
  app.use(problemPages());
  app.use(pages(context));
  app.use(() => {
    throw new NotFound();
  });
  app.use(problemHandler(context.logger));
  return app;
}

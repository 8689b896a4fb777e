import { existsSync } from "node:fs";
import { join } from "node:path";
import express, { Router } from "express";
import type { Context } from "../../context.ts";
import { NotFound, Unavailable } from "../../http/problem.ts";

/** Files whose names carry a hash of their content never change. */
const HASHED = { immutable: true, maxAge: "365d", index: false, redirect: false } as const;

/** The built pages and the reporter. Every address that is none of the server's own is the application's to answer. */
export function pages(context: Context): Router {
  const folder = join(context.config.builtFolder, "pages");
  const index = join(folder, "index.html");
  const reporter = join(context.config.builtFolder, "download", "report.mjs");
  const router = Router();
  router.get("/download/report.mjs", (_request, response) => {
    if (!existsSync(reporter)) throw new Unavailable("not-built", "Run npm run build; it makes the reporter.");
    response.set("Cache-Control", "no-cache").type("text/javascript").sendFile(reporter, { dotfiles: "allow" });
  });
  router.use("/assets", express.static(join(folder, "assets"), HASHED));
  router.use("/assets", () => {
    throw new NotFound("There is no such file; the pages may have been built anew.");
  });
  router.use(express.static(folder, { index: false, redirect: false }));
  router.get("/{*page}", (request, response, next) => {
    if (request.path.startsWith("/api/") || request.accepts("html") === false) {
      next();
      return;
    }
    if (!existsSync(index)) throw new Unavailable("not-built", "Run npm run build; it makes the pages.");
    response.set("Cache-Control", "no-cache").sendFile(index, { dotfiles: "allow" });
  });
  return router;
}

import { z } from "zod";
import { defineRoute } from "../http/defineRoute.ts";
import type { Route } from "../http/defineRoute.ts";
import { openApiDocument } from "../http/openapi.ts";
import { routes as audit } from "./audit/routes.ts";
import { routes as baselines } from "./baselines/routes.ts";
import { routes as blocks } from "./blocks/routes.ts";
import { routes as breaks } from "./breaks/routes.ts";
import { routes as builds } from "./builds/routes.ts";
import { routes as climbs } from "./climbs/routes.ts";
import { routes as exports } from "./exports/routes.ts";
import { routes as gate } from "./gate/routes.ts";
import { routes as history } from "./history/routes.ts";
import { routes as invitations } from "./invitations/routes.ts";
import { routes as members } from "./members/routes.ts";
import { routes as overview } from "./overview/routes.ts";
import { routes as people } from "./people/routes.ts";
import { routes as plan } from "./plan/routes.ts";
import { routes as projects } from "./projects/routes.ts";
import { routes as session } from "./session/routes.ts";
import { routes as steps } from "./steps/routes.ts";
import { routes as tokens } from "./tokens/routes.ts";
import { routes as waivers } from "./waivers/routes.ts";
import { routes as wanted } from "./wanted/routes.ts";

const document = defineRoute({
  method: "get",
  path: "/openapi.json",
  summary: "This document",
  tag: "Operations",
  auth: "anyone",
  can: null,
  response: z.looseObject({ openapi: z.string() }).meta({ id: "OpenApi" }),
  handler: async ({ context }) => openApiDocument(ROUTES, context.config.publicUrl) as { openapi: string },
});

/** Every route of the API, in the order of the document. */
export const ROUTES: readonly Route[] = [
  ...session,
  ...invitations,
  ...projects,
  ...builds,
  ...blocks,
  ...steps,
  ...gate,
  ...overview,
  ...history,
  ...breaks,
  ...climbs,
  ...baselines,
  ...wanted,
  ...plan,
  ...exports,
  ...members,
  ...tokens,
  ...waivers,
  ...audit,
  ...people,
  document,
];

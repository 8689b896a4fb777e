import { Router } from "express";
import type { Request, RequestHandler, Response } from "express";
import { groupBy } from "../../shared/domain/groupBy.ts";
import type { Context } from "../context.ts";
import { Project } from "../db/models/Project.ts";
import { can } from "../features/policies.ts";
import type { Actor } from "./actor.ts";
import { mayKnow } from "./actor.ts";
import { authenticate } from "./authenticate.ts";
import { checkResponse } from "./checkResponse.ts";
import type { Route } from "./defineRoute.ts";
import { jsonBodyReader } from "./jsonBody.ts";
import { Forbidden, MethodNotAllowed, NotFound } from "./problem.ts";
import { requestLimiter } from "./rateLimit.ts";
import type { Limiter } from "./rateLimit.ts";
import { rawBodyReader } from "./rawBody.ts";
import type { BodyReader } from "./rawBody.ts";
import { Reply, StreamedReply } from "./reply.ts";
import { sendStream } from "./sendStream.ts";
import { parseWith } from "./validate.ts";

/** Reads and checks the body that a route wants. */
type ReadBody = BodyReader<unknown>;

/** A router that serves the routes, answers 405 where only the method is wrong and 404 elsewhere. */
export function mountRoutes(context: Context, routes: readonly Route[]): Router {
  const router = Router({ caseSensitive: true });
  const limit = requestLimiter(context.config.requestsPerMinute);
  for (const route of routes) {
    router[route.method](route.path, serve(context, route, limit, bodyReader(context, route)));
  }
  for (const [path, ofPath] of groupBy(routes, (route) => route.path)) {
    const allowed = ofPath.map((route) => route.method.toUpperCase());
    router.all(path, (request) => {
      throw new MethodNotAllowed(request.method, allowed);
    });
  }
  router.use(() => {
    throw new NotFound("The API has no such address; /api/v1/openapi.json lists them all.");
  });
  return router;
}

function serve(context: Context, route: Route, limit: Limiter, readBody: ReadBody): RequestHandler {
  return async (request, response) => {
    response.locals.route = route.path;
    const actor = await authenticate(context, route.auth, request);
    await limit(actor, request, response);
    const params = readParams(route, request);
    const project = await authorise(context, route, actor, params);
    const query = route.query ? parseWith(route.query, { ...request.query }, ["query"]) : {};
    const body = await readBody(request, response);
    const requestId = String(request.id);
    const result = await route.handler({ context, actor, params, query, body, project, request, response, requestId });
    if (result instanceof StreamedReply) await sendStream(response, result);
    else answer(context, route, response, result instanceof Reply ? result : new Reply(route.status, result, {}));
  };
}

type Params = Readonly<Record<string, string>>;

function readParams(route: Route, request: Request): Params {
  const parsed = route.params?.safeParse(request.params);
  if (parsed === undefined) return {};
  if (!parsed.success) throw new NotFound();
  return parsed.data as Params;
}

/** The project, where there is one: first whether the actor may know of it, then whether they may do this. */
async function authorise(context: Context, route: Route, actor: Actor, params: Params): Promise<Project | null> {
  const ofProject = route.locate !== null || route.path.startsWith("/projects/:project");
  let project: Project | null = null;
  if (ofProject) {
    project = route.locate
      ? await route.locate(context, params)
      : await Project.findOne({ where: { slug: params.project ?? "" } });
    if (project === null || !mayKnow(actor, project.id)) throw new NotFound();
  }
  if (route.can !== null && !can(actor, route.can, project ? { projectId: project.id } : {})) {
    throw new Forbidden(
      actor.kind === "token"
        ? `The scopes of this token do not cover this (${route.can}).`
        : `Your role does not cover this (${route.can}).`,
    );
  }
  return project;
}

function bodyReader(context: Context, { body, maxBodyBytes }: Route): ReadBody {
  if (body === null) return () => Promise.resolve(undefined);
  if ("describedBy" in body) return rawBodyReader(context.config.limits.wireBytes);
  const read = jsonBodyReader(maxBodyBytes);
  return async (request, response) => parseWith(body, await read(request, response));
}

function answer(context: Context, route: Route, response: Response, result: Reply): void {
  if (context.config.validateResponses) checkResponse(route, result);
  response.status(result.status).set({ "Cache-Control": "no-store", ...result.headers });
  if (result.value === undefined) response.end();
  else response.json(result.value);
}

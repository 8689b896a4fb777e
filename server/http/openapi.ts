import { createDocument } from "zod-openapi";
import type {
  ZodOpenApiObject,
  ZodOpenApiOperationObject,
  ZodOpenApiPathsObject,
  ZodOpenApiResponsesObject,
} from "zod-openapi";
import { problem } from "../../shared/schemas/common.ts";
import { CAUTION } from "../../shared/domain/vocabulary.ts";
import type { Route } from "./defineRoute.ts";
import { PROBLEMS } from "./problemCatalogue.ts";
import type { ProblemSlug } from "./problemCatalogue.ts";

/** The reference that users read, made from the routes themselves. */
export function openApiDocument(routes: readonly Route[], serverUrl: string) {
  const paths: ZodOpenApiPathsObject = {};
  for (const route of routes) {
    const path = route.path.replace(/:(\w+)/g, "{$1}");
    paths[path] = { ...paths[path], [route.method]: operation(route) };
  }
  const document: ZodOpenApiObject = {
    openapi: "3.1.0",
    info: {
      title: "Clinograph",
      version: "1.0.0",
      description: `Posts, judges and reads the derivatives of engineering code, commit by commit.\n\n${CAUTION}`,
    },
    servers: [{ url: `${serverUrl}/api/v1` }],
    paths,
    components: {
      securitySchemes: {
        session: {
          type: "apiKey",
          in: "cookie",
          name: "clinograph",
          description: "Set by POST /session. Changes also need the header X-CSRF-Token.",
        },
        token: { type: "http", scheme: "bearer", description: "A token of a project: clg_..." },
      },
    },
  };
  return createDocument(document);
}

function operation(route: Route): ZodOpenApiOperationObject {
  const { params, query, body } = route;
  const schema = body === null ? null : "describedBy" in body ? body.describedBy : body;
  return {
    operationId: operationId(route),
    summary: route.summary,
    ...(route.description === undefined ? {} : { description: route.description }),
    tags: [route.tag],
    security: security(route),
    requestParams: { ...(params ? { path: params } : {}), ...(query ? { query: query as never } : {}) },
    ...(schema ? { requestBody: { required: true, content: { "application/json": { schema } } } } : {}),
    responses: { ...successes(route), ...failures(route) },
  };
}

function operationId(route: Route): string {
  const words = route.path.split(/\W+/).filter((word) => word !== "");
  return route.method + words.map((word) => word.charAt(0).toUpperCase() + word.slice(1)).join("");
}

function security(route: Route): Record<string, string[]>[] {
  if (route.auth === "anyone") return [];
  return route.auth === "person" ? [{ session: [] }] : [{ session: [] }, { token: [] }];
}

function successes(route: Route): ZodOpenApiResponsesObject {
  const { response } = route;
  const streams = Object.entries(route.streams).map(([type, schema]) => [type, { schema }]);
  const own =
    response === null
      ? { description: "Done; nothing is answered." }
      : {
          description: route.summary,
          content: { "application/json": { schema: response }, ...Object.fromEntries(streams) },
        };
  const others = Object.entries(route.responses).map(([status, { description, schema }]) => [
    status,
    { description, content: { "application/json": { schema } } },
  ]);
  return { [String(route.status)]: own, ...Object.fromEntries(others) };
}

/** The problems that a route can answer, those that follow from what it is included. */
export function problemsOf(route: Route): ProblemSlug[] {
  const slugs = new Set<ProblemSlug>(route.problems);
  slugs.add("too-many-requests");
  if (route.auth !== "anyone") slugs.add("not-signed-in");
  if (route.can !== null) slugs.add("not-allowed");
  if (route.params !== null) slugs.add("not-found");
  if (route.query !== null || route.body !== null) slugs.add("invalid");
  if (route.body !== null)
    for (const slug of ["malformed-request", "too-large", "unsupported-media"] as const) slugs.add(slug);
  if (route.method !== "get") slugs.add("draining");
  if (route.method !== "get" && route.auth !== "anyone") slugs.add("csrf-token");
  return [...slugs];
}

function failures(route: Route): ZodOpenApiResponsesObject {
  const titles = new Map<number, string[]>();
  for (const slug of problemsOf(route)) {
    const { status, title } = PROBLEMS[slug];
    titles.set(status, [...(titles.get(status) ?? []), title]);
  }
  return Object.fromEntries(
    [...titles].map(([status, told]) => [
      String(status),
      { description: told.join("; "), content: { "application/problem+json": { schema: problem } } },
    ]),
  );
}

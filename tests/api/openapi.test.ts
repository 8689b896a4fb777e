import { Validator } from "@seriousme/openapi-schema-validator";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { POLICIES } from "../../server/features/policies.ts";
import { ROUTES } from "../../server/features/routes.ts";
import { PROBLEMS } from "../../server/http/problemCatalogue.ts";
import { problemsOf } from "../../server/http/openapi.ts";
import { startTestServer } from "../support/server.ts";
import type { TestServer } from "../support/server.ts";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.close());

interface Document {
  paths: Record<string, Record<string, { responses: Record<string, unknown>; operationId: string }>>;
}

describe("the OpenAPI document", () => {
  it("is a valid document of version 3.1", async () => {
    const response = await server.guest().get("/api/v1/openapi.json");
    expect(response.status).toBe(200);
    const validator = new Validator();
    const result = await validator.validate(response.body);
    expect(result).toMatchObject({ valid: true });
    expect(validator.version).toBe("3.1");
  });

  it("has every mounted route, its success and its problems, and nothing else", async () => {
    const { paths } = (await server.guest().get("/api/v1/openapi.json")).body as Document;
    const documented = Object.entries(paths).flatMap(([path, methods]) =>
      Object.keys(methods).map((method) => `${method} ${path}`),
    );
    const mounted = ROUTES.map((route) => `${route.method} ${route.path.replace(/:(\w+)/g, "{$1}")}`);
    expect(documented.toSorted()).toEqual(mounted.toSorted());
    for (const route of ROUTES) {
      const operation = paths[route.path.replace(/:(\w+)/g, "{$1}")]?.[route.method];
      const statuses = [route.status, ...problemsOf(route).map((slug) => PROBLEMS[slug].status)].map(String);
      expect(Object.keys(operation?.responses ?? {}), route.path).toEqual(expect.arrayContaining(statuses));
    }
  });

  it("names each operation once", () => {
    const names = ROUTES.map((route) => `${route.method} ${route.path}`);
    expect(new Set(names).size).toBe(names.length);
  });
});

describe("policies", () => {
  it("cover every route: an action of the table, or none where whoever is let in may", () => {
    const open = ROUTES.filter((route) => route.can === null).map((route) => `${route.method} ${route.path}`);
    expect(open.toSorted()).toEqual([
      "delete /session",
      "get /openapi.json",
      "get /session",
      "post /invitations/accept",
      "post /session",
      "post /session/password",
      "post /set-up",
    ]);
    for (const { can } of ROUTES) if (can !== null) expect(Object.keys(POLICIES)).toContain(can);
  });

  it("are asked for no one who is not known", () => {
    for (const route of ROUTES) if (route.auth === "anyone") expect(route.can, route.path).toBeNull();
  });
});

import { isDeepStrictEqual } from "node:util";
import type { Route } from "./defineRoute.ts";
import type { Reply } from "./reply.ts";

/** An answer that is not what its route says: a mistake of ours, found by the tests. */
export class ResponseMismatch extends Error {}

/** @throws ResponseMismatch where a field is missing, of another kind, or not in the schema at all. */
export function checkResponse(route: Route, { status, value }: Reply): void {
  const where = `${route.method.toUpperCase()} ${route.path} ${status}`;
  const schema = route.responses[status]?.schema ?? route.response;
  if (schema === null) {
    if (value !== undefined) throw new ResponseMismatch(`${where} answers a body that it does not document`);
    return;
  }
  const wire: unknown = value === undefined ? undefined : JSON.parse(JSON.stringify(value));
  const parsed = schema.safeParse(wire);
  if (!parsed.success) throw new ResponseMismatch(`${where}: ${parsed.error.message}`);
  if (!isDeepStrictEqual(parsed.data, wire))
    throw new ResponseMismatch(`${where} answers fields that are not in its schema`);
}

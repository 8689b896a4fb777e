import type { z } from "zod";
import { PAGE_LIMIT } from "../../shared/domain/limits.ts";
import type { pageQuery } from "../../shared/schemas/common.ts";
import { Invalid } from "./problem.ts";

type PageQuery = { readonly [K in keyof typeof pageQuery]?: z.output<(typeof pageQuery)[K]> };

export interface PageRequest {
  readonly limit: number;
  /** Id after which the page begins, in the list's order; null = from the start. */
  readonly after: number | null;
}

/** @throws Invalid for a cursor that no answer gave. */
export function pageRequest(query: PageQuery): PageRequest {
  return {
    limit: query.limit ?? PAGE_LIMIT.default,
    after: query.cursor === undefined ? null : readCursor(query.cursor),
  };
}

function readCursor(cursor: string): number {
  const text = Buffer.from(cursor, "base64url").toString("latin1");
  if (!/^after:\d{1,15}$/.test(text)) {
    throw new Invalid([{ pointer: "#/query/cursor", detail: "is not a cursor that an answer gave" }]);
  }
  return Number(text.slice("after:".length));
}

/** A page of at most `limit` items from rows that were asked for with one more than that. */
export function pageOf<Row extends { readonly id: number }, Item>(
  rows: readonly Row[],
  limit: number,
  present: (row: Row) => Item,
): { items: Item[]; next: string | null } {
  const shown = rows.slice(0, limit);
  const last = rows.length > limit ? shown.at(-1) : undefined;
  return {
    items: shown.map(present),
    next: last === undefined ? null : Buffer.from(`after:${last.id}`, "latin1").toString("base64url"),
  };
}

/** A page of a list that is at hand as a whole and in an order of its own: the cursor is a place in it. */
export function pageSlice<Row, Item>(
  rows: readonly Row[],
  { limit, after }: PageRequest,
  present: (row: Row) => Item,
): { items: Item[]; next: string | null } {
  const first = after ?? 0;
  const last = first + limit;
  const more = last < rows.length;
  return {
    items: rows.slice(first, last).map(present),
    next: more ? Buffer.from(`after:${last}`, "latin1").toString("base64url") : null,
  };
}

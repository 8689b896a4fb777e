import { JSON_ENTRY_LIMIT } from "../../../shared/domain/limits.ts";
import { Invalid } from "../../http/problem.ts";
import type { Window } from "./loadBlockPlanes.ts";

/**
 * The window that a query asks for, the whole block if none.
 * @throws Invalid where it lies outside of the block, or is too large to be answered as JSON.
 */
export function windowOf(
  query: {
    readonly rows?: string | undefined;
    readonly columns?: string | undefined;
    readonly format?: string | undefined;
  },
  rows: number,
  columns: number,
): Window {
  const window = { rows: range("rows", query.rows, rows), columns: range("columns", query.columns, columns) };
  const entries = (window.rows[1] - window.rows[0]) * (window.columns[1] - window.columns[0]);
  if (query.format !== "f64le" && entries > JSON_ENTRY_LIMIT) {
    const detail = `the block has ${rows} x ${columns} entries; more than ${JSON_ENTRY_LIMIT} are answered with format=f64le, or by windows (rows=a:b&columns=c:d)`;
    throw new Invalid([{ pointer: "#/query/format", detail }]);
  }
  return window;
}

/** Numbers first <= i < last of `size` that a query names; all without one. @throws Invalid where there are not so many. */
export function range(name: string, text: string | undefined, size: number): readonly [number, number] {
  if (text === undefined) return [0, size];
  const [first, last] = text.split(":").map(Number);
  if (first > last || last > size) {
    throw new Invalid([{ pointer: `#/query/${name}`, detail: `must lie within 0:${size}, first before last` }]);
  }
  return [first, last];
}

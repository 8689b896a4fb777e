import type { Bindable } from "./write.ts";

/** Where rows are read: the database, or a transaction under way (`Writer`), so that a loader serves both. */
export interface Reader {
  select<R extends object>(sql: string, bind?: readonly Bindable[]): Promise<R[]>;
}

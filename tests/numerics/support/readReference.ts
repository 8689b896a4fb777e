import { readFileSync } from "node:fs";

/** Where a set of published values comes from; every file under tests/numerics/reference has one. */
export interface About {
  readonly source: string;
  readonly read: string;
  readonly digits: number;
  readonly tolerance: string;
  readonly why: string;
}

/** Reads tests/numerics/reference/<path>. */
export function readReference<T>(path: string): T & { readonly about: About } {
  const url = new URL(`../reference/${path}`, import.meta.url);
  return JSON.parse(readFileSync(url, "utf8")) as T & { readonly about: About };
}

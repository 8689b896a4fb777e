import { MAX_LISTED_ERRORS } from "../../shared/domain/limits.ts";

export interface ListedError {
  /** RFC 6901 pointer as a URI fragment. */
  readonly pointer: string;
  readonly detail: string;
}

/** Path of a value in the document: property names and indices. */
export type Path = readonly (string | number)[];

export function pointerOf(path: Path): string {
  if (path.length === 0) return "#";
  return `#/${path.map((part) => encodeURI(String(part).replace(/~/g, "~0").replace(/\//g, "~1"))).join("/")}`;
}

/** Gathers what is wrong with a document: the first 50 in full, the rest as a number. */
export class Complaints {
  readonly listed: ListedError[] = [];
  more = 0;

  add(path: Path, detail: string): void {
    if (this.listed.length < MAX_LISTED_ERRORS) this.listed.push({ pointer: pointerOf(path), detail });
    else this.more += 1;
  }

  get any(): boolean {
    return this.listed.length > 0;
  }
}

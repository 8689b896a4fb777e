import { readReference } from "../support/readReference.ts";

/** One problem of reference/mgh/problems.json; numbers are kept as decimal text of up to 20 digits. */
export interface PublishedProblem {
  readonly mgh: number;
  readonly n: number;
  readonly m: number;
  readonly x0: readonly string[];
  readonly residuals_x0: readonly string[];
  readonly jacobian_x0: readonly (readonly string[])[];
  readonly f_x0: string;
  readonly xstar: readonly string[];
  readonly fstar: string;
}

interface PublishedData {
  readonly bard: readonly number[];
  readonly gaussian: readonly number[];
  readonly kowalik: readonly number[];
  readonly kowalikU: readonly number[];
  readonly meyer: readonly number[];
  readonly osborne1: readonly number[];
}

export const PUBLISHED = readReference<{ readonly problems: Readonly<Record<string, PublishedProblem>> }>(
  "mgh/problems.json",
).problems;
export const DATA = readReference<PublishedData>("mgh/data.json");

export function published(name: string): PublishedProblem {
  const problem = PUBLISHED[name];
  if (problem === undefined) throw new RangeError(`no published problem ${name}`);
  return problem;
}

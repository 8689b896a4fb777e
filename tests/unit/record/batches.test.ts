import { expect, it } from "vitest";
import { batches } from "../../../server/trace/batches.ts";

it.each([
  ["nothing", [], []],
  ["what fits together", [1, 2, 3], [[1, 2, 3]]],
  ["what does not", [6, 5, 4, 1], [[6], [5, 4, 1]]],
  ["what is too large alone", [3, 25, 4], [[3], [25], [4]]],
  ["what has no size", [0, 10, 0], [[0, 10, 0]]],
] as const)("%s is cut into runs of at most ten", (_name, sizes, runs) => {
  expect(batches(sizes, (size) => size, 10)).toEqual(runs);
});

import { bard, gaussian, kowalikOsborne } from "../../problems/dataFits.ts";
import { beale, brownBadlyScaled, rosenbrock } from "../../problems/planar.ts";
import type { Problem } from "../../problems/problem.ts";
import { brownAlmostLinear, brownDennis } from "../../problems/sized.ts";
import { helicalValley, powellSingular, wood } from "../../problems/spatial.ts";
import { sideBySide } from "./composite.ts";

/** Sparse blocks: published problems that have nothing to do with each other. */
export function sparseProblems(): Problem[] {
  return [
    sideBySide([rosenbrock, beale, helicalValley]),
    sideBySide([bard, wood]),
    sideBySide([kowalikOsborne, powellSingular, brownBadlyScaled]),
    sideBySide([brownAlmostLinear, gaussian]),
    sideBySide([wood, powellSingular, helicalValley, rosenbrock]),
    sideBySide([brownDennis, bard]),
  ];
}

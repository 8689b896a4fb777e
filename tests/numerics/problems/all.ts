import { bard, gaussian, kowalikOsborne, meyer, osborne1 } from "./dataFits.ts";
import { beale, brownBadlyScaled, freudensteinRoth, powellBadlyScaled, rosenbrock } from "./planar.ts";
import type { Problem } from "./problem.ts";
import { brownAlmostLinear, brownDennis } from "./sized.ts";
import { box3d, helicalValley, powellSingular, wood } from "./spatial.ts";
import { exponentialOverCubes, nineHalves } from "./squireTrapp.ts";

/** The sixteen problems of More, Garbow & Hillstrom for which values are at hand. */
export const MGH_PROBLEMS: readonly Problem[] = [
  rosenbrock,
  freudensteinRoth,
  powellBadlyScaled,
  brownBadlyScaled,
  beale,
  helicalValley,
  bard,
  gaussian,
  meyer,
  box3d,
  powellSingular,
  wood,
  kowalikOsborne,
  brownDennis,
  osborne1,
  brownAlmostLinear,
];

/** With the two functions of Squire & Trapp: eighteen problems. */
export const PROBLEMS: readonly Problem[] = [...MGH_PROBLEMS, nineHalves, exponentialOverCubes];

import type { GateFinding, GateRise } from "./types.ts";

/** Rises of the error that the tolerance does not see, one finding each. */
export function gateRiseFindings(rises: readonly GateRise[]): GateFinding[] {
  return rises.map((rise) => {
    const { kind, model, block, row, column, entryCount, decades } = rise;
    const what = entryCount === 1 ? "one entry" : `${entryCount} entries`;
    const far = `${decades.toFixed(1)} decades above ${entryCount === 1 ? "its" : "their"} baseline`;
    const worst = `${block}, row ${row}, column ${column}`;
    const message =
      kind === "climb"
        ? `the error of ${what} of ${model} has climbed to ${far} (${entryCount === 1 ? "" : "worst: "}${worst})`
        : `the error of ${what} of ${model} jumped by ${decades.toFixed(1)} decades within the tolerance (${entryCount === 1 ? "" : "worst: "}${worst})`;
    return { code: "climb", message, weight: decades, model, block, row, column };
  });
}

import type { PostedProbe } from "../../shared/schemas/build.ts";
import type { Complaints, Path } from "./complaints.ts";
import { probeNames } from "./probeNames.ts";

/** Complains of probes whose lists do not fit together, and of two of one kind and label; `path` is the block's. */
export function checkProbes(probes: readonly PostedProbe[], path: Path, complaints: Complaints): void {
  const places = new Map<string, number>();
  probeNames(probes).forEach(({ probe, name }, at) => {
    const place = [...path, "probes", at];
    const twin = places.get(name);
    if (twin === undefined) places.set(name, at);
    else complaints.add([...place, "label"], `is that of probe ${twin} as well (${name})`);
    if (probe.kind === "taylor") {
      checkLengths(probe.steps, probe.remainders, [...place, "remainders"], complaints);
      checkOrder(probe.steps, [...place, "steps"], complaints);
    }
    if (probe.kind === "directional") {
      checkLengths(probe.derivative, probe.reference, [...place, "reference"], complaints);
    }
  });
}

function checkLengths(a: readonly unknown[], b: readonly unknown[], path: Path, complaints: Complaints): void {
  if (a.length !== b.length) complaints.add(path, `has ${b.length} numbers, expected ${a.length}`);
}

/** Steps go one way: each smaller than the one before, or each larger. */
function checkOrder(steps: readonly number[], path: Path, complaints: Complaints): void {
  const falling = steps[0] > steps[1];
  const at = steps.findIndex((step, k) => k > 0 && !(falling ? step < steps[k - 1] : step > steps[k - 1]));
  if (at < 0) return;
  const detail = steps[at] === steps[at - 1] ? "is the step before it again" : "breaks the order of the steps";
  complaints.add([...path, at], `${detail}: each must be smaller than the one before, or each larger`);
}

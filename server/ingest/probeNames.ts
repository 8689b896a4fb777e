import type { PostedProbe } from "../../shared/schemas/build.ts";

export interface NamedProbe {
  readonly probe: PostedProbe;
  /** As posted, else the probe's number among those of its kind, from 1. */
  readonly label: string;
  /** What its block is called beside the Jacobian's names. */
  readonly name: string;
}

/** The probes of a block with their names; two of one name are for the caller to refuse. */
export function probeNames(probes: readonly PostedProbe[]): NamedProbe[] {
  const seen = new Map<PostedProbe["kind"], number>();
  return probes.map((probe) => {
    const number = (seen.get(probe.kind) ?? 0) + 1;
    seen.set(probe.kind, number);
    const label = probe.label ?? String(number);
    return { probe, label, name: `${probe.kind}: ${label}` };
  });
}

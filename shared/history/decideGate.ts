import { gateBlockFindings } from "./gateBlockFindings.ts";
import { gateEntryFindings } from "./gateEntryFindings.ts";
import { gateRiseFindings } from "./gateRiseFindings.ts";
import type { GateCode, GatePolicy } from "../domain/vocabulary.ts";
import type { GateFinding, GateInput, GateOutcome, GateReason } from "./types.ts";

/** Reasons in one answer; what is over is told in the last of them. */
const MOST_REASONS = 100;

/** Worst first, among reasons of one severity. */
const GRAVITY: readonly GateCode[] = [
  "invalid-values",
  "new-break",
  "worse-than-waiver",
  "probe-failed",
  "block-missing",
  "climb",
  "reference-missing",
  "resolution-lost",
  "no-build",
];

/**
 * May this be merged? Only what is new against the base speaks: `fail` if the project's policy lets one of the
 * findings fail, else `pass`; `wait` while shards are missing; `unknown` without a build. Reasons come worst first, one
 * for each code and break (or block). The order of the input does not matter.
 */
export function decideGate(input: GateInput): GateOutcome {
  if (input.state === "receiving") return { decision: "wait", reasons: [] };
  if (input.state === null) {
    const message = `there is no build of ${input.commit.slice(0, 12)} in lane ${input.lane}`;
    return { decision: "unknown", reasons: [reason({ code: "no-build", message, weight: 0 }, input.policy)] };
  }
  const findings = [...gateEntryFindings(input), ...gateBlockFindings(input), ...gateRiseFindings(input.rises)];
  const reasons = findings.sort(worstFirst(input.policy)).map((finding) => reason(finding, input.policy));
  return {
    decision: reasons.some(({ severity }) => severity === "fail") ? "fail" : "pass",
    reasons: shortened(reasons),
  };
}

function reason({ weight: _, ...told }: GateFinding, policy: GatePolicy): GateReason {
  return { ...told, severity: policy[told.code] };
}

function worstFirst(policy: GatePolicy): (a: GateFinding, b: GateFinding) => number {
  return (a, b) => {
    if (policy[a.code] !== policy[b.code]) return policy[a.code] === "fail" ? -1 : 1;
    if (a.code !== b.code) return GRAVITY.indexOf(a.code) - GRAVITY.indexOf(b.code);
    if (a.weight !== b.weight) return a.weight > b.weight ? -1 : 1;
    return a.message < b.message ? -1 : 1;
  };
}

function shortened(reasons: readonly GateReason[]): readonly GateReason[] {
  if (reasons.length <= MOST_REASONS) return reasons;
  const left = reasons.slice(MOST_REASONS - 1);
  const { code, severity } = left[0]!;
  return [
    ...reasons.slice(0, MOST_REASONS - 1),
    { code, severity, message: `and ${left.length} more findings, shown on the page of the build` },
  ];
}

/**
 * The words of the house, as data: each list is the single source of an enumeration that the API, the
 * database planes, the pages and the mail share. The order of VERDICTS and MOTIONS is stored in byte planes:
 * append, never reorder.
 */

/** Verdict of an entry; its index here is the byte in a verdict plane. */
export const VERDICTS = ["agrees", "disagrees", "unresolved", "unreferenced", "invalid"] as const;
export type Verdict = (typeof VERDICTS)[number];

/** Byte codes of the verdict plane, named so that kernels do not compare with bare numbers. */
export const VERDICT_CODE = {
  agrees: 0,
  disagrees: 1,
  unresolved: 2,
  unreferenced: 3,
  invalid: 4,
} as const satisfies Record<Verdict, number>;

/** True for the codes of verdicts that break an entry. */
export function isBadVerdict(code: number): boolean {
  return code === VERDICT_CODE.disagrees || code === VERDICT_CODE.invalid;
}

/** Motion of an entry since the previous build of its lane; its index here is the byte in a motion plane. */
export const MOTIONS = ["still", "together", "derivative-only", "model-only", "apart"] as const;
export type Motion = (typeof MOTIONS)[number];
export const MOTION_CODE = {
  still: 0,
  together: 1,
  "derivative-only": 2,
  "model-only": 3,
  apart: 4,
} as const satisfies Record<Motion, number>;

export const DERIVATIVE_METHODS = ["analytic", "ad-forward", "ad-reverse", "mixed"] as const;

export const REFERENCE_METHODS = [
  "forward-difference",
  "backward-difference",
  "central-difference",
  "complex-step",
  "analytic",
  "ad-forward",
  "ad-reverse",
  "high-precision",
] as const;
export type ReferenceMethod = (typeof REFERENCE_METHODS)[number];

/** How the uncertainty of a reference was come by. */
export const UNCERTAINTY_KINDS = ["stated", "measured", "modelled"] as const;
export type UncertaintyKind = (typeof UNCERTAINTY_KINDS)[number];

/** Checks that need no full Jacobian. */
export const PROBE_KINDS = ["dot-product", "taylor", "directional"] as const;
export type ProbeKind = (typeof PROBE_KINDS)[number];

export const STEP_KINDS = ["absolute", "relative"] as const;
export type StepKind = (typeof STEP_KINDS)[number];

export const BUILD_STATES = ["receiving", "complete"] as const;
export type BuildState = (typeof BUILD_STATES)[number];

export const BREAK_STATES = ["open", "repaired", "waived"] as const;

export const GATE_DECISIONS = ["pass", "fail", "wait", "unknown"] as const;
export type GateDecision = (typeof GATE_DECISIONS)[number];

export const GATE_CODES = [
  "new-break",
  "worse-than-waiver",
  "invalid-values",
  "probe-failed",
  "block-missing",
  "reference-missing",
  "resolution-lost",
  "climb",
  "no-build",
] as const;
export type GateCode = (typeof GATE_CODES)[number];

export const GATE_SEVERITIES = ["fail", "warn"] as const;
export type GateSeverity = (typeof GATE_SEVERITIES)[number];

/** Project policy: what each gate reason means for a merge. */
export type GatePolicy = Record<GateCode, GateSeverity>;
export const DEFAULT_GATE_POLICY: GatePolicy = {
  "new-break": "fail",
  "worse-than-waiver": "fail",
  "invalid-values": "fail",
  "probe-failed": "fail",
  "block-missing": "fail",
  "reference-missing": "warn",
  "resolution-lost": "warn",
  climb: "warn",
  "no-build": "warn",
};

/** Recognised kinds of mistake, of the derivative and of the reference. */
export const SIGNATURES = [
  "sign-flipped",
  "unit-factor",
  "scaled",
  "transposed",
  "storage-order",
  "rows-reordered",
  "columns-reordered",
  "term-missing",
  "spurious-term",
  "single-precision",
  "left-behind",
  "uneven-solve",
  "not-finite",
  "reference-dropped-imaginary",
  "reference-saw-no-change",
  "reference-cancelled",
  "reference-truncated",
  "references-conflict",
  "reference-not-finite",
] as const;
export type SignatureCode = (typeof SIGNATURES)[number];

/** How much of a block a signature speaks of. */
export const SIGNATURE_SCOPES = ["block", "row", "column", "entry"] as const;
export type SignatureScope = (typeof SIGNATURE_SCOPES)[number];

export const WANTED_REASONS = ["halves-suspects", "silent-lane", "requested"] as const;

/** Why a column is worth checking in the next build. */
export const PLAN_REASONS = [
  "open-break",
  "climb",
  "source-changed",
  "never-checked",
  "near-limit",
  "unresolved",
  "rotation",
] as const;
export type PlanReason = (typeof PLAN_REASONS)[number];

export const WAIVER_STATES = ["asked", "approved", "rejected", "ended"] as const;
export type WaiverState = (typeof WAIVER_STATES)[number];

/** Name of the lane and of the point when none is posted. */
export const DEFAULT_LANE = "default";
export const DEFAULT_POINT = "nominal";

/** The caution shown with every result that leaves the record (pages, exports, mail). */
export const CAUTION =
  "Agreement at the sampled points is evidence about those points only; it does not validate the model or certify a design. Where a design can hurt someone, its approval stays with the responsible, licensed engineer and with the codes and authorities that apply locally.";

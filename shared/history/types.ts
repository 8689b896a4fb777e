import type { GatePolicy, Motion } from "../domain/vocabulary.ts";
import type { GateCode, GateDecision, GateSeverity } from "../domain/vocabulary.ts";

/** A commit as the tracer needs it. Unknown parents are simply absent from the graph. */
export interface CommitNode {
  readonly sha: string;
  /** First parent first. */
  readonly parents: readonly string[];
  /** Milliseconds since 1970, or null if never told: only orders what the graph leaves open. */
  readonly committedAt: number | null;
}

/** What one build says about one class of entries. */
export type Test = "good" | "bad";

/** Which commits tell something of a class of entries; every other commit does not test it. */
export type Tests = ReadonlyMap<string, Test>;

/**
 * Why an onset has the suspects it has: it came after a good ancestor; no ancestor was ever tested; or none was tested
 * and a good commit on another line contains a bad one, so that it holds a fix and says nothing of the suspects.
 */
export type OnsetKind = "after-good" | "since-first-check" | "fixed-between";

/** A break of one class of entries, as the graph tells it. */
export interface TracedBreak {
  /** Earliest commit known to be bad. */
  readonly onset: string;
  /** Nearest tested good ancestor of the onset (on the way back along first parents first), or null. */
  readonly lastGood: string | null;
  /** Commits that may be guilty, in topological order, oldest first; always contains the guilty commit. */
  readonly suspects: readonly string[];
  readonly kind: OnsetKind;
  /** Where one line is good again while another goes on: the last bad commit of the good line and its good commit. */
  readonly fixedBetween: FixedBetween | null;
  /** True where a suspect has parents that were never told: the guilty commit may lie before what is known. */
  readonly historyIncomplete: boolean;
  /** Every tested bad commit that belongs to this break, in topological order. */
  readonly bad: readonly string[];
  /**
   * First tested descendant at which the entries agree again and after which this break was not seen any more, on any
   * line (or, with `TraceOptions.tip`, in the history of that commit); null while open.
   */
  readonly repairedBy: string | null;
}

export interface FixedBetween {
  readonly bad: string;
  readonly good: string;
}

export interface TraceOptions {
  /** Look for repairs among this commit and its ancestors only (the tip of the line whose state is told). */
  readonly tip?: string | undefined;
}

/** What a break is at the tip of a line; `absent`: the line does not contain its onset. */
export type BreakStateOnLine = "open" | "repaired" | "absent";

/** Entries of one block that share one history, as they enter a group. */
export interface TracedEntries {
  readonly blockId: string;
  /** Flat row-major indices of the entries, ascending. */
  readonly entries: Uint32Array;
  readonly traced: TracedBreak;
}

/** A break of a lane: all entries, of whatever block, with the same onset and the same suspects. */
export interface BreakGroup extends TracedBreak {
  /** By block id; the entries of one block are merged and ascending. */
  readonly blocks: readonly { readonly blockId: string; readonly entries: Uint32Array }[];
  readonly entryCount: number;
}

/** Entries of one block with the same answers in every plane. */
export interface EntryClass {
  /** Flat row-major indices, ascending. */
  readonly entries: Uint32Array;
  /** One per plane; null where the plane does not test the entries. */
  readonly tests: readonly (Test | null)[];
}

/** A commit worth building next: it halves the suspects. */
export interface NextTest {
  readonly commit: string;
  /** Suspects that remain in the worse of the two outcomes. */
  readonly remainingAfter: number;
  /** `merge-base`: a good commit on another line contains it, so it is worth knowing before any other. */
  readonly why: "halves" | "merge-base";
}

export interface NextTestOptions {
  /** Commits that need no build any more: tested ones, and those that were built and could not tell. */
  readonly tested: { has(sha: string): boolean };
  /** Good commits that are no ancestors of the onset; see `goodElsewhere`. */
  readonly goodElsewhere: Iterable<string>;
}

export interface SuspectScore {
  readonly sha: string;
  /** 0..1, sums to 1 over the suspects. */
  readonly score: number;
  /** Reasons in words, most weighty first. */
  readonly why: readonly string[];
}

/** What the scorer may know of a suspect. */
export interface SuspectFacts {
  readonly sha: string;
  readonly changedPaths: readonly string[] | null;
  readonly author: string | null;
  /** True for the commit whose build was the first bad one. */
  readonly isOnset: boolean;
  /** True where a good build elsewhere contains it: it may be cleared or fixed there. */
  readonly containedInGood: boolean;
}

export interface ScoreContext {
  readonly models: readonly string[];
  readonly sources: readonly string[];
  readonly motion: Motion | null;
  /** Names or addresses of the models' owners, where known. */
  readonly owners?: readonly string[];
}

/** State of one block in one build, as far as the gate looks. */
export interface GateBlock {
  readonly blockId: string;
  readonly model: string;
  readonly block: string;
  /** Where it is a probe of the block: what it is called, and what it came to as a clause. */
  readonly probe?: { readonly name: string; readonly sentence: string } | null;
  readonly unreferenced: number;
  readonly unresolved: number;
  readonly entries: number;
}

/** An entry that is bad at the gated commit, with what the base says of it. */
export interface GateEntry {
  readonly blockId: string;
  readonly row: number;
  readonly column: number;
  readonly verdict: "disagrees" | "invalid";
  /** Relative error; NaN where the entry is invalid or carried. */
  readonly error: number;
  /** True where the entry was not checked here and keeps the verdict of an earlier build. */
  readonly carried?: boolean;
  /** True where the base commit's build has the same entry bad already. */
  readonly badAtBase: boolean;
  /** Its relative error at the base, where known: what exceeded its waiver there already is not new here. */
  readonly errorAtBase?: number | null;
  readonly breakId: string | null;
  /** Largest error an approved, unexpired waiver allows here, or null without one. */
  readonly waivedUpTo: number | null;
}

/** A climb or jump as the gate tells it. */
export interface GateRise {
  readonly kind: "climb" | "jump";
  readonly model: string;
  readonly block: string;
  readonly row: number;
  readonly column: number;
  readonly entryCount: number;
  /** Of the worst entry, named by block, row and column. */
  readonly decades: number;
}

export interface GateInput {
  readonly lane: string;
  readonly commit: string;
  readonly base: string | null;
  /** State of the newest build of the commit in the lane; null when there is none. */
  readonly state: "complete" | "receiving" | null;
  readonly head: readonly GateBlock[];
  readonly baseBlocks: readonly GateBlock[];
  readonly bad: readonly GateEntry[];
  /** Climbs and jumps that were told after the base, up to the commit. */
  readonly rises: readonly GateRise[];
  readonly policy: GatePolicy;
}

/** What the gate found of one kind in one break or block, before the project's policy is asked. */
export interface GateFinding {
  readonly code: GateCode;
  /** A sentence without its full stop. */
  readonly message: string;
  /** Orders findings of one code, worst first: the largest relative error, or a number of entries. */
  readonly weight: number;
  readonly model?: string;
  readonly block?: string;
  readonly row?: number;
  readonly column?: number;
  readonly breakId?: string;
}

export interface GateReason {
  readonly code: GateCode;
  readonly severity: GateSeverity;
  readonly message: string;
  readonly model?: string;
  readonly block?: string;
  readonly row?: number;
  readonly column?: number;
  readonly breakId?: string;
}

export interface GateOutcome {
  readonly decision: GateDecision;
  readonly reasons: readonly GateReason[];
}

import type { SuspectScore } from "../../../shared/history/types.ts";
import type { BreakDetail, BreakEntry, BreakRow, Signature } from "../../../shared/schemas/break.ts";
import type { Actor } from "../../http/actor.ts";
import { time, timeOrNull } from "../../http/present.ts";
import type { CommitFacts } from "../../record/commitFacts.ts";
import { presentEntryValues } from "../../record/entryValues.ts";
import { presentSignature } from "../../record/storedSignature.ts";
import type { StoredBreakWorst, StoredTrace } from "../../trace/storedTrace.ts";
import type { Urls } from "../builds/urls.ts";
import { abilities } from "../policies.ts";
import type { Action } from "../policies.ts";
import type { BreakEntryValues } from "./loadBreakEntries.ts";
import type { LoadedBreak } from "./loadBreaks.ts";
import { breakSentence, partsOf } from "./sentence.ts";
import type { ActiveWaiver } from "./waived.ts";

const SHOWN_ACTIONS = [
  "break.assign",
  "break.comment",
  "waiver.ask",
  "waiver.decide",
  "wanted.ask",
] as const satisfies readonly Action[];

const commitBuild = (commit: string | null, buildId: number | null) =>
  commit === null || buildId === null ? null : { commit, buildId: String(buildId) };

export function presentBreakRow(
  one: LoadedBreak,
  more: { readonly waived: boolean; readonly signatures: readonly Signature[] },
  urls: Urls,
): BreakRow {
  const id = String(one.id);
  const models = JSON.parse(one.models) as string[];
  const worst = JSON.parse(one.worst) as StoredBreakWorst;
  const trace = JSON.parse(one.trace) as StoredTrace;
  return {
    id,
    number: one.number,
    url: urls.break(id),
    state: more.waived ? "waived" : one.state,
    lane: one.lane,
    onset: { commit: one.onset, buildId: String(one.onsetBuildId) },
    onsetAt: timeOrNull(one.onsetAt),
    onsetSubject: one.onsetSubject,
    onsetAuthor: one.onsetAuthor,
    lastGood: commitBuild(one.lastGood, one.lastGoodBuildId),
    kind: one.kind,
    suspectCount: trace.suspects.length,
    entryCount: one.entryCount,
    models,
    worstError: worst.error,
    motion: one.motion,
    signatures: more.signatures.map(presentSignature),
    repairedBy: commitBuild(one.repairedBy, one.repairedByBuildId),
    assignee: one.assigneeId === null ? null : { id: String(one.assigneeId), name: one.assigneeName ?? "" },
    sentence: breakSentence({
      kind: one.kind,
      ...partsOf(one),
      models,
      invalid: worst.verdict === "invalid",
    }),
  };
}

export interface LoadedComment {
  readonly id: number;
  readonly authorId: number;
  readonly authorName: string;
  readonly body: string;
  readonly createdAt: number;
}

export function presentComment(comment: LoadedComment): BreakDetail["comments"][number] {
  return {
    id: String(comment.id),
    author: { id: String(comment.authorId), name: comment.authorName },
    body: comment.body,
    createdAt: time(comment.createdAt),
  };
}

export interface BreakParts {
  readonly entries: readonly BreakEntryValues[];
  readonly suspects: ReadonlyMap<string, CommitFacts>;
  readonly comments: readonly LoadedComment[];
  readonly signatures: readonly Signature[];
  readonly waiver: ActiveWaiver | null;
}

export function presentBreak(
  one: LoadedBreak,
  parts: BreakParts,
  place: { readonly projectId: number; readonly commitUrl: string | null; readonly urls: Urls; readonly actor: Actor },
): BreakDetail {
  const { waiver } = parts;
  const { nextTest, suspects } = JSON.parse(one.trace) as StoredTrace;
  return {
    ...presentBreakRow(one, { waived: waiver !== null, signatures: parts.signatures }, place.urls),
    suspects: presentSuspects(suspects, parts.suspects, place.commitUrl),
    nextTest: nextTest && { commit: nextTest.commit, remainingAfter: nextTest.remainingAfter },
    entries: parts.entries.map((entry) => presentEntry(entry, one)),
    waiver: waiver && {
      id: String(waiver.id),
      reason: waiver.reason,
      maxError: waiver.maxError,
      expiresAt: time(waiver.expiresAt),
    },
    comments: parts.comments.map(presentComment),
    abilities: abilities(place.actor, SHOWN_ACTIONS, { projectId: place.projectId }),
  };
}

/** Suspects as scored, with what is known of their commits. */
export function presentSuspects(
  suspects: readonly SuspectScore[],
  facts: ReadonlyMap<string, CommitFacts>,
  commitUrl: string | null,
): BreakDetail["suspects"] {
  return suspects.map(({ sha, score, why }) => {
    const commit = facts.get(sha);
    return {
      commit: sha,
      subject: commit?.subject ?? null,
      author: commit?.author ?? null,
      committedAt: timeOrNull(commit?.committedAt ?? null),
      changedPaths: commit?.changedPaths ? [...commit.changedPaths] : null,
      score,
      why: [...why],
      url: commitUrl && commitUrl.replaceAll("{sha}", sha),
    };
  });
}

function presentEntry({ block, entry, values, before }: BreakEntryValues, one: LoadedBreak): BreakEntry {
  const at = commitBuild(one.lastGood, one.lastGoodBuildId);
  return {
    blockId: String(block.blockId),
    model: block.model,
    output: block.output,
    input: block.input,
    point: block.point,
    probe: block.probe === "" ? null : block.probe,
    row: Math.floor(entry / block.columns),
    column: entry % block.columns,
    ...presentEntryValues(values),
    before: at === null || before === null ? null : { ...at, ...presentEntryValues(before) },
  };
}

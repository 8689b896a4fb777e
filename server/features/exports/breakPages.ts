import { groupBy } from "../../../shared/domain/groupBy.ts";
import type { Signature } from "../../../shared/schemas/break.ts";
import type { ExportedBreak } from "../../../shared/schemas/export.ts";
import type { Reader } from "../../db/reader.ts";
import { time, timeOrNull } from "../../http/present.ts";
import type { StoredBreakWorst, StoredTrace } from "../../trace/storedTrace.ts";
import { loadBreakPage, loadSignatures } from "../breaks/loadBreaks.ts";
import type { LoadedBreak } from "../breaks/loadBreaks.ts";
import { loadActiveWaivers, loadWaived } from "../breaks/waived.ts";
import { EXPORT_PAGE } from "./scope.ts";
import type { ExportScope } from "./scope.ts";

interface LoadedRemark {
  readonly breakId: number;
  readonly author: string;
  readonly createdAt: number;
  readonly body: string;
}

/** Breaks that began within the scope, by number, page by page. */
export async function* breakPages(reader: Reader, scope: ExportScope): AsyncGenerator<ExportedBreak[]> {
  const waivers = await loadActiveWaivers(reader, scope.projectId, scope.now);
  let after = 0;
  for (let full = true; full;) {
    const breaks = await loadBreakPage(reader, scope.projectId, scope, { after, limit: EXPORT_PAGE });
    const ids = breaks.map((one) => one.id);
    const waived = await loadWaived(reader, breaks, waivers);
    const signatures = await loadSignatures(reader, ids);
    const remarks = groupBy(await loadRemarks(reader, ids), (remark) => remark.breakId);
    if (breaks.length > 0) {
      yield breaks.map((one) =>
        exported(one, waived.has(one.id), signatures.get(one.id) ?? [], remarks.get(one.id) ?? []),
      );
    }
    full = breaks.length === EXPORT_PAGE;
    after = breaks.at(-1)?.number ?? after;
  }
}

function exported(
  one: LoadedBreak,
  waived: boolean,
  signatures: readonly Signature[],
  remarks: readonly LoadedRemark[],
): ExportedBreak {
  return {
    number: one.number,
    id: String(one.id),
    state: waived ? "waived" : one.state,
    lane: one.lane,
    onset: one.onset,
    onsetAt: timeOrNull(one.onsetAt),
    onsetBuildId: String(one.onsetBuildId),
    lastGood: one.lastGood,
    repairedBy: one.repairedBy,
    kind: one.kind,
    models: JSON.parse(one.models) as string[],
    entryCount: one.entryCount,
    worstError: (JSON.parse(one.worst) as StoredBreakWorst).error,
    motion: one.motion,
    signatures: signatures.map(({ code, share, detail }) => ({ code, share, detail })),
    suspects: (JSON.parse(one.trace) as StoredTrace).suspects.map((suspect) => suspect.sha),
    assignee: one.assigneeName,
    comments: remarks.map(({ author, createdAt, body }) => ({ author, at: time(createdAt), body })),
  };
}

function loadRemarks(reader: Reader, breakIds: readonly number[]): Promise<LoadedRemark[]> {
  return reader.select<LoadedRemark>(
    `SELECT m.breakId, u.name AS author, m.createdAt, m.body FROM comments m JOIN users u ON u.id = m.authorId
     WHERE m.breakId IN (SELECT value FROM json_each($1)) ORDER BY m.id`,
    [JSON.stringify(breakIds)],
  );
}

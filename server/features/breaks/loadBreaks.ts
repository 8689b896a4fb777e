import type { Signature } from "../../../shared/schemas/break.ts";
import { groupBy } from "../../../shared/domain/groupBy.ts";
import type { Reader } from "../../db/reader.ts";
import { unpackEntries } from "../../record/entryList.ts";
import type { StoredSignature } from "../../record/storedSignature.ts";
import type { ToldColumns } from "../../trace/storeBreaks.ts";
import { signaturesOfBreak } from "./breakSignatures.ts";
import type { RecognisedBlock } from "./breakSignatures.ts";

/** A break as the record has it; what is JSON there is text here. */
export interface LoadedBreak extends ToldColumns {
  readonly id: number;
  readonly number: number;
  readonly lane: string;
  readonly laneId: number;
  readonly onsetAt: number | null;
  readonly onsetSubject: string | null;
  readonly onsetAuthor: string | null;
  readonly assigneeId: number | null;
  readonly assigneeName: string | null;
  /** JSON: string[], names of the probes among its blocks. */
  readonly probes: string;
  /** Entries of those, each a number of 32 bits. */
  readonly probeEntries: number;
}

const OF_PROBES = "FROM break_entries e JOIN blocks k ON k.id = e.blockId WHERE e.breakId = b.id AND k.probe <> ''";
const SELECT = `
  SELECT b.id, b.number, l.name AS lane, b.laneId, b.state, b.kind, b.onset, b.onsetBuildId,
    c.committedAt AS onsetAt, c.subject AS onsetSubject, c.authorName AS onsetAuthor,
    b.lastGood, b.lastGoodBuildId, b.repairedBy, b.repairedByBuildId, b.trace, b.models, b.entryCount, b.worst,
    b.motion, b.assigneeId, u.name AS assigneeName, 
    (SELECT json_group_array(k.probe ORDER BY k.id) ${OF_PROBES}) AS probes,
    (SELECT COALESCE(sum(length(e.entries) / 4), 0) ${OF_PROBES}) AS probeEntries
  FROM breaks b JOIN lanes l ON l.id = b.laneId
  LEFT JOIN commits c ON c.projectId = b.projectId AND c.sha = b.onset LEFT JOIN users u ON u.id = b.assigneeId`;

/** Breaks of a project that were not withdrawn, newest first. */
export function loadBreaks(
  reader: Reader,
  projectId: number,
  filter: { readonly lane: string | null; readonly state: "open" | "repaired" | null },
): Promise<LoadedBreak[]> {
  return reader.select<LoadedBreak>(
    `${SELECT} WHERE b.projectId = $1 AND b.withdrawnAt IS NULL AND ($2 IS NULL OR l.name = $2)
       AND ($3 IS NULL OR b.state = $3) ORDER BY b.number DESC`,
    [projectId, filter.lane, filter.state],
  );
}

/** A break, or the one that took its entries since: people keep addresses. */
export async function loadBreak(reader: Reader, projectId: number, breakId: number): Promise<LoadedBreak | null> {
  const [found] = await reader.select<LoadedBreak>(
    `WITH RECURSIVE successors (id, next, withdrawnAt) AS (
       SELECT id, supersededById, withdrawnAt FROM breaks WHERE id = $2 AND projectId = $1
       UNION SELECT b.id, b.supersededById, b.withdrawnAt FROM breaks b JOIN successors s ON b.id = s.next)
     ${SELECT} WHERE b.id = (SELECT id FROM successors WHERE withdrawnAt IS NULL LIMIT 1)`,
    [projectId, breakId],
  );
  return found ?? null;
}

/** What was recognised in the blocks of each break at its onset, by break. */
export async function loadSignatures(reader: Reader, breakIds: readonly number[]): Promise<Map<number, Signature[]>> {
  const rows = await reader.select<RecognisedRow>(
    `SELECT e.breakId, e.columnCount AS columns, e.entries, d.details ->> '$.signatures' AS signatures, m.leftBehind
     FROM break_entries e JOIN breaks b ON b.id = e.breakId
     JOIN build_blocks bb ON bb.buildId = b.onsetBuildId AND bb.blockId = e.blockId
     JOIN snapshots s ON s.id = bb.snapshotId AND s.columnCount = e.columnCount
     JOIN block_details d ON d.id = bb.detailsId LEFT JOIN motions m ON m.id = bb.motionId
     WHERE e.breakId IN (SELECT value FROM json_each($1)) ORDER BY e.breakId, e.blockId`,
    [JSON.stringify(breakIds)],
  );
  return new Map(
    [...groupBy(rows, (row) => row.breakId)].map(([breakId, blocks]) => [
      breakId,
      signaturesOfBreak(blocks.map(recognised)),
    ]),
  );
}

interface RecognisedRow {
  readonly breakId: number;
  readonly columns: number;
  readonly entries: Buffer;
  /** JSON: StoredSignature[], and StoredSignature. */
  readonly signatures: string;
  readonly leftBehind: string | null;
}

function recognised({ columns, entries, signatures, leftBehind }: RecognisedRow): RecognisedBlock {
  const found = JSON.parse(signatures) as StoredSignature[];
  const old = leftBehind === null ? [] : [JSON.parse(leftBehind) as StoredSignature];
  return { columns, entries: unpackEntries(entries), signatures: [...old, ...found] };
}

/** Breaks that were not withdrawn and began within [from, to), by commit time or else when they were found, by number. */
export function loadBreakPage(
  reader: Reader,
  projectId: number,
  filter: { readonly lane: string | null; readonly from: number | null; readonly to: number | null },
  page: { readonly after: number; readonly limit: number },
): Promise<LoadedBreak[]> {
  const began = "COALESCE(c.committedAt, b.createdAt)";
  return reader.select<LoadedBreak>(
    `${SELECT} WHERE b.projectId = $1 AND b.withdrawnAt IS NULL AND ($2 IS NULL OR l.name = $2)
       AND ($3 IS NULL OR ${began} >= $3) AND ($4 IS NULL OR ${began} < $4)
       AND b.number > $5 ORDER BY b.number LIMIT $6`,
    [projectId, filter.lane, filter.from, filter.to, page.after, page.limit],
  );
}

import { isBadVerdict, VERDICT_CODE } from "../../../shared/domain/vocabulary.ts";
import { selects, selectsEntry } from "../../../shared/domain/selector.ts";
import type { BlockName } from "../../../shared/domain/selector.ts";
import type { GateEntry } from "../../../shared/history/types.ts";
import { relativeError } from "../../../shared/numerics/verdict/relativeError.ts";
import type { Reader } from "../../db/reader.ts";
import { unpackEntries } from "../../record/entryList.ts";
import { loadSnapshots, loadSparsePlanes, withCoverage } from "../../record/readPlanes.ts";
import type { SnapshotPlanes, SparsePlane } from "../../record/readPlanes.ts";
import { loadBadEntries } from "../../trace/everBad.ts";
import type { StoredTrace } from "../../trace/storedTrace.ts";
import { loadActiveWaivers } from "../breaks/waived.ts";
import type { ActiveWaiver } from "../breaks/waived.ts";
import type { GateBlockRow } from "./loadGate.ts";

interface Place {
  readonly projectId: number;
  readonly lane: string;
  readonly laneId: number;
  readonly commit: string;
}

/** Bad entries of one block that the gate looks at one by one; beyond, the first of them stand for the rest. */
const MOST_ENTRIES_OF_A_BLOCK = 50_000;

/**
 * The bad entries of a build that may be new against its base. A block whose numbers are those of the base has none,
 * and is not read, unless a waiver's bound has to be looked at.
 */
export async function loadGateEntries(
  reader: Reader,
  place: Place,
  head: readonly GateBlockRow[],
  baseBlocks: readonly GateBlockRow[],
  now: number,
): Promise<GateEntry[]> {
  const suspicious = head.filter((block) => block.bad > 0);
  if (suspicious.length === 0) return [];
  const waivers = await loadActiveWaivers(reader, place.projectId, now);
  const before = new Map(baseBlocks.map((block) => [block.blockId, block]));
  const changed = suspicious.filter((block) => {
    const same = before.get(block.blockId)?.snapshotId === block.snapshotId && block.coveragePlanes === null;
    return !same || waivers.some(({ selector }) => selects(selector, nameOf(block), place.lane));
  });
  if (changed.length === 0) return [];
  const snapshots = await loadSnapshots(
    reader,
    changed.flatMap((block) => [block.snapshotId, before.get(block.blockId)?.snapshotId ?? block.snapshotId]),
  );
  const breakOf = await loadBreakOf(reader, place, changed);
  const entries: GateEntry[] = [];
  for (const block of changed) {
    const then = before.get(block.blockId);
    const told = (one: GateBlockRow) =>
      withCoverage(snapshots.get(one.snapshotId) as SnapshotPlanes, one.coveragePlanes);
    const snapshot = told(block);
    const base = then ? told(then) : null;
    const covering = waivers.filter(({ selector }) => selects(selector, nameOf(block), place.lane));
    entries.push(...(await entriesOf(reader, block, snapshot, base, covering, breakOf)));
  }
  return entries;
}

function nameOf({ model, output, input, point, probe }: GateBlockRow): BlockName {
  return { model, output, input, point, probe: probe?.name ?? "" };
}

async function entriesOf(
  reader: Reader,
  block: GateBlockRow,
  snapshot: SnapshotPlanes,
  base: SnapshotPlanes | null,
  waivers: readonly ActiveWaiver[],
  breakOf: (blockId: string, columns: number, entry: number) => string | null,
): Promise<GateEntry[]> {
  const bad = (await loadBadEntries(reader, snapshot)).subarray(0, MOST_ENTRIES_OF_A_BLOCK);
  const sameShape = base !== null && base.columns === snapshot.columns && base.rows >= snapshot.rows;
  const names = ["derivative", "reference", "verdict"] as const;
  const sides = sameShape ? [snapshot, base] : [snapshot];
  const [now, then] = await loadSparsePlanes(
    reader,
    sides.map((side) => ({ snapshot: side, entries: bad })),
    names,
  );
  return Array.from(bad, (entry): GateEntry => {
    const row = Math.floor(entry / snapshot.columns);
    const column = entry % snapshot.columns;
    const badThen = then !== undefined && isBadVerdict(then.verdict.at(entry));
    return {
      blockId: block.blockId,
      row,
      column,
      verdict: now.verdict.at(entry) === VERDICT_CODE.invalid ? "invalid" : "disagrees",
      error: errorAt(now, entry, snapshot.floor),
      carried: now.verdict.at(entry) === VERDICT_CODE.disagrees && Number.isNaN(now.reference.at(entry)),
      badAtBase: badThen,
      errorAtBase: badThen && base ? errorAt(then, entry, base.floor) : null,
      breakId: breakOf(block.blockId, snapshot.columns, entry),
      waivedUpTo: widestBound(waivers, row, column),
    };
  });
}

function errorAt(planes: Record<"derivative" | "reference", SparsePlane>, entry: number, floor: number): number {
  return relativeError(planes.derivative.at(entry), planes.reference.at(entry), floor);
}

function widestBound(waivers: readonly ActiveWaiver[], row: number, column: number): number | null {
  const bounds = waivers.filter(({ selector }) => selectsEntry(selector, row, column)).map(({ maxError }) => maxError);
  return bounds.length === 0 ? null : Math.max(...bounds);
}

/** Which break an entry belongs to at the commit. */
async function loadBreakOf(
  reader: Reader,
  place: Place,
  blocks: readonly GateBlockRow[],
): Promise<(blockId: string, columns: number, entry: number) => string | null> {
  const rows = await reader.select<{ id: number; trace: string; blockId: number; columns: number; entries: Buffer }>(
    `SELECT b.id, b.trace, e.blockId, e.columnCount AS columns, e.entries
     FROM breaks b JOIN break_entries e ON e.breakId = b.id
     WHERE b.laneId = $1 AND b.withdrawnAt IS NULL AND e.blockId IN (SELECT value FROM json_each($2))`,
    [place.laneId, JSON.stringify(blocks.map((block) => Number(block.blockId)))],
  );
  const lists = rows
    .filter(({ trace }) => (JSON.parse(trace) as StoredTrace).bad.includes(place.commit))
    .map(({ id, blockId, columns, entries }) => ({
      id: String(id),
      blockId: String(blockId),
      columns,
      entries: new Set(unpackEntries(entries)),
    }));
  return (blockId, columns, entry) =>
    lists.find((list) => list.blockId === blockId && list.columns === columns && list.entries.has(entry))?.id ?? null;
}

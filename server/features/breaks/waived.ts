import { selects, selectsEntry } from "../../../shared/domain/selector.ts";
import type { Selector } from "../../../shared/domain/selector.ts";
import type { Reader } from "../../db/reader.ts";
import { loadLaneBuilds } from "../../record/laneBuilds.ts";
import type { LaneBuild } from "../../record/laneBuilds.ts";
import type { StoredTrace } from "../../trace/storedTrace.ts";
import { loadBreakBlocks, loadValues } from "./loadBreakEntries.ts";
import type { BlockValues, BreakBlock } from "./loadBreakEntries.ts";
import type { LoadedBreak } from "./loadBreaks.ts";

/** A waiver that counts: approved and not past its end. */
export interface ActiveWaiver {
  readonly id: number;
  readonly selector: Selector;
  readonly reason: string;
  readonly maxError: number;
  readonly expiresAt: number;
}

export async function loadActiveWaivers(reader: Reader, projectId: number, now: number): Promise<ActiveWaiver[]> {
  const rows = await reader.select<Omit<ActiveWaiver, "selector"> & { selector: string }>(
    `SELECT id, selector, reason, maxError, expiresAt FROM waivers
     WHERE projectId = $1 AND state = 'approved' AND expiresAt > $2 ORDER BY id`,
    [projectId, now],
  );
  return rows.map((row) => ({ ...row, selector: JSON.parse(row.selector) as Selector }));
}

/**
 * The waivers that cover open breaks as a whole, by break: every entry's error in the newest bad build is within the
 * bound of a waiver that selects it. Of several the one that ends first is told.
 */
export async function loadWaived(
  reader: Reader,
  breaks: readonly LoadedBreak[],
  waivers: readonly ActiveWaiver[],
): Promise<Map<number, ActiveWaiver>> {
  const waived = new Map<number, ActiveWaiver>();
  if (waivers.length === 0) return waived;
  const speaking = new Map<number, ReadonlyMap<string, LaneBuild>>();
  for (const one of breaks) {
    if (one.state !== "open") continue;
    const builds = speaking.get(one.laneId) ?? (await loadLaneBuilds(reader, one.laneId)).speaking;
    speaking.set(one.laneId, builds);
    const newest = (JSON.parse(one.trace) as StoredTrace).bad.at(-1) ?? one.onset;
    const cover = await coverOf(reader, one, builds.get(newest)?.id ?? one.onsetBuildId, waivers);
    if (cover !== null) waived.set(one.id, cover);
  }
  return waived;
}

async function coverOf(
  reader: Reader,
  one: LoadedBreak,
  newestBuildId: number,
  waivers: readonly ActiveWaiver[],
): Promise<ActiveWaiver | null> {
  const blocks = await loadBreakBlocks(reader, one.id);
  const covering = blocks.map((block) => waivers.filter(({ selector }) => selects(selector, block, one.lane)));
  if (covering.some((list) => list.length === 0)) return null;
  const now = await loadValues(reader, newestBuildId, blocks);
  const then = await loadValues(reader, one.onsetBuildId, blocks);
  const used = new Set<ActiveWaiver>();
  for (const [at, block] of blocks.entries()) {
    for (const entry of block.entries) {
      const waiver = boundFor(block, entry, covering[at], now[at], then[at]);
      if (waiver === undefined) return null;
      used.add(waiver);
    }
  }
  return [...used].sort((a, b) => a.expiresAt - b.expiresAt)[0] ?? null;
}

/** A number that is not finite has no error that a bound could hold. */
function boundFor(
  block: BreakBlock,
  entry: number,
  waivers: readonly ActiveWaiver[],
  now: BlockValues,
  then: BlockValues,
): ActiveWaiver | undefined {
  const error = (now(entry) ?? then(entry))?.error ?? NaN;
  const row = Math.floor(entry / block.columns);
  const column = entry % block.columns;
  return waivers.find(({ selector, maxError }) => selectsEntry(selector, row, column) && error <= maxError);
}

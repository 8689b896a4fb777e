import { globToRegExp } from "../../../shared/domain/selector.ts";
import type { Selector } from "../../../shared/domain/selector.ts";
import type { BaselineRow } from "../../../shared/schemas/baseline.ts";
import type { ExportedWaiver } from "../../../shared/schemas/export.ts";
import type { Reader } from "../../db/reader.ts";
import { time, timeOrNull } from "../../http/present.ts";
import { EXPORT_PAGE, within } from "./scope.ts";
import type { ExportScope } from "./scope.ts";

interface Decided {
  readonly id: number;
  readonly selector: string;
  readonly reason: string;
}

interface WaiverLine extends Decided {
  readonly state: ExportedWaiver["state"];
  readonly maxError: number;
  readonly expiresAt: number;
  readonly askedBy: string | null;
  readonly askedAt: number;
  readonly decidedBy: string | null;
  readonly decidedAt: number | null;
}

interface BaselineLine extends Decided {
  readonly sha: string;
  readonly acceptedBy: string | null;
  readonly acceptedAt: number;
}

/** Waivers that were asked for within the scope. */
export async function* waiverPages(reader: Reader, scope: ExportScope): AsyncGenerator<ExportedWaiver[]> {
  const sql = `SELECT w.id, w.state, w.selector, w.reason, w.maxError, w.expiresAt, a.name AS askedBy, w.askedAt,
      d.name AS decidedBy, w.decidedAt
    FROM waivers w LEFT JOIN users a ON a.id = w.askedById LEFT JOIN users d ON d.id = w.decidedById
    WHERE w.projectId = $1 AND ${within("w.askedAt", 2)} AND w.id > $4 ORDER BY w.id LIMIT $5`;
  for await (const rows of decisions<WaiverLine>(reader, scope, sql)) {
    yield rows.map(({ row, selector }) => ({
      id: String(row.id),
      state: row.state,
      selector: { ...selector } as ExportedWaiver["selector"],
      reason: row.reason,
      maxError: row.maxError,
      expiresAt: time(row.expiresAt),
      askedBy: row.askedBy,
      askedAt: time(row.askedAt),
      decidedBy: row.decidedBy,
      decidedAt: timeOrNull(row.decidedAt),
    }));
  }
}

/** Baselines that were accepted within the scope. */
export async function* baselinePages(reader: Reader, scope: ExportScope): AsyncGenerator<BaselineRow[]> {
  const sql = `SELECT b.id, b.selector, b.sha, b.reason, u.name AS acceptedBy, b.acceptedAt
    FROM baselines b LEFT JOIN users u ON u.id = b.acceptedById
    WHERE b.projectId = $1 AND ${within("b.acceptedAt", 2)} AND b.id > $4 ORDER BY b.id LIMIT $5`;
  for await (const rows of decisions<BaselineLine>(reader, scope, sql)) {
    yield rows.map(({ row, selector }) => ({
      id: String(row.id),
      selector: { ...selector } as BaselineRow["selector"],
      commit: row.sha,
      reason: row.reason,
      acceptedBy: row.acceptedBy,
      acceptedAt: time(row.acceptedAt),
    }));
  }
}

/** Rows by id, page by page, of those whose selector covers the lane of the scope. */
async function* decisions<R extends Decided>(reader: Reader, scope: ExportScope, sql: string) {
  let after = 0;
  for (let full = true; full;) {
    const rows = await reader.select<R>(sql, [scope.projectId, scope.from, scope.to, after, EXPORT_PAGE]);
    const known = rows.map((row) => ({ row, selector: JSON.parse(row.selector) as Selector }));
    const covering = known.filter(({ selector }) => coversLane(selector, scope.lane));
    if (covering.length > 0) yield covering;
    full = rows.length === EXPORT_PAGE;
    after = rows.at(-1)?.id ?? after;
  }
}

function coversLane({ lane: glob }: Selector, lane: string | null): boolean {
  return lane === null || glob === undefined || globToRegExp(glob).test(lane);
}

import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";

/**
 * SQL of what a build says of a block: its own verdicts, or with earlier checks heard where it has a coverage. Columns
 * over `bb` (build_blocks), `s` (snapshots) and `v`, which `JOIN_COVERAGE` brings in.
 */
export const JOIN_COVERAGE = "LEFT JOIN coverages v ON v.id = bb.coverageId";

/** One count. */
export const countSql = (name: Verdict) => `CASE WHEN v.id IS NULL THEN s.${name} ELSE v.counts ->> '$.${name}' END`;

export const COUNTS_SQL = [
  "s.rowCount * s.columnCount AS entries",
  ...VERDICTS.map((verdict) => `${countSql(verdict)} AS ${verdict}`),
  "COALESCE(v.counts ->> '$.carried', 0) AS carried",
].join(", ");

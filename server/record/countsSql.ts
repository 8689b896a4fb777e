import { VERDICTS } from "../../shared/domain/vocabulary.ts";

/**
 * SQL of what a build says of a block: its own verdicts, or with earlier checks heard where it has a coverage. Columns
 * over `bb` (build_blocks), `s` (snapshots) and `v`, which `JOIN_COVERAGE` brings in.
 */
export const JOIN_COVERAGE = "LEFT JOIN coverages v ON v.id = bb.coverageId";

export const COUNTS_SQL = [
  "s.rowCount * s.columnCount AS entries",
  ...VERDICTS.map((verdict) => `COALESCE(v.counts ->> '$.${verdict}', s.${verdict}) AS ${verdict}`),
  "COALESCE(v.counts ->> '$.carried', 0) AS carried",
].join(", ");

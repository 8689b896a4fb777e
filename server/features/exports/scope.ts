/** What of a project's record is exported. Times in milliseconds since 1970, `to` exclusive; null = no bound. */
export interface ExportScope {
  readonly projectId: number;
  readonly lane: string | null;
  readonly from: number | null;
  readonly to: number | null;
  readonly now: number;
}

/** Rows read at once. */
export const EXPORT_PAGE = 300;

/** SQL that is true where a time is within the scope; $n and $n+1 are bound to `from` and `to`. */
export const within = (time: string, n: number) =>
  `($${n} IS NULL OR ${time} >= $${n}) AND ($${n + 1} IS NULL OR ${time} < $${n + 1})`;

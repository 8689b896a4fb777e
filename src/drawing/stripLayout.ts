import type { Strip, StripColumn } from "../../shared/schemas/commit.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import { rulerPlace } from "./decades.ts";

export interface StripMark {
  /** Column, zero-based in commit order. */
  readonly index: number;
  /** 0 (foot of the ruler) to 1 (head). */
  readonly place: number;
  readonly verdict: Verdict;
  readonly mainline: boolean;
}
export interface StripLink {
  readonly from: StripMark;
  readonly to: StripMark;
}
export interface StripBracket {
  readonly breakId: string;
  readonly first: number;
  readonly last: number;
  readonly suspects: number;
}
/** What the strip shows, in columns and places: free of pixels, so that zoom and scroll only multiply. */
export interface StripLayout {
  readonly count: number;
  readonly marks: readonly StripMark[];
  /** Judged commits of the default branch, in order: the main trace. */
  readonly trace: readonly StripMark[];
  /** Branches: from a commit to its nearest judged ancestor, and from a merge to the tip that it brought in. */
  readonly links: readonly StripLink[];
  readonly gaps: readonly number[];
  readonly brackets: readonly StripBracket[];
}

function placeOf(column: StripColumn): number {
  if (column.worstError !== null) return rulerPlace(column.worstError);
  return column.verdict === "invalid" ? 1 : 0;
}

function spanBrackets(strip: Strip, indexOf: ReadonlyMap<string, number>): StripBracket[] {
  return strip.brackets
    .flatMap(({ breakId, suspects, onset }) => {
      const at = [...suspects, onset].flatMap((sha) => indexOf.get(sha) ?? []);
      if (at.length === 0) return [];
      return [{ breakId, suspects: suspects.length, first: Math.min(...at), last: Math.max(...at) }];
    })
    .sort((a, b) => a.first - b.first);
}

/** Width of a bracket's words, `12 suspects` or, on a narrow strip, the number alone. */
export const LABEL_WIDTH = { wide: 74, narrow: 18 } as const;
const LEVELS = 3;

export interface PlacedBracket extends StripBracket {
  /** 0 is the topmost; what would overlap, words included, stands lower. */
  readonly level: number;
  /** Words stand in the bracket where it is wide enough, else before it; one suspect needs none. */
  readonly words: "inside" | "before" | "none";
}

/** Places brackets at a zoom of `pitch` pixels a commit. Beyond three levels they share the lowest. */
export function placeBrackets(
  brackets: readonly StripBracket[],
  pitch: number,
  labelWidth: number = LABEL_WIDTH.wide,
): PlacedBracket[] {
  const ends: number[] = [];
  return brackets.map((bracket) => {
    const { first, last, suspects } = bracket;
    const fits = (last - first + 1) * pitch >= labelWidth + 4;
    const words = suspects === 1 ? "none" : fits ? "inside" : "before";
    const start = first * pitch - (words === "before" ? labelWidth : 0);
    const free = ends.findIndex((end) => end <= start);
    const level = Math.min(free === -1 ? ends.length : free, LEVELS - 1);
    ends[level] = Math.max(ends[level] ?? 0, (last + 1) * pitch);
    return { ...bracket, level, words };
  });
}

/** Lays the columns out once per strip, in time proportional to commits and links. */
export function layoutStrip(strip: Strip): StripLayout {
  const indexOf = new Map(strip.columns.map((column, index) => [column.commit, index]));
  const markAt: (StripMark | null)[] = strip.columns.map((column, index) =>
    column.buildId === null || column.verdict === null || column.state === "receiving"
      ? null
      : { index, place: placeOf(column), verdict: column.verdict, mainline: column.mainline },
  );

  /** Nearest judged commit at or above `sha` along first parents, looking back at most the whole strip. */
  function judgedFrom(sha: string | undefined): StripMark | null {
    for (let at = sha === undefined ? undefined : indexOf.get(sha); at !== undefined;) {
      const mark = markAt[at];
      if (mark) return mark;
      const parent: string | undefined = strip.columns[at]?.parents[0];
      const next: number | undefined = parent === undefined ? undefined : indexOf.get(parent);
      at = next !== undefined && next < at ? next : undefined;
    }
    return null;
  }

  const links: StripLink[] = [];
  strip.columns.forEach((column, index) => {
    const to = markAt[index];
    if (!to) return;
    const joined = column.mainline ? column.parents.slice(1) : column.parents;
    for (const parent of joined) {
      const from = judgedFrom(parent);
      if (from && !(column.mainline && from.mainline)) links.push({ from, to });
    }
  });

  const marks = markAt.filter((mark) => mark !== null);
  return {
    count: strip.columns.length,
    marks,
    trace: marks.filter((mark) => mark.mainline),
    links,
    gaps: markAt.flatMap((mark, index) => (mark === null ? [index] : [])),
    brackets: spanBrackets(strip, indexOf),
  };
}

/** Index of the commit whose sha begins with `prefix` (four digits or more), or null where none or several do. */
export function findCommit(columns: readonly StripColumn[], prefix: string): number | null {
  const wanted = prefix.trim().toLowerCase();
  if (!/^[0-9a-f]{4,64}$/.test(wanted)) return null;
  const found = columns.flatMap((column, index) => (column.commit.startsWith(wanted) ? [index] : []));
  return found.length === 1 ? found[0]! : null;
}

/**
 * Where the cursor stands: on the commit asked for, else on the newest judged commit of the default branch, else on the
 * newest. Null on an empty strip.
 */
export function cursorIndex(columns: readonly StripColumn[], at: string | null): number | null {
  if (columns.length === 0) return null;
  const asked = at === null ? -1 : columns.findIndex((column) => column.commit.startsWith(at));
  if (asked !== -1) return asked;
  const judged = columns.findLastIndex((column) => column.mainline && column.verdict !== null);
  return judged === -1 ? columns.length - 1 : judged;
}

/** Where a key takes the cursor; null for a key that is not ours. */
export function cursorAfterKey(key: string, at: number, count: number, page: number): number | null {
  const moves: Record<string, number> = {
    ArrowLeft: at - 1,
    ArrowRight: at + 1,
    PageUp: at - page,
    PageDown: at + page,
    Home: 0,
    End: count - 1,
  };
  const to = moves[key];
  return to === undefined ? null : Math.min(count - 1, Math.max(0, to));
}

/** What a place in the document may hold beside finite numbers and the words "NaN", "Infinity", "-Infinity". */
export interface NumberRule {
  /** What null stands for, or undefined where null is refused. */
  readonly null?: number;
  /** True where negative numbers and NaN are refused. */
  readonly notNegative?: boolean;
  /** True where only finite numbers are meant. */
  readonly finite?: boolean;
}

const WORDS: ReadonlyMap<unknown, number> = new Map([
  ["NaN", NaN],
  ["Infinity", Infinity],
  ["-Infinity", -Infinity],
]);

/** Reads one JSON value as a number; `wrong` says what is the matter with it, or null. */
export function readNumber(posted: unknown, rule: NumberRule): { value: number; wrong: string | null } {
  if (posted === null) {
    return rule.null === undefined ? { value: NaN, wrong: "is null, expected a number" } : good(rule.null);
  }
  if (typeof posted === "number") {
    if (!Number.isFinite(posted)) {
      return { value: NaN, wrong: 'is too large for binary64; an overflow is sent as the string "Infinity"' };
    }
    if (rule.notNegative && posted < 0) return { value: NaN, wrong: "must not be negative" };
    return good(posted);
  }
  const word = WORDS.get(posted);
  if (word === undefined) {
    return { value: NaN, wrong: 'must be a number, or the string "NaN", "Infinity" or "-Infinity"' };
  }
  if (rule.finite) return { value: NaN, wrong: "must be finite" };
  if (rule.notNegative && !(word >= 0)) return { value: NaN, wrong: "must not be negative or NaN" };
  return good(word);
}

function good(value: number): { value: number; wrong: null } {
  return { value, wrong: null };
}

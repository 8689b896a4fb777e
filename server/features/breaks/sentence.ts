import type { OnsetKind } from "../../../shared/history/types.ts";

const WORDS = "no one two three four five six seven eight nine ten eleven twelve".split(" ");

/** A count as people write it: in words up to twelve, then in digits with separated thousands. */
export function countInWords(count: number): string {
  return WORDS[count] ?? count.toLocaleString("en-GB");
}

/** Two models by name, then how many others. */
export function modelsInWords(models: readonly string[]): string {
  if (models.length <= 2) return models.join(" and ");
  const others = models.length - 2;
  return `${models.slice(0, 2).join(", ")} and ${countInWords(others)} ${others === 1 ? "other" : "others"}`;
}

export interface BreakFacts {
  readonly kind: OnsetKind;
  readonly entryCount: number;
  readonly models: readonly string[];
  /** True where the worst entry is not a finite number. */
  readonly invalid: boolean;
}

/** One sentence a person would write: what stopped agreeing. */
export function breakSentence({ kind, entryCount, models, invalid }: BreakFacts): string {
  const one = entryCount === 1;
  const count = countInWords(entryCount);
  const what = `${count.charAt(0).toUpperCase()}${count.slice(1)} ${one ? "partial" : "partials"} of ${modelsInWords(models)}`;
  switch (kind) {
    case "after-good":
      return `${what} ${invalid ? "became NaN or infinite" : "stopped agreeing"} here.`;
    case "since-first-check": {
      const state = invalid ? `${one ? "has" : "have"} been NaN or infinite` : `${one ? "has" : "have"} disagreed`;
      return `${what} ${state} since the first check.`;
    }
    case "fixed-between": {
      const state = invalid ? `${one ? "is" : "are"} NaN or infinite` : `${one ? "disagrees" : "disagree"}`;
      return `${what} ${state} here; another line holds a fix.`;
    }
  }
}

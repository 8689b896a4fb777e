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
  /** Entries of Jacobians. */
  readonly partials: number;
  /** Names of the probes beside them. */
  readonly probes: readonly string[];
  readonly models: readonly string[];
  /** True where the worst entry is not a finite number. */
  readonly invalid: boolean;
}

/** Partials and probes of a break, as its row in the record tells them. */
export function partsOf(row: {
  readonly entryCount: number;
  /** JSON: string[]. */
  readonly probes: string;
  readonly probeEntries: number;
}): Pick<BreakFacts, "partials" | "probes"> {
  return { partials: row.entryCount - row.probeEntries, probes: JSON.parse(row.probes) as string[] };
}

/** `three partials`, `probe dot-product: seed 7`, `one partial and two probes`: what the facts count, not yet of what. */
export function countedParts({ partials, probes }: Pick<BreakFacts, "partials" | "probes">): string {
  const words = (count: number, one: string) => `${countInWords(count)} ${one}${count === 1 ? "" : "s"}`;
  if (probes.length === 0) return words(partials, "partial");
  if (partials > 0) return `${words(partials, "partial")} and ${words(probes.length, "probe")}`;
  return probes.length === 1 ? `probe ${probes[0]}` : words(probes.length, "probe");
}

/** One sentence a person would write: what stopped agreeing. */
export function breakSentence(facts: BreakFacts): string {
  const { kind, partials, probes, models, invalid } = facts;
  const one = partials + probes.length === 1;
  const count = countedParts(facts);
  const what = `${count.charAt(0).toUpperCase()}${count.slice(1)} of ${modelsInWords(models)}`;
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

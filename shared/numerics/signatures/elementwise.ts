import { explain } from "./explain.ts";
import type { Match, Place, Trial } from "./types.ts";

/** A candidate that looks at each entry by itself. */
export interface Elementwise extends Pick<Match, "code" | "parameters"> {
  readonly fits: (k: number) => boolean;
  readonly say: (place: Place, explained: Int32Array) => string;
  readonly alternatives?: readonly string[];
}

/** The match of a candidate that looks at each entry by itself, or null where it explains too few. */
export function elementwise(trial: Trial, { code, parameters, fits, say, alternatives }: Elementwise): Match | null {
  const explanation = explain(trial.entries, fits);
  if (explanation === null) return null;
  const { explained } = explanation;
  return {
    code,
    parameters,
    explained,
    settled: explained,
    say: (place) => say(place, explained),
    alternatives: alternatives ?? [],
  };
}

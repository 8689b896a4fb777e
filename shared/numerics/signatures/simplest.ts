import { CANDIDATES } from "./candidates.ts";
import { placeOf } from "./place.ts";
import type { Counting } from "./place.ts";
import type { Match, NamedSignature, Trial } from "./types.ts";

const MOST_ALTERNATIVES = 3;

/** The match that is told of a trial, and the others that explain as much about as simply. */
export interface Finding {
  readonly trial: Trial;
  readonly match: Match;
  readonly others: readonly Match[];
}

/**
 * The simplest match: fewest numbers chosen, an entry left unexplained counting as one (it would have to be told by
 * itself); then the largest share, then the order of the list.
 */
export function simplest(trial: Trial): Finding | null {
  const matches = CANDIDATES.flatMap((candidate) => candidate(trial) ?? []);
  const cost = ({ parameters, explained }: Match) => parameters + trial.entries.length - explained.length;
  const [match, ...others] = matches
    .map((one, order) => ({ one, order }))
    .sort((a, b) => cost(a.one) - cost(b.one) || b.one.explained.length - a.one.explained.length || a.order - b.order)
    .map(({ one }) => one);
  if (match === undefined) return null;
  const rival = (one: Match) =>
    one.explained.length >= match.explained.length && one.parameters <= match.parameters + 1;
  return { trial, match, others: others.filter(rival) };
}

/** What is told of a finding; `bad` counts all entries that disagree or are invalid. */
export function named({ trial, match, others }: Finding, bad: Counting): NamedSignature {
  const { evidence } = trial;
  const place = placeOf(evidence, match.explained);
  const detail = match.say(place);
  const rivals = others.map((other) => other.say(placeOf(evidence, other.explained)));
  return {
    code: match.code,
    ...place,
    share: match.explained.length / bad(place),
    detail,
    alternatives: [...match.alternatives, ...rivals].slice(0, MOST_ALTERNATIVES),
  };
}

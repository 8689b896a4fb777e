import { countedParts, countInWords } from "../breaks/sentence.ts";

export interface ClimbFacts {
  readonly kind: "climb" | "jump";
  readonly open: boolean;
  /** A climb that is a jump which stayed. */
  readonly jumped: boolean;
  readonly model: string;
  readonly partials: number;
  /** Names of the probes beside them. */
  readonly probes: readonly string[];
  /** Of the entry that rose most. */
  readonly decades: number;
  /** Builds from the onset to the one that is spoken of. */
  readonly builds: number;
  /** Entries of it that are past the tolerance by now. */
  readonly beyond: number;
}

/** One sentence a person would write: what crept, how far, since when. */
export function climbSentence(facts: ClimbFacts): string {
  const { kind, open, jumped, model, partials, probes, decades, builds, beyond } = facts;
  const entries = partials + probes.length;
  const one = entries === 1;
  const count = countedParts(facts);
  const what = `${count.charAt(0).toUpperCase()}${count.slice(1)} of ${model}`;
  const far = decadesInWords(decades);
  const span = `${countInWords(builds)} ${builds === 1 ? "build" : "builds"}`;
  const where = whereItStands(beyond, entries);
  if (kind === "jump") return `${what} jumped ${far} in one build, ${where}.`;
  if (!open) return `${what} ${jumped ? "jumped" : "climbed"} ${far}; that has ended.`;
  if (jumped) return `${what} jumped ${far} and ${one ? "has" : "have"} stayed there for ${span}, ${where}.`;
  return `${what} ${one ? "has" : "have"} climbed ${far} over ${span}, ${where}.`;
}

function whereItStands(beyond: number, entries: number): string {
  if (beyond === 0) return "within the tolerance";
  if (beyond >= entries) return "past the tolerance by now";
  return `${countInWords(beyond)} of them past the tolerance by now`;
}

function decadesInWords(decades: number): string {
  const text = decades.toFixed(1);
  return `${text} ${text === "1.0" ? "decade" : "decades"}`;
}

import { countInWords } from "../breaks/sentence.ts";

export interface ClimbFacts {
  readonly kind: "climb" | "jump";
  readonly open: boolean;
  /** A climb that is a jump which stayed. */
  readonly jumped: boolean;
  readonly model: string;
  readonly entryCount: number;
  /** Of the entry that rose most. */
  readonly decades: number;
  /** Builds from the onset to the one that is spoken of. */
  readonly builds: number;
  /** True where the entry that rose most disagrees by now. */
  readonly disagrees: boolean;
}

/** One sentence a person would write: what crept, how far, since when. */
export function climbSentence(facts: ClimbFacts): string {
  const { kind, open, jumped, model, entryCount, decades, builds, disagrees } = facts;
  const one = entryCount === 1;
  const count = countInWords(entryCount);
  const what = `${count.charAt(0).toUpperCase()}${count.slice(1)} ${one ? "partial" : "partials"} of ${model}`;
  const far = decadesInWords(decades);
  const span = `${countInWords(builds)} ${builds === 1 ? "build" : "builds"}`;
  const where = disagrees ? "and the worst is past the tolerance" : "within the tolerance";
  if (kind === "jump") return `${what} jumped ${far} in one build, ${where}.`;
  if (!open) return `${what} ${jumped ? "jumped" : "climbed"} ${far}; that has ended.`;
  if (jumped) return `${what} jumped ${far} and ${one ? "has" : "have"} stayed there for ${span}, ${where}.`;
  return `${what} ${one ? "has" : "have"} climbed ${far} over ${span}, ${where}.`;
}

function decadesInWords(decades: number): string {
  const text = decades.toFixed(1);
  return `${text} ${text === "1.0" ? "decade" : "decades"}`;
}

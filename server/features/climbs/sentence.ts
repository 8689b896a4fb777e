import { countInWords } from "../breaks/sentence.ts";

export interface ClimbFacts {
  readonly kind: "climb" | "jump";
  readonly open: boolean;
  readonly model: string;
  readonly entryCount: number;
  /** Of the entry that rose most. */
  readonly decades: number;
  /** Builds from the onset to the one that is spoken of. */
  readonly builds: number;
}

/** One sentence a person would write: what crept, how far, since when. */
export function climbSentence({ kind, open, model, entryCount, decades, builds }: ClimbFacts): string {
  const one = entryCount === 1;
  const count = countInWords(entryCount);
  const what = `${count.charAt(0).toUpperCase()}${count.slice(1)} ${one ? "partial" : "partials"} of ${model}`;
  const far = decadesInWords(decades);
  if (kind === "jump") return `${what} jumped ${far} in one build, within the tolerance.`;
  const over = `over ${countInWords(builds)} ${builds === 1 ? "build" : "builds"}`;
  if (open) return `${what} ${one ? "has" : "have"} climbed ${far} ${over}, within the tolerance.`;
  return `${what} climbed ${far} and came to rest.`;
}

function decadesInWords(decades: number): string {
  const text = decades.toFixed(1);
  return `${text} ${text === "1.0" ? "decade" : "decades"}`;
}

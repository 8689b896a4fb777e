import { looksLikeDerivative } from "./looksLikeDerivative.ts";
import { pathWords } from "./pathWords.ts";
import type { ScoreContext } from "./types.ts";

/** How a changed path points at the models of a break: the odds it lends its commit, and the reason in words. */
export interface PathClue {
  readonly odds: number;
  readonly why: string;
}

/** Odds against a commit that changes nothing connected with the model: chosen, not measured; only their order counts. */
const ODDS = { source: 24, sameStem: 10, sameFolder: 5, namedAfter: 4, namedInPart: 2, recipe: 1.5 } as const;

const RECIPE =
  /(?:^|\/)(?:cmakelists\.txt|makefile|meson\.build|dockerfile|[^/]*\.(?:cmake|mk|lock)|[^/]*requirements[^/]*\.txt|environment\.ya?ml|pyproject\.toml|setup\.(?:py|cfg)|package(?:-lock)?\.json|cargo\.toml|go\.(?:mod|sum)|manifest\.toml|project\.toml)$/i;

/** What one changed path says, or null where it says nothing. Paths are compared with `/` and without leading `./`. */
export function pathClue(changed: string, context: Pick<ScoreContext, "models" | "sources">): PathClue | null {
  const path = plain(changed);
  const sources = context.sources.map(plain);
  const model = context.models[0] ?? "the model";
  const models = context.models.length > 1 ? `${model} and others` : model;
  if (sources.some((source) => path === source || path.startsWith(`${source}/`))) {
    return { odds: ODDS.source, why: `changes ${path}, a source of ${models}` };
  }
  const sibling = sources.find((source) => stem(source) !== "" && stem(path) === stem(source));
  if (sibling !== undefined) return { odds: ODDS.sameStem, why: `changes ${path}, named like ${sibling}` };
  const neighbour = sources.find((source) => folder(source) !== "" && folder(source) === folder(path));
  if (neighbour !== undefined) {
    return { odds: ODDS.sameFolder, why: `changes ${path}, in the folder of ${neighbour}` };
  }
  const words = pathWords(path);
  const named = context.models.find((name) => pathWords(name).every((word) => words.includes(word)));
  if (named !== undefined) return { odds: ODDS.namedAfter, why: `changes ${path}, named after ${named}` };
  const partly = context.models.find((name) => pathWords(name).some((word) => word.length > 2 && words.includes(word)));
  if (partly !== undefined) {
    return { odds: ODDS.namedInPart, why: `changes ${path}, whose name has a word of ${partly}` };
  }
  if (RECIPE.test(path)) return { odds: ODDS.recipe, why: `changes ${path}, which every model is built with` };
  return null;
}

function plain(path: string): string {
  return path
    .replace(/\\/g, "/")
    .replace(/^(?:\.\/)+/, "")
    .replace(/\/+$/, "");
}

function folder(path: string): string {
  return path.slice(0, Math.max(0, path.lastIndexOf("/")));
}

/** File name without extension, derivative words and endings: `thrust_grad.f90` and `thrust.f90` have the same. */
function stem(path: string): string {
  const name = path.slice(path.lastIndexOf("/") + 1).replace(/\.\w+$/, "");
  return pathWords(name)
    .filter((word, at) => !(at > 0 && (looksLikeDerivative(word) || /^(?:d|dv|b|bv|test|tests)$/.test(word))))
    .join(" ");
}

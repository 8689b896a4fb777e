/**
 * The words a path, a file name or a dotted name is made of, in lower case: split at separators, between a small and a
 * capital letter, and before the last capital of a run (`src/rotorThrust_jac.f90` gives src, rotor, thrust, jac, f90).
 */
export function pathWords(path: string): string[] {
  return path
    .replace(/(\p{Ll}|\d)(\p{Lu})/gu, "$1 $2")
    .replace(/(\p{Lu})(\p{Lu}\p{Ll})/gu, "$1 $2")
    .toLowerCase()
    .split(/[^\p{L}\d]+/u)
    .filter((word) => word !== "");
}

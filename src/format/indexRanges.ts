/** Ascending whole numbers as people list them, runs of three and more by their ends: `0 to 2, 5, 6`. */
export function indexRanges(indices: readonly number[]): string {
  const runs: number[][] = [];
  for (const index of indices) {
    const run = runs.at(-1);
    if (run !== undefined && index === run[run.length - 1]! + 1) run.push(index);
    else runs.push([index]);
  }
  return runs.map((run) => (run.length < 3 ? run.join(", ") : `${run[0]} to ${run.at(-1)}`)).join(", ");
}

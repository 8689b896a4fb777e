/** Part of the lines that may stay without a partner. */
const MOST_ALONE = 0.2;

/**
 * Gives each of n seekers one of its options, none twice, so that as many as possible get one (augmenting paths).
 * Null where more than a fifth goes without; -1 for those that do.
 * Source: H. W. Kuhn, The Hungarian method for the assignment problem, Naval Research Logistics Quarterly 2, 1955.
 */
export function matchUp(options: readonly (readonly number[])[]): number[] | null {
  const takenBy = new Int32Array(options.length).fill(-1);
  const seen = new Int32Array(options.length).fill(-1);
  const place = (seeker: number, round: number): boolean => {
    for (const option of options[seeker]) {
      if (seen[option] === round) continue;
      seen[option] = round;
      if (takenBy[option] < 0 || place(takenBy[option], round)) {
        takenBy[option] = seeker;
        return true;
      }
    }
    return false;
  };
  let alone = 0;
  options.forEach((_, seeker) => {
    if (!place(seeker, seeker)) alone += 1;
  });
  if (alone > MOST_ALONE * options.length) return null;
  const chosen = new Array<number>(options.length).fill(-1);
  takenBy.forEach((seeker, option) => {
    if (seeker >= 0) chosen[seeker] = option;
  });
  return chosen;
}

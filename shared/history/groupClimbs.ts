/** Entries of one block that began a climb, or jumped, in one build; times are places in the lane's chain of builds. */
export interface DriftRise {
  readonly blockId: number;
  readonly model: string;
  /** Name of the probe that the block is, "" for a Jacobian. */
  readonly probe: string;
  readonly columns: number;
  readonly kind: "climb" | "jump";
  /** First build of the rise. */
  readonly onset: number;
  /** The build that told it. */
  readonly told: number;
  /** Flat indices, ascending. */
  readonly entries: Uint32Array;
  /** Of the worst entry, when it was told. */
  readonly decades: number;
  readonly worstEntry: number;
  /** Builds at which climbs of some of the entries ended. */
  readonly ends: readonly { readonly at: number; readonly entries: Uint32Array }[];
}

/** Rises of one model that run at the same time: one thing to look at. */
export interface ClimbGroup {
  readonly model: string;
  readonly kind: "climb" | "jump";
  /** That of the worst entry speaks for the group. */
  readonly worst: DriftRise;
  readonly members: readonly DriftRise[];
  readonly entryCount: number;
  /** Names of the probes among them. */
  readonly probes: readonly string[];
  /** Entries still climbing; 0 of jumps, which are over when they are told. */
  readonly openCount: number;
  /** The build at which the last of it ended; null while it is open. */
  readonly endedAt: number | null;
  /** True of a climb whose worst entry jumped at its onset and stayed there. */
  readonly jumped: boolean;
}

/**
 * Rises of a lane as a reader of `until` (a place in the chain) sees them: what was told later is not there, what ended
 * later is open. Rises of one model whose time between onset and telling overlaps are one climb: noise alone sets them
 * apart by a few builds. A jump that became a climb, as the error stayed where it had jumped to, is told as that climb
 * alone. Newest first, then the steepest. Cost O(n log n).
 */
export function groupClimbs(rises: Iterable<DriftRise>, until: number): ClimbGroup[] {
  const seen = [...rises].filter((rise) => rise.told <= until);
  const jumps = new Set(seen.filter(({ kind }) => kind === "jump").flatMap(beginnings));
  const climbs = new Set(seen.filter(({ kind }) => kind === "climb").flatMap(beginnings));
  const byModel = new Map<string, DriftRise[]>();
  for (const rise of seen) {
    if (rise.kind === "jump" && beginnings(rise).every((one) => climbs.has(one))) continue;
    const key = `${rise.kind} ${rise.model}`;
    byModel.set(key, [...(byModel.get(key) ?? []), rise]);
  }
  return [...byModel.values()]
    .flatMap(overlapping)
    .map((members) => groupOf(members, until, jumps))
    .sort((a, b) => b.worst.told - a.worst.told || b.worst.decades - a.worst.decades);
}

/** Each entry of a rise with the build that it began in. */
function beginnings({ blockId, columns, onset, entries }: DriftRise): string[] {
  return Array.from(entries, (entry) => `${blockId} ${columns} ${onset} ${entry}`);
}

function overlapping(rises: readonly DriftRise[]): DriftRise[][] {
  const groups: DriftRise[][] = [];
  let latest = -1;
  for (const rise of [...rises].sort((a, b) => a.onset - b.onset || a.told - b.told)) {
    const group = groups.at(-1);
    if (group !== undefined && rise.onset <= latest) group.push(rise);
    else groups.push([rise]);
    latest = Math.max(latest, rise.told);
  }
  return groups;
}

function groupOf(members: readonly DriftRise[], until: number, jumps: ReadonlySet<string>): ClimbGroup {
  const worst = members.reduce((a, b) => (b.decades > a.decades ? b : a));
  const openCount = members.reduce((sum, member) => sum + openEntries(member, until), 0);
  const ends = members.flatMap((member) => member.ends.map(({ at }) => at).filter((at) => at <= until));
  const lastEnd = ends.reduce((a, b) => Math.max(a, b), worst.told);
  return {
    model: worst.model,
    kind: worst.kind,
    worst,
    members,
    probes: [...new Set(members.flatMap(({ probe }) => (probe === "" ? [] : [probe])))].sort(),
    entryCount: members.reduce((sum, member) => sum + member.entries.length, 0),
    openCount,
    endedAt: openCount > 0 ? null : lastEnd,
    jumped: worst.kind === "climb" && jumps.has(`${worst.blockId} ${worst.columns} ${worst.onset} ${worst.worstEntry}`),
  };
}

function openEntries({ kind, entries, ends }: DriftRise, until: number): number {
  if (kind === "jump") return 0;
  const ended = ends.reduce((sum, end) => sum + (end.at <= until ? end.entries.length : 0), 0);
  return entries.length - ended;
}

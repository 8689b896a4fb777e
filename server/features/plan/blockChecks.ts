import type { ReferenceMethod } from "../../../shared/domain/vocabulary.ts";
import type { ToldCost } from "../../../shared/plan/columnCost.ts";
import type { Cost } from "../../../shared/schemas/build.ts";
import type { BlockCosts, ReferenceDetails } from "../../ingest/blockDetails.ts";

/** A block in one build of the lane, as far as its checks go. */
export interface PostedChecks {
  /** Builds since: 0 = the newest. */
  readonly ago: number;
  readonly buildId: number;
  readonly sha: string;
  readonly snapshotId: number;
  readonly columnCount: number;
  readonly unresolved: number;
  readonly references: readonly ReferenceDetails[];
  readonly costs: BlockCosts | null;
}

/** When each column of a block was last checked, and how. Builds are added newest first. */
export class BlockChecks {
  /** Builds that were the last to check a column, newest first. */
  readonly checks: PostedChecks[] = [];
  /** By column: its place in `checks`, or -1. */
  readonly checkOf: Int32Array;
  /** By column: one bit for each reference of its last check that covered it. */
  readonly covered: Uint32Array;
  /** By method: the newest cost that was told, for one column. */
  readonly told = new Map<ReferenceMethod, ToldCost>();
  /** Builds since the block was first posted, as far as was looked. */
  firstAgo = 0;
  private missing: number;

  constructor(columns: number) {
    this.checkOf = new Int32Array(columns).fill(-1);
    this.covered = new Uint32Array(columns);
    this.missing = columns;
  }

  get complete(): boolean {
    return this.missing === 0;
  }

  /** A block posted with another number of columns is another one: it says nothing of these. */
  add(posted: PostedChecks): void {
    if (posted.columnCount !== this.checkOf.length) return;
    this.firstAgo = posted.ago;
    this.addCosts(posted);
    const before = this.missing;
    const place = this.checks.length;
    posted.references.forEach(({ columns }, bit) => {
      for (const column of columns ?? this.checkOf.keys()) this.cover(column, place, bit);
    });
    if (this.missing < before) this.checks.push(posted);
  }

  private cover(column: number, place: number, bit: number): void {
    if (this.checkOf[column] === -1) {
      this.checkOf[column] = place;
      this.missing -= 1;
    }
    if (this.checkOf[column] === place) this.covered[column] |= 1 << bit;
  }

  private addCosts({ references, costs }: PostedChecks): void {
    references.forEach(({ method, columns }, at) => {
      const cost = costs?.references[at] ?? null;
      const share = columns?.length ?? this.checkOf.length;
      if (cost !== null && share > 0 && !this.told.has(method)) this.told.set(method, costOfOne(cost, share));
    });
  }

  /** References that a column is checked with: those of its last check, else those that the block was last posted with. */
  referencesOf(column: number): readonly ReferenceDetails[] {
    const place = this.checkOf[column];
    if (place === -1) return this.checks[0]?.references ?? [];
    return this.checks[place].references.filter((_, bit) => (this.covered[column] & (1 << bit)) !== 0);
  }
}

function costOfOne({ seconds, evaluations }: Cost, columns: number): ToldCost {
  return {
    seconds: seconds === undefined ? null : seconds / columns,
    evaluations: evaluations === undefined ? null : evaluations / columns,
  };
}

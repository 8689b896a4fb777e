import { assumedEvaluations, costIn, secondsPerEvaluation } from "../../../shared/plan/columnCost.ts";
import type { ColumnCost, CostUnit } from "../../../shared/plan/columnCost.ts";
import { columnValue } from "../../../shared/plan/columnValue.ts";
import type { PlanColumn } from "../../../shared/plan/types.ts";
import type { PlanReason } from "../../../shared/domain/vocabulary.ts";
import type { BlockChecks, PostedChecks } from "./blockChecks.ts";
import type { ByColumn } from "./byColumn.ts";
import type { ChangeClue, ClueSince } from "./changeClues.ts";
import type { BrokenColumn } from "./loadBrokenColumns.ts";
import type { PlannedBlock } from "./loadChecks.ts";

/** All that is known of a lane's columns before a plan is made. */
export interface LaneFacts {
  readonly blocks: readonly PlannedBlock[];
  readonly checks: ReadonlyMap<number, BlockChecks>;
  readonly broken: ByColumn<BrokenColumn>;
  readonly climbing: ByColumn<number>;
  readonly unresolved: ByColumn<number>;
  readonly clueSince: ClueSince;
  /** Place of a commit in the lane's line. */
  readonly placeOf: (sha: string) => number;
  readonly limit: number;
}

/** One column with everything that its line of the plan says. */
export interface KnownColumn extends PlanColumn {
  readonly named: PlannedBlock;
  readonly assumed: boolean;
  readonly reason: PlanReason;
  readonly check: PostedChecks | null;
  readonly broken: BrokenColumn | null;
  readonly climb: number;
  readonly clue: ChangeClue | null;
  readonly unresolved: number;
}

/** A column that nothing is known of is taken to need a central difference. */
const UNKNOWN = { method: "central-difference", steps: [] } as const;

/** Columns of all blocks, with what a check of each costs and is worth. */
export function columnsOfLane(facts: LaneFacts, unit: CostUnit): KnownColumn[] {
  const told = [...facts.checks.values()].flatMap((checks) => [...checks.told.values()]);
  const ratio = secondsPerEvaluation(told);
  return facts.blocks.flatMap((block) => columnsOfBlock(facts, block, unit, ratio));
}

function columnsOfBlock(facts: LaneFacts, block: PlannedBlock, unit: CostUnit, ratio: number | null): KnownColumn[] {
  const checks = facts.checks.get(block.blockId) as BlockChecks;
  const clues = checks.checks.map(({ sha }) => facts.clueSince(block.blockId, facts.placeOf(sha)));
  const costs = new Map<string, ColumnCost>();
  return Array.from({ length: block.columns }, (_, column) => {
    const place = checks.checkOf[column];
    const check = checks.checks[place] ?? null;
    const key = `${place} ${checks.covered[column]}`;
    const cost = costs.get(key) ?? costOf(checks, column, unit, ratio);
    costs.set(key, cost);
    const broken = facts.broken.get(block.blockId)?.get(column) ?? null;
    const climb = facts.climbing.get(block.blockId)?.get(column) ?? 0;
    const unresolved = facts.unresolved.get(block.blockId)?.get(column) ?? 0;
    const clue = clues[place] ?? null;
    const waited = check?.ago ?? checks.firstAgo;
    const known = {
      broken: broken?.entries ?? 0,
      climb,
      changeOdds: clue?.odds ?? 1,
      checked: check !== null,
      waited,
      unresolvedShare: unresolved / Math.max(1, block.rows),
    };
    const more = { named: block, check, broken, climb, clue, unresolved };
    return { block: block.blockId, column, waited, ...cost, ...columnValue(known, facts.limit), ...more };
  });
}

function costOf(checks: BlockChecks, column: number, unit: CostUnit, ratio: number | null): ColumnCost {
  const references = checks.referencesOf(column);
  const used = references.length > 0 ? references : [UNKNOWN];
  const costs = used.map(({ method, steps }) =>
    costIn(unit, checks.told.get(method) ?? null, assumedEvaluations(method, steps.length), ratio),
  );
  return {
    cost: costs.reduce((sum, one) => sum + one.cost, 0),
    assumed: costs.some((one) => one.assumed),
  };
}

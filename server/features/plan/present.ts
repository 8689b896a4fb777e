import { groupBy } from "../../../shared/domain/groupBy.ts";
import type { Plan as Planned } from "../../../shared/plan/types.ts";
import type { Plan, PlanItem } from "../../../shared/schemas/plan.ts";
import { countInWords } from "../breaks/sentence.ts";
import type { BlockChecks } from "./blockChecks.ts";
import type { KnownColumn, LaneFacts } from "./columnFacts.ts";
import type { PlannedBlock } from "./loadChecks.ts";
import { reasonSentence } from "./sentence.ts";

type Lists = Pick<Plan, "items" | "left" | "tooDear" | "spent" | "everyBuilds" | "everyBuildsReason">;

/** Columns of a block with the same reason, check and references are one line, where its most useful column stands. */
export function presentPlan(
  facts: LaneFacts,
  columns: readonly KnownColumn[],
  planned: Planned,
  unit: Plan["budget"]["unit"],
): Lists {
  const pick = (indices: readonly number[]) => indices.map((at) => columns[at]);
  const tooDear = pick(planned.tooDear);
  return {
    items: [...groupBy(pick(planned.chosen), (one) => lineOf(facts, one)).values()].map((all) => item(facts, all)),
    left: byBlock(pick(planned.left)).map((all) => ({
      ...blockName(all[0].named),
      columns: ascending(all),
      waited: largest(all, (one) => one.waited),
    })),
    tooDear: byBlock(tooDear).map((all) => ({
      ...blockName(all[0].named),
      columns: ascending(all),
      cost: largest(all, (one) => one.cost),
    })),
    spent: planned.spent,
    everyBuilds: columns.length === 0 ? null : planned.everyBuilds,
    everyBuildsReason: whyNoPromise(columns, tooDear, unit),
  };
}

function lineOf({ checks }: LaneFacts, { block, column, reason }: KnownColumn): string {
  const { checkOf, covered } = checks.get(block) as BlockChecks;
  return `${block} ${reason} ${checkOf[column]} ${covered[column]}`;
}

function item({ checks, limit }: LaneFacts, members: readonly KnownColumn[]): PlanItem {
  const [{ named, reason, check, column, assumed }] = members;
  const references = (checks.get(named.blockId) as BlockChecks).referencesOf(column);
  return {
    ...blockName(named),
    columns: ascending(members),
    reason: { code: reason, sentence: reasonSentence(reason, members, limit) },
    cost: members.reduce((sum, one) => sum + one.cost, 0),
    assumed,
    lastCheck: check && { commit: check.sha, buildId: String(check.buildId), buildsAgo: check.ago },
    references: references.map(({ method, steps, stepKind }) => ({ method, steps: [...steps], stepKind })),
  };
}

function whyNoPromise(
  columns: readonly KnownColumn[],
  tooDear: readonly KnownColumn[],
  unit: Plan["budget"]["unit"],
): string | null {
  if (columns.length === 0) return "The newest build has no columns to check.";
  if (tooDear.length === 0) return null;
  const dearest = largest(tooDear, (one) => one.cost);
  const many = tooDear.length === 1 ? "One column costs" : `${capital(countInWords(tooDear.length))} columns cost`;
  return `${many} more than the whole budget; the dearest takes ${Number(dearest.toPrecision(3))} ${unit}.`;
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
const byBlock = (columns: readonly KnownColumn[]) => [...groupBy(columns, (one) => one.block).values()];
const ascending = (columns: readonly KnownColumn[]) => columns.map((one) => one.column).sort((a, b) => a - b);
const largest = (columns: readonly KnownColumn[], of: (column: KnownColumn) => number) =>
  columns.reduce((most, one) => Math.max(most, of(one)), 0);

function blockName({ blockId, model, point, output, input }: PlannedBlock) {
  return { blockId: String(blockId), model, point, output, input };
}

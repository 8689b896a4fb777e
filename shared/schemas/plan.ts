import { z } from "zod";
import { PLAN_REASONS, REFERENCE_METHODS, STEP_KINDS } from "../domain/vocabulary.ts";
import { id, laneName, sha } from "./common.ts";

const blockName = { blockId: id, model: z.string(), point: z.string(), output: z.string(), input: z.string() };
/** Zero-based input columns, ascending. */
const columns = z.array(z.number().int());

export const planItem = z
  .object({
    ...blockName,
    columns,
    reason: z.object({ code: z.enum(PLAN_REASONS), sentence: z.string() }),
    /** Of all its columns together, in the unit of the budget. */
    cost: z.number(),
    /** True where the cost was not told but assumed from the method. */
    assumed: z.boolean(),
    /** `buildsAgo` 0 = by the newest build; null where no build checked these columns. */
    lastCheck: z.object({ commit: sha, buildId: id, buildsAgo: z.number().int() }).nullable(),
    /** The references that the last check was made with; of columns that were never checked, those of the block. */
    references: z.array(
      z.object({ method: z.enum(REFERENCE_METHODS), steps: z.array(z.number()), stepKind: z.enum(STEP_KINDS) }),
    ),
  })
  .meta({ id: "PlanItem", description: "Columns of a block that are worth checking in the next build." });
export type PlanItem = z.infer<typeof planItem>;

const money = z.object({ unit: z.enum(["seconds", "evaluations"]), amount: z.number() });

export const plan = z
  .object({
    lane: laneName,
    /** The newest judged commit of the default branch. */
    commit: sha.nullable(),
    buildId: id.nullable(),
    budget: money,
    /** In the unit of the budget. */
    spent: z.number(),
    /** Builds after which an entry that was not checked again counts as unreferenced. */
    limit: z.number().int(),
    /** Every column is checked at least once in so many builds, if each follows its plan; null with a reason. */
    everyBuilds: z.number().int().nullable(),
    everyBuildsReason: z.string().nullable(),
    /** Most useful first. */
    items: z.array(planItem),
    /** Columns that have to wait, longest waiting block first; `waited` is the longest wait among them. */
    left: z.array(z.object({ ...blockName, columns, waited: z.number().int() })),
    /** Columns that even a whole budget does not pay; `cost` is that of the dearest. */
    tooDear: z.array(z.object({ ...blockName, columns, cost: z.number() })),
  })
  .meta({ id: "Plan", description: "What the next build should check within a budget." });
export type Plan = z.infer<typeof plan>;

const amount = z
  .string()
  .regex(/^\d{1,15}(\.\d{1,15})?$/, "must be a plain number, like 90 or 0.5")
  .transform(Number)
  .pipe(z.number().positive("must be above 0"));
export const planQuery = z
  .strictObject({ lane: laneName.optional(), seconds: amount.optional(), evaluations: amount.optional() })
  .refine(({ seconds, evaluations }) => (seconds === undefined) !== (evaluations === undefined), {
    message: "must have exactly one of seconds and evaluations",
  });

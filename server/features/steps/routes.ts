import type { z } from "zod";
import { MAX_STUDIED_COLUMNS, stepStudy, stepStudyQuery } from "../../../shared/schemas/steps.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { Invalid, NotFound } from "../../http/problem.ts";
import type { BlockDetails } from "../../ingest/blockDetails.ts";
import { loadBlockRow } from "../blocks/loadBlockRows.ts";
import { range } from "../blocks/window.ts";
import { numericId } from "../numericId.ts";
import { loadStepStudy } from "./load.ts";
import { presentStepStudy } from "./present.ts";

type Query = z.output<typeof stepStudyQuery>;

/** @throws Invalid for a column or window that the block does not have, or one that is too wide. */
function windowOf({ column, columns }: Query, size: number): readonly [number, number] {
  const invalid = (name: string, detail: string) => new Invalid([{ pointer: `#/query/${name}`, detail }]);
  if (column !== undefined) {
    if (columns !== undefined) throw invalid("columns", "ask for one column or for a window of them, not for both");
    if (column >= size) throw invalid("column", `the block has ${size} columns, counted from 0`);
    return [column, column + 1];
  }
  if (columns === undefined) return [0, Math.min(size, MAX_STUDIED_COLUMNS)];
  const [first, last] = range("columns", columns, size);
  if (last - first > MAX_STUDIED_COLUMNS) {
    throw invalid("columns", `has ${last - first} columns; at most ${MAX_STUDIED_COLUMNS} are studied at a time`);
  }
  return [first, last];
}

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/builds/:build/blocks/:block/steps",
    summary: "The steps of one reference of a block",
    description:
      "How far each step of a reference may be from the truth, which one is best, what other methods would resolve, and advice in sentences. `reference` is its index; `column=c` or `columns=a:b` (at most 200; the first 200 if left out) the input columns.",
    tag: "Builds",
    auth: "caller",
    can: "build.read",
    params: { build: numericId, block: numericId },
    query: stepStudyQuery,
    response: stepStudy,
    problems: ["invalid"],
    handler: async ({ context, project, params, query }) => {
      const block = await loadBlockRow(context.db, project.id, params.build, params.block);
      if (block === null) throw new NotFound();
      const reference = query.reference ?? 0;
      const { references } = JSON.parse(block.details) as BlockDetails;
      if (reference >= references.length) {
        const detail = `the block has ${references.length} references, counted from 0`;
        throw new Invalid([{ pointer: "#/query/reference", detail }]);
      }
      const window = windowOf(query, block.columnCount);
      const study = await loadStepStudy(context.db, context.judge, block, reference, window);
      return presentStepStudy(block, reference, window, study);
    },
  }),
];

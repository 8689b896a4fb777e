import { z } from "zod";
import { blockDetail, blockQuery, blockRow } from "../../../shared/schemas/block.ts";
import { page, pageQuery } from "../../../shared/schemas/common.ts";
import type { Reader } from "../../db/reader.ts";
import { defineRoute } from "../../http/defineRoute.ts";
import type { Route } from "../../http/defineRoute.ts";
import { pageRequest, pageSlice } from "../../http/paging.ts";
import { Invalid, NotFound } from "../../http/problem.ts";
import type { BlockDetails } from "../../ingest/blockDetails.ts";
import { isWorse } from "../../record/buildSummary.ts";
import type { StoredWorst } from "../../ingest/judgePosting.ts";
import { loadBuild } from "../builds/loadBuilds.ts";
import { numericId } from "../numericId.ts";
import { loadBlockPlanes, loadPostedPlane, loadSideValues } from "./loadBlockPlanes.ts";
import { loadBlockRow, loadBlockRows } from "./loadBlockRows.ts";
import type { LoadedBlock } from "./loadBlockRows.ts";
import { loadKin } from "./loadProbes.ts";
import { presentBlockRow } from "./present.ts";
import { presentBlockDetail } from "./presentDetail.ts";
import { windowOf } from "./window.ts";

/** Worst first; blocks without an entry last; between equals by name. */
function worstFirst(a: LoadedBlock, b: LoadedBlock): number {
  if (a.worst === null || b.worst === null) return Number(a.worst === null) - Number(b.worst === null);
  const [worstA, worstB] = [JSON.parse(a.worst) as StoredWorst, JSON.parse(b.worst) as StoredWorst];
  if (isWorse(worstA, worstB)) return -1;
  if (isWorse(worstB, worstA)) return 1;
  return a.model < b.model ? -1 : a.model > b.model ? 1 : a.blockId - b.blockId;
}

async function loadPlanesOf(reader: Reader, block: LoadedBlock) {
  const [snapshot] = await reader.select<{ planes: Buffer }>("SELECT planes FROM snapshots WHERE id = $1", [
    block.snapshotId,
  ]);
  return snapshot.planes;
}

/** @throws Invalid for a reference or step that the block does not have. */
async function postedPlane(
  reader: Reader,
  block: LoadedBlock,
  wanted: Parameters<typeof loadPostedPlane>[1],
  query: { readonly posted?: number | undefined; readonly step?: number | undefined },
): Promise<Float64Array | null> {
  if (query.posted === undefined) return null;
  const reference = query.posted;
  const { references } = JSON.parse(block.details) as BlockDetails;
  const covered = references[reference]?.columns ?? null;
  const plane = await loadPostedPlane(reader, wanted, { reference, step: query.step ?? 0, covered });
  if (plane !== null) return plane;
  const detail =
    reference < references.length
      ? `the reference has no step ${query.step ?? 0}`
      : `the block has ${references.length} references, counted from 0`;
  throw new Invalid([{ pointer: reference < references.length ? "#/query/step" : "#/query/posted", detail }]);
}

export const routes: Route[] = [
  defineRoute({
    method: "get",
    path: "/projects/:project/builds/:build/blocks",
    summary: "Blocks of a build, worst first",
    tag: "Builds",
    auth: "caller",
    can: "build.read",
    params: { build: numericId },
    query: z.strictObject(pageQuery),
    response: page(blockRow),
    handler: async ({ context, project, params, query }) => {
      const blocks = await loadBlockRows(context.db, project.id, params.build);
      if (blocks.length === 0 && (await loadBuild(context.db, project.id, params.build)) === null) throw new NotFound();
      return pageSlice(blocks.sort(worstFirst), pageRequest(query), presentBlockRow);
    },
  }),
  defineRoute({
    method: "get",
    path: "/projects/:project/builds/:build/blocks/:block",
    summary: "One block of a build with its numbers",
    description:
      "Planes are row-major. `format=f64le` gives base64 planes; `rows=a:b&columns=c:d` a window; more than 250,000 entries need one of the two. `posted=k` (and `step=s` of a sweep) adds what reference k said.",
    tag: "Builds",
    auth: "caller",
    can: "build.read",
    params: { build: numericId, block: numericId },
    query: blockQuery,
    response: blockDetail,
    problems: ["invalid"],
    handler: async ({ context, project, params, query }) => {
      const { db } = context;
      const block = await loadBlockRow(db, project.id, params.build, params.block);
      if (block === null) throw new NotFound();
      const window = windowOf(query, block.rowCount, block.columnCount);
      const snapshotPlanes = await loadPlanesOf(db, block);
      const { motionPlanes, coveragePlanes, columnCount: columns, floor } = block;
      const planes = await loadBlockPlanes(db, {
        snapshotPlanes,
        motionPlanes,
        coveragePlanes,
        columns,
        floor,
        window,
      });
      const sides = {
        outputValues: await loadSideValues(db, snapshotPlanes, "outputValues", block.rowCount),
        inputValues: await loadSideValues(db, snapshotPlanes, "inputValues", block.columnCount),
      };
      const posted = await postedPlane(db, block, { snapshotPlanes, columns, window }, query);
      const kin = await loadKin(db, project.id, block);
      return presentBlockDetail(block, planes, sides, window, query.format ?? "json", posted, kin);
    },
  }),
];

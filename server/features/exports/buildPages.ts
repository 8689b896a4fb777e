import type { ExportedBlock } from "../../../shared/schemas/export.ts";
import { toWire } from "../../../shared/schemas/common.ts";
import type { Reader } from "../../db/reader.ts";
import { time, timeOrNull } from "../../http/present.ts";
import { speaks } from "../../record/laneBuilds.ts";
import { loadBlockPage } from "../blocks/loadBlockRows.ts";
import { presentBlockRow } from "../blocks/present.ts";
import { EXPORT_PAGE, within } from "./scope.ts";
import type { ExportScope } from "./scope.ts";

interface ExportedBuild {
  readonly id: number;
  readonly runId: string;
  readonly createdAt: number;
  readonly committedAt: number | null;
  readonly sha: string;
  readonly laneId: number;
  readonly lane: string;
  /** By commit time, else arrival. */
  readonly at: number;
  readonly current: 0 | 1;
}

/** Builds read at once. */
const BUILD_PAGE = 100;

/** Blocks of the complete builds, oldest commit first, page by page. */
export async function* buildPages(reader: Reader, scope: ExportScope): AsyncGenerator<ExportedBlock[]> {
  let last: ExportedBuild | undefined;
  do {
    const builds = await loadBuildPage(reader, scope, last);
    const breaks = await loadBreakNumbers(reader, scope.projectId, builds);
    for (const build of builds) yield* blockPages(reader, build, breaks);
    last = builds.length < BUILD_PAGE ? undefined : builds.at(-1);
  } while (last !== undefined);
}

function loadBuildPage(
  reader: Reader,
  { projectId, lane, from, to }: ExportScope,
  last: ExportedBuild | undefined,
): Promise<ExportedBuild[]> {
  const at = "COALESCE(c.committedAt, b.createdAt)";
  return reader.select<ExportedBuild>(
    `SELECT b.id, b.runId, b.createdAt, c.committedAt, c.sha, b.laneId, l.name AS lane, ${at} AS at, ${speaks("b")} AS current
     FROM builds b JOIN lanes l ON l.id = b.laneId JOIN commits c ON c.id = b.commitId
     WHERE b.projectId = $1 AND b.state = 'complete' AND ($2 IS NULL OR l.name = $2) AND ${within(at, 3)}
       AND ($5 IS NULL OR (${at}, b.id) > ($5, $6)) ORDER BY at, b.id LIMIT $7`,
    [projectId, lane, from, to, last?.at ?? null, last?.id ?? null, BUILD_PAGE],
  );
}

/** By lane, commit and block: running numbers of the breaks that are bad there. */
type BreakNumbers = ReadonlyMap<string, readonly number[]>;
const placeKey = (laneId: number, sha: string, blockId: number) => `${laneId} ${sha} ${blockId}`;

async function loadBreakNumbers(
  reader: Reader,
  projectId: number,
  builds: readonly ExportedBuild[],
): Promise<BreakNumbers> {
  const rows = await reader.select<{ number: number; laneId: number; sha: string; blockId: number }>(
    `SELECT b.number, b.laneId, bad.value AS sha, e.blockId
     FROM breaks b JOIN json_each(b.trace, '$.bad') bad JOIN break_entries e ON e.breakId = b.id
     WHERE b.projectId = $1 AND b.withdrawnAt IS NULL AND bad.value IN (SELECT value FROM json_each($2))
     ORDER BY b.number`,
    [projectId, JSON.stringify([...new Set(builds.map((build) => build.sha))])],
  );
  const numbers = new Map<string, number[]>();
  for (const { number, laneId, sha, blockId } of rows) {
    const key = placeKey(laneId, sha, blockId);
    const known = numbers.get(key) ?? [];
    numbers.set(key, known);
    if (known.at(-1) !== number) known.push(number);
  }
  return numbers;
}

async function* blockPages(
  reader: Reader,
  build: ExportedBuild,
  breaks: BreakNumbers,
): AsyncGenerator<ExportedBlock[]> {
  let after = 0;
  for (let full = true; full;) {
    const blocks = await loadBlockPage(reader, build.id, { after, limit: EXPORT_PAGE });
    if (blocks.length > 0) {
      yield blocks.map((block) => {
        const { blockId, model, point, rows, columns, counts, rtol, worst, motion, resolution, ...row } =
          presentBlockRow(block);
        return {
          commit: build.sha,
          committedAt: timeOrNull(build.committedAt),
          receivedAt: time(build.createdAt),
          lane: build.lane,
          buildId: String(build.id),
          runId: build.runId,
          speaks: build.current === 1,
          blockId,
          model,
          output: row.output.name,
          input: row.input.name,
          point,
          probe: row.probe,
          rows,
          columns,
          counts,
          carried: row.carried,
          worst,
          rtol,
          floor: toWire(row.floor),
          resolution,
          signatures: row.signatures.map(({ code, share, detail }) => ({ code, share, detail })),
          motion,
          breaks: [...(breaks.get(placeKey(build.laneId, build.sha, block.blockId)) ?? [])],
        };
      });
    }
    full = blocks.length === EXPORT_PAGE;
    after = blocks.at(-1)?.blockId ?? after;
  }
}

import type { ProjectRow } from "../../../shared/schemas/project.ts";
import type { Context } from "../../context.ts";

export type Trouble = Pick<ProjectRow, "openBreaks" | "silentLanes" | "lastBuildAt" | "trace">;
const NONE: Trouble = { openBreaks: 0, silentLanes: [], lastBuildAt: null, trace: [] };

/** Where there is trouble, for each of the projects. */
export function troubleOf(_context: Context, projectIds: readonly number[]): Promise<ReadonlyMap<number, Trouble>> {
  return Promise.resolve(new Map(projectIds.map((id) => [id, NONE])));
}

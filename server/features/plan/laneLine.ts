import { commitColumns } from "../../record/commitColumns.ts";
import type { ProjectGraph } from "../../record/commitGraph.ts";
import type { LaneBuild } from "../../record/laneBuilds.ts";

/** A lane along the default branch. */
export interface LaneLine {
  /** All commits in commit order, oldest first, built or not. */
  readonly commits: readonly string[];
  /** The builds that speak for them, newest first. */
  readonly builds: readonly LaneBuild[];
}

/** The lane's builds of the default branch in commit order; failing those, of every branch. */
export function laneLine(project: ProjectGraph, speaking: ReadonlyMap<string, LaneBuild>): LaneLine {
  const all = commitColumns(project);
  const main = lineOf(
    all.filter((sha) => project.mainline.has(sha)),
    speaking,
  );
  return main.builds.length > 0 ? main : lineOf(all, speaking);
}

function lineOf(commits: readonly string[], speaking: ReadonlyMap<string, LaneBuild>): LaneLine {
  const builds = commits.flatMap((sha) => speaking.get(sha) ?? []);
  return { commits, builds: builds.reverse() };
}

import { Lane } from "../../db/models/Lane.ts";

/** Names of the lanes of each project, in the order of their first build. */
export async function lanesOf(projectIds: readonly number[]): Promise<ReadonlyMap<number, readonly string[]>> {
  const lanes = await Lane.findAll({ where: { projectId: [...projectIds] }, order: [["id", "ASC"]] });
  const byProject = new Map<number, string[]>(projectIds.map((id) => [id, []]));
  for (const lane of lanes) byProject.get(lane.projectId)?.push(lane.name);
  return byProject;
}

/** Keys of what is cached, from the general to the particular: a prefix invalidates all below it. */
export const keys = {
  projects: () => ["projects"] as const,
  project: (project: string) => ["project", project] as const,
  strip: (project: string, lane: string) => ["project", project, "strip", lane] as const,
  overview: (project: string, lane: string, at: string) => ["project", project, "overview", lane, at] as const,
  breaks: (project: string) => ["project", project, "breaks"] as const,
  breakList: (project: string, state: string, lane: string) => ["project", project, "breaks", state, lane] as const,
  break: (project: string, id: string) => ["project", project, "breaks", "one", id] as const,
  builds: (project: string, filter: string) => ["project", project, "builds", filter] as const,
  build: (project: string, id: string) => ["project", project, "builds", "one", id] as const,
  blocks: (project: string, build: string) => ["project", project, "builds", "one", build, "blocks"] as const,
  block: (project: string, build: string, block: string) =>
    ["project", project, "builds", "one", build, "blocks", block] as const,
  steps: (project: string, build: string, block: string, reference: number, window: number) =>
    ["project", project, "builds", "one", build, "steps", block, reference, window] as const,
  names: (project: string, build: string, blocks: string) =>
    ["project", project, "builds", "one", build, "names", blocks] as const,
  history: (project: string, block: string, row: number, column: number, lane: string) =>
    ["project", project, "history", block, row, column, lane] as const,
  gate: (project: string, lane: string, commit: string) => ["project", project, "gate", lane, commit] as const,
  wanted: (project: string, lane: string) => ["project", project, "wanted", lane] as const,
  plan: (project: string, lane: string, budget: string) => ["project", project, "plan", lane, budget] as const,
  members: (project: string) => ["project", project, "members"] as const,
  tokens: (project: string) => ["project", project, "tokens"] as const,
  waivers: (project: string) => ["project", project, "waivers"] as const,
};

/** Addresses of pages, as people and CI logs get them. */
export function urlsOf(publicUrl: string, slug: string) {
  const project = `${publicUrl}/projects/${encodeURIComponent(slug)}`;
  return {
    project,
    build: (id: string) => `${project}/builds/${id}`,
    break: (id: string) => `${project}/breaks/${id}`,
    /** The overview with the strip's cursor on a commit. */
    commit: (sha: string, lane: string) => `${project}?at=${sha}&lane=${encodeURIComponent(lane)}`,
  };
}
export type Urls = ReturnType<typeof urlsOf>;

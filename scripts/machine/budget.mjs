import { readFileSync } from "node:fs";
import { join } from "node:path";
import { gzipSync } from "node:zlib";

/** What the first load of the overview may weigh: compressed JavaScript, in KB of 1024 bytes. */
export const BUDGET_KB = 250;
const FIRST_VIEWS = ["index.html", "src/views/ProjectFrameView.vue", "src/views/OverviewDetailView.vue"];

/** Chunks that the browser fetches for the overview: the entry, the views on the way, and all that they import. */
export function firstLoad(manifest) {
  const wanted = new Set();
  const visit = (key) => {
    const chunk = manifest[key];
    if (!chunk || wanted.has(chunk.file)) return;
    wanted.add(chunk.file);
    for (const next of chunk.imports ?? []) visit(next);
  };
  for (const view of FIRST_VIEWS) {
    if (!manifest[view]) throw new Error(`The build's manifest has no ${view}.`);
    visit(view);
  }
  return [...wanted].filter((file) => file.endsWith(".js"));
}

/** Compressed size of the first load, in KB, with the chunks largest first. */
export function measureFirstLoad(pages) {
  const manifest = JSON.parse(readFileSync(join(pages, ".vite", "manifest.json"), "utf8"));
  const chunks = firstLoad(manifest)
    .map((file) => ({ file, kb: gzipSync(readFileSync(join(pages, file)), { level: 9 }).length / 1024 }))
    .sort((a, b) => b.kb - a.kb);
  return { kb: chunks.reduce((sum, { kb }) => sum + kb, 0), chunks };
}

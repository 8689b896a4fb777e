import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { loadConfig } from "../../server/config.ts";
import { closeContext, createContext } from "../../server/context.ts";
import type { Context } from "../../server/context.ts";
import { Project } from "../../server/db/models/Project.ts";
import { closeBuild } from "../../server/features/builds/complete.ts";
import { postCommitHistory } from "../../server/features/builds/commits.ts";
import { postBuild } from "../../server/features/builds/post.ts";
import type { Posted, PostingMode } from "../../server/features/builds/post.ts";
import { createLogger } from "../../server/logger.ts";
import type { BuildDocument, PostedBuild } from "../../shared/schemas/build.ts";
import type { CommitDocument } from "../../shared/schemas/commit.ts";

/** A real database file and judge pool with one project, driven below HTTP. */
export interface TestRecord {
  readonly context: Context;
  readonly project: Project;
  post(document: BuildDocument, mode?: PostingMode): Promise<Posted>;
  postBytes(bytes: Uint8Array, encoding?: "identity" | "gzip"): Promise<Posted>;
  close(buildId: number): Promise<PostedBuild>;
  tell(commits: readonly CommitDocument[]): Promise<{ known: number; added: number }>;
  dispose(): Promise<void>;
}

export async function openRecord(environment: Record<string, string> = {}): Promise<TestRecord> {
  const folder = await mkdtemp(join(tmpdir(), "clinograph-record-"));
  const config = loadConfig({ CLINOGRAPH_DATA: folder, LOG_LEVEL: "silent", ...environment });
  const context = await createContext(config, createLogger("silent"));
  const project = await context.db.write((w) =>
    w.create(Project, { slug: "hull", name: "Hull", defaultBranch: "main", createdAt: Date.now() }),
  );
  const postBytes = (bytes: Uint8Array, encoding: "identity" | "gzip" = "identity", mode: PostingMode = "kept") =>
    postBuild(context, project, { bytes: Buffer.from(bytes), encoding }, mode);
  return {
    context,
    project,
    post: (document, mode) => postBytes(new TextEncoder().encode(JSON.stringify(document)), "identity", mode),
    postBytes,
    close: (buildId) => closeBuild(context, project, buildId),
    tell: (commits) => postCommitHistory(context, project, commits),
    dispose: async () => {
      await closeContext(context);
      await rm(folder, { recursive: true, force: true });
    },
  };
}

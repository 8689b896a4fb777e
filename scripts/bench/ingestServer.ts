/** A server of its own process for `ingest.ts`: prints its address and a token, stops on SIGTERM. */
import { startServer } from "../../server/start.ts";
import { Project } from "../../server/db/models/Project.ts";
import { Token } from "../../server/db/models/Token.ts";
import { hashSecret, newTokenText, shownPrefix } from "../../server/features/tokens/tokenText.ts";
import { testConfig } from "../../tests/support/server.ts";

const server = await startServer(await testConfig({ validateResponses: false }));
const token = newTokenText();
await server.context.db.write(async (w) => {
  const project = await w.create(Project, {
    slug: "bench",
    name: "Bench",
    defaultBranch: "main",
    createdAt: Date.now(),
  });
  await w.create(Token, {
    projectId: project.id,
    name: "bench",
    prefix: shownPrefix(token),
    hash: hashSecret(token),
    scopes: JSON.stringify(["post", "read"]),
    createdById: null,
    createdAt: Date.now(),
  });
});
process.stdout.write(JSON.stringify({ url: server.url, token }));
process.once("SIGTERM", () => void server.close().then(() => process.exit(0)));

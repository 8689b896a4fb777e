import { request } from "node:http";
import type { ClientRequest } from "node:http";
import { rm } from "node:fs/promises";
import { expect, it } from "vitest";
import { openDatabase } from "../../server/db/database.ts";
import { Build } from "../../server/db/models/Build.ts";
import { Project } from "../../server/db/models/Project.ts";
import { Token } from "../../server/db/models/Token.ts";
import { hashSecret, newTokenText } from "../../server/features/tokens/tokenText.ts";
import { startServer } from "../../server/start.ts";
import { testConfig } from "../support/server.ts";

interface Answer {
  status: number;
  retryAfter: string | undefined;
}

const document = JSON.stringify({
  format: "clinograph.build/1",
  commit: { sha: "a".repeat(40), branch: "main" },
  run: { id: "1" },
  blocks: [
    {
      model: "rotor.thrust",
      output: { name: "thrust", size: 1 },
      input: { name: "pitch", size: 1 },
      derivative: { method: "analytic", values: [[2]] },
      references: [{ method: "complex-step", step: 1e-20, values: [[2]] }],
    },
  ],
});

function begin(url: string, token: string): { posting: ClientRequest; answer: Promise<Answer> } {
  const posting = request(`${url}/api/v1/projects/hull/builds`, {
    method: "POST",
    headers: { Authorization: `Bearer ${token}`, "Content-Type": "application/json" },
  });
  const answer = new Promise<Answer>((resolve, reject) => {
    posting.on("error", reject);
    posting.on("response", (response) => {
      response.resume();
      const retryAfter = response.headers["retry-after"];
      response.on("end", () => resolve({ status: response.statusCode ?? 0, retryAfter }));
    });
  });
  return { posting, answer };
}

it("finishes a posting under way, refuses a new one with Retry-After, and keeps what it acknowledged", async () => {
  const config = await testConfig();
  const server = await startServer(config);
  const token = newTokenText();
  await server.context.db.write(async (w) => {
    const createdAt = Date.now();
    const project = await w.create(Project, { slug: "hull", name: "Hull", defaultBranch: "main", createdAt });
    const { id: projectId } = project;
    const scopes = '["post"]';
    await w.create(Token, { projectId, name: "job", prefix: "clg_", hash: hashSecret(token), scopes, createdAt });
  });

  const slow = begin(server.url, token);
  const half = Math.floor(document.length / 2);
  await new Promise<void>((resolve, reject) => {
    slow.posting.write(document.slice(0, half), (error) => (error ? reject(error) : resolve()));
  });
  // The server has the first half once it answers another connection.
  expect((await fetch(`${server.url}/readyz`)).status).toBe(200);

  const closed = server.close();
  expect((await fetch(`${server.url}/readyz`)).status).toBe(503);
  expect((await fetch(`${server.url}/livez`)).status).toBe(200);
  const late = begin(server.url, token);
  late.posting.end(document);
  expect(await late.answer).toEqual({ status: 503, retryAfter: "10" });

  slow.posting.end(document.slice(half));
  expect((await slow.answer).status).toBe(201);
  await closed;
  await expect(fetch(`${server.url}/livez`)).rejects.toThrow();

  const reopened = await openDatabase(config.databaseFile);
  expect(await Build.count()).toBe(1);
  await reopened.close();
  await rm(config.dataFolder, { recursive: true, force: true });
});

import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Express } from "express";
import supertest from "supertest";
import type { Role, Scope } from "../../shared/domain/roles.ts";
import { createApp } from "../../server/app.ts";
import { loadConfig } from "../../server/config.ts";
import type { Config } from "../../server/config.ts";
import { closeContext, createContext } from "../../server/context.ts";
import type { Context } from "../../server/context.ts";
import { Membership } from "../../server/db/models/Membership.ts";
import { Project } from "../../server/db/models/Project.ts";
import { Token } from "../../server/db/models/Token.ts";
import { User } from "../../server/db/models/User.ts";
import { hashPassword } from "../../server/features/session/password.ts";
import { csrfTokenOf } from "../../server/features/session/csrfToken.ts";
import { issueSession } from "../../server/features/session/sessionToken.ts";
import { hashSecret, newTokenText, shownPrefix } from "../../server/features/tokens/tokenText.ts";

/** The password of everybody whom `seedPerson` makes. */
export const PASSWORD = "a long enough sentence";

export interface SeededProject {
  readonly project: Project;
  readonly slug: string;
  /** Bearer tokens by what they may do. */
  readonly tokens: { readonly post: string; readonly read: string; readonly both: string };
}

export type Agent = ReturnType<typeof supertest.agent>;

export interface TestServer {
  readonly context: Context;
  readonly app: Express;
  /** Nobody signed in. */
  readonly guest: () => ReturnType<typeof supertest>;
  /** A signed-in browser that sends the CSRF token with every request. */
  agent(email: string): Promise<Agent>;
  seedPerson(email: string, options?: { admin?: boolean; name?: string }): Promise<User>;
  /** A project, its members (made where needed) by e-mail, and three tokens. */
  seedProject(slug: string, members?: Readonly<Record<string, Role>>): Promise<SeededProject>;
  seedToken(project: Project, scopes: readonly Scope[]): Promise<string>;
  close(): Promise<void>;
}

/** Settings for tests: a folder of their own, no log, answers checked against their schemas. */
export async function testConfig(overrides: Partial<Config> = {}): Promise<Config> {
  const folder = await mkdtemp(join(tmpdir(), "clinograph-test-"));
  return {
    ...loadConfig({ CLINOGRAPH_DATA: folder, LOG_LEVEL: "silent", CLINOGRAPH_REQUESTS_PER_MINUTE: "0", PORT: "0" }),
    publicUrl: "http://clinograph.example",
    secret: "a secret for tests that is long enough",
    judgeThreads: 1,
    validateResponses: true,
    ...overrides,
  };
}

let passwordHash: Promise<string> | null = null;

/** The real application on a real database file in a folder of its own. One at a time in a test file. */
export async function startTestServer(overrides: Partial<Config> = {}): Promise<TestServer> {
  const config = await testConfig(overrides);
  const context = await createContext(config);
  const app = createApp(context);
  const { db } = context;

  async function seedPerson(email: string, options: { admin?: boolean; name?: string } = {}): Promise<User> {
    passwordHash ??= hashPassword(PASSWORD);
    const hashed = await passwordHash;
    const name = options.name ?? (email.split("@")[0] as string);
    return db.write((w) =>
      w.create(User, { email, name, passwordHash: hashed, admin: options.admin ?? false, createdAt: Date.now() }),
    );
  }

  async function seedToken(project: Project, scopes: readonly Scope[]): Promise<string> {
    const text = newTokenText();
    await db.write((w) =>
      w.create(Token, {
        projectId: project.id,
        name: scopes.join(" and "),
        prefix: shownPrefix(text),
        hash: hashSecret(text),
        scopes: JSON.stringify(scopes),
        createdAt: Date.now(),
      }),
    );
    return text;
  }

  return {
    context,
    app,
    guest: () => supertest(app),
    agent: async (email) => {
      const user = await User.findOne({ where: { email }, rejectOnEmpty: true });
      const { token, sessionId } = issueSession(context, user);
      return supertest
        .agent(app)
        .set("Cookie", `clinograph=${token}`)
        .set("X-CSRF-Token", csrfTokenOf(context, sessionId));
    },
    seedPerson,
    seedToken,
    seedProject: async (slug, members = {}) => {
      const createdAt = Date.now();
      const project = await db.write((w) =>
        w.create(Project, { slug, name: `Project ${slug}`, defaultBranch: "main", createdAt }),
      );
      for (const [email, role] of Object.entries(members)) {
        const user = (await User.findOne({ where: { email } })) ?? (await seedPerson(email));
        await db.write((w) => w.create(Membership, { userId: user.id, projectId: project.id, role, createdAt }));
      }
      const tokens = {
        post: await seedToken(project, ["post"]),
        read: await seedToken(project, ["read"]),
        both: await seedToken(project, ["post", "read"]),
      };
      return { project, slug, tokens };
    },
    close: async () => {
      await closeContext(context);
      await rm(config.dataFolder, { recursive: true, force: true });
    },
  };
}

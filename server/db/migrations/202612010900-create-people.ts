import type { QueryInterface } from "sequelize";
import { statements } from "../migrator.ts";

/** Who may: people, projects, memberships, tokens, invitations, and what each of them did. Times are milliseconds since 1970. */
const UP = `
CREATE TABLE users (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  email TEXT NOT NULL UNIQUE,
  name TEXT NOT NULL,
  passwordHash TEXT,
  admin INTEGER NOT NULL DEFAULT 0,
  sessionVersion INTEGER NOT NULL DEFAULT 1,
  disabledAt INTEGER,
  createdAt INTEGER NOT NULL
);
CREATE TABLE projects (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  slug TEXT NOT NULL UNIQUE,
  name TEXT NOT NULL,
  defaultBranch TEXT NOT NULL,
  commitUrl TEXT,
  policy TEXT NOT NULL DEFAULT '{}',
  tolerances TEXT NOT NULL DEFAULT '{}',
  toleranceRules TEXT NOT NULL DEFAULT '[]',
  createdAt INTEGER NOT NULL
);
CREATE TABLE memberships (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  userId INTEGER NOT NULL REFERENCES users(id) ON DELETE CASCADE,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  role TEXT NOT NULL CHECK (role IN ('viewer', 'developer', 'lead')),
  createdAt INTEGER NOT NULL,
  UNIQUE (userId, projectId)
);
CREATE INDEX memberships_project ON memberships (projectId);
CREATE TABLE invitations (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  tokenHash BLOB NOT NULL UNIQUE,
  purpose TEXT NOT NULL CHECK (purpose IN ('set-up', 'invitation')),
  userId INTEGER REFERENCES users(id) ON DELETE CASCADE,
  projectId INTEGER REFERENCES projects(id) ON DELETE CASCADE,
  createdById INTEGER REFERENCES users(id) ON DELETE SET NULL,
  createdAt INTEGER NOT NULL,
  expiresAt INTEGER NOT NULL,
  usedAt INTEGER
);
CREATE INDEX invitations_user ON invitations (userId);
CREATE TABLE ended_sessions (
  sessionId TEXT PRIMARY KEY,
  expiresAt INTEGER NOT NULL
) WITHOUT ROWID;
CREATE TABLE tokens (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  name TEXT NOT NULL,
  prefix TEXT NOT NULL,
  hash BLOB NOT NULL UNIQUE,
  scopes TEXT NOT NULL,
  createdById INTEGER REFERENCES users(id) ON DELETE SET NULL,
  createdAt INTEGER NOT NULL,
  lastUsedAt INTEGER,
  expiresAt INTEGER,
  revokedAt INTEGER
);
CREATE INDEX tokens_project ON tokens (projectId);
CREATE TABLE audit_entries (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  at INTEGER NOT NULL,
  actorKind TEXT NOT NULL CHECK (actorKind IN ('person', 'token', 'system')),
  actorId INTEGER,
  actorName TEXT NOT NULL,
  projectId INTEGER REFERENCES projects(id) ON DELETE SET NULL,
  action TEXT NOT NULL,
  target TEXT NOT NULL,
  detail TEXT NOT NULL DEFAULT '{}'
);
CREATE INDEX audit_entries_project ON audit_entries (projectId, id);
`;

const TABLES = ["audit_entries", "tokens", "ended_sessions", "invitations", "memberships", "projects", "users"];

export async function up(query: QueryInterface): Promise<void> {
  await statements(query, UP);
}

export async function down(query: QueryInterface): Promise<void> {
  for (const table of TABLES) await query.sequelize.query(`DROP TABLE ${table}`);
}

import type { QueryInterface } from "sequelize";
import { statements } from "../migrator.ts";

/**
 * The record: commits, builds, blocks, their numbers in tiles, and the breaks found in them. Hashes are SHA-256 in
 * 32 bytes. Wherever numbers may be NaN, infinite or -0 they are in BLOBs or in JSON with the wire's words.
 */
const UP = `
CREATE TABLE lanes (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  name TEXT NOT NULL,
  UNIQUE (projectId, name)
);
ALTER TABLE projects ADD COLUMN graphVersion TEXT NOT NULL DEFAULT '';
CREATE TABLE commits (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  sha TEXT NOT NULL,
  subject TEXT,
  authorName TEXT,
  authorEmail TEXT,
  committedAt INTEGER,
  changedPaths TEXT,
  UNIQUE (projectId, sha)
);
CREATE TABLE commit_parents (
  commitId INTEGER NOT NULL REFERENCES commits(id) ON DELETE CASCADE,
  position INTEGER NOT NULL,
  parentSha TEXT NOT NULL,
  PRIMARY KEY (commitId, position)
) WITHOUT ROWID;
CREATE TABLE commit_branches (
  commitId INTEGER NOT NULL REFERENCES commits(id) ON DELETE CASCADE,
  branch TEXT NOT NULL,
  PRIMARY KEY (commitId, branch)
) WITHOUT ROWID;
CREATE TABLE builds (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  laneId INTEGER NOT NULL REFERENCES lanes(id) ON DELETE CASCADE,
  commitId INTEGER NOT NULL REFERENCES commits(id) ON DELETE CASCADE,
  runId TEXT NOT NULL,
  runUrl TEXT,
  startedAt INTEGER,
  finishedAt INTEGER,
  state TEXT NOT NULL CHECK (state IN ('receiving', 'complete')),
  shardCount INTEGER NOT NULL,
  missingShards TEXT NOT NULL DEFAULT '[]',
  createdAt INTEGER NOT NULL,
  completedAt INTEGER,
  baselineBuildId INTEGER REFERENCES builds(id) ON DELETE SET NULL,
  summary TEXT,
  UNIQUE (laneId, commitId, runId)
);
CREATE INDEX builds_project ON builds (projectId, id);
CREATE INDEX builds_commit ON builds (commitId);
CREATE TABLE shards (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  buildId INTEGER NOT NULL REFERENCES builds(id) ON DELETE CASCADE,
  position INTEGER NOT NULL,
  bodyHash BLOB NOT NULL,
  bytes INTEGER NOT NULL,
  receivedAt INTEGER NOT NULL,
  answer BLOB,
  UNIQUE (buildId, position)
);
CREATE TABLE blocks (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  model TEXT NOT NULL,
  point TEXT NOT NULL,
  output TEXT NOT NULL,
  input TEXT NOT NULL,
  UNIQUE (projectId, model, point, output, input)
);
CREATE TABLE tiles (
  id INTEGER PRIMARY KEY,
  hash BLOB NOT NULL UNIQUE,
  encoding INTEGER NOT NULL,
  data BLOB NOT NULL
);
CREATE TABLE snapshots (
  id INTEGER PRIMARY KEY,
  hash BLOB NOT NULL UNIQUE,
  rowCount INTEGER NOT NULL,
  columnCount INTEGER NOT NULL,
  planes BLOB NOT NULL,
  rtol REAL NOT NULL,
  floor REAL NOT NULL,
  agrees INTEGER NOT NULL,
  disagrees INTEGER NOT NULL,
  unresolved INTEGER NOT NULL,
  unreferenced INTEGER NOT NULL,
  invalid INTEGER NOT NULL,
  worst TEXT,
  resolutions TEXT NOT NULL
);
CREATE TABLE motions (
  id INTEGER PRIMARY KEY,
  hash BLOB NOT NULL UNIQUE,
  planes BLOB NOT NULL,
  counts TEXT NOT NULL
);
CREATE TABLE block_details (
  id INTEGER PRIMARY KEY,
  hash BLOB NOT NULL UNIQUE,
  details TEXT NOT NULL
);
CREATE TABLE build_blocks (
  buildId INTEGER NOT NULL REFERENCES builds(id) ON DELETE CASCADE,
  blockId INTEGER NOT NULL REFERENCES blocks(id) ON DELETE CASCADE,
  snapshotId INTEGER NOT NULL REFERENCES snapshots(id),
  detailsId INTEGER NOT NULL REFERENCES block_details(id),
  motionId INTEGER REFERENCES motions(id),
  costs TEXT,
  PRIMARY KEY (buildId, blockId)
) WITHOUT ROWID;
CREATE INDEX build_blocks_block ON build_blocks (blockId, buildId);
CREATE TABLE drift_states (
  laneId INTEGER NOT NULL REFERENCES lanes(id) ON DELETE CASCADE,
  blockId INTEGER NOT NULL REFERENCES blocks(id) ON DELETE CASCADE,
  columnCount INTEGER NOT NULL,
  everBad BLOB NOT NULL,
  PRIMARY KEY (laneId, blockId, columnCount)
) WITHOUT ROWID;
CREATE TABLE breaks (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  laneId INTEGER NOT NULL REFERENCES lanes(id) ON DELETE CASCADE,
  number INTEGER NOT NULL,
  state TEXT NOT NULL CHECK (state IN ('open', 'repaired')),
  kind TEXT NOT NULL,
  onset TEXT NOT NULL,
  onsetBuildId INTEGER NOT NULL REFERENCES builds(id) ON DELETE CASCADE,
  lastGood TEXT,
  lastGoodBuildId INTEGER REFERENCES builds(id) ON DELETE SET NULL,
  repairedBy TEXT,
  repairedByBuildId INTEGER REFERENCES builds(id) ON DELETE SET NULL,
  trace TEXT NOT NULL,
  models TEXT NOT NULL,
  entryCount INTEGER NOT NULL,
  worst TEXT NOT NULL,
  motion TEXT,
  assigneeId INTEGER REFERENCES users(id) ON DELETE SET NULL,
  createdAt INTEGER NOT NULL,
  supersededById INTEGER REFERENCES breaks(id) ON DELETE SET NULL,
  withdrawnAt INTEGER,
  UNIQUE (projectId, number)
);
CREATE INDEX breaks_lane ON breaks (laneId, withdrawnAt);
CREATE TABLE break_entries (
  breakId INTEGER NOT NULL REFERENCES breaks(id) ON DELETE CASCADE,
  blockId INTEGER NOT NULL REFERENCES blocks(id) ON DELETE CASCADE,
  columnCount INTEGER NOT NULL,
  entries BLOB NOT NULL,
  PRIMARY KEY (breakId, blockId, columnCount)
) WITHOUT ROWID;
CREATE TABLE comments (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  breakId INTEGER NOT NULL REFERENCES breaks(id) ON DELETE CASCADE,
  authorId INTEGER NOT NULL REFERENCES users(id),
  body TEXT NOT NULL,
  createdAt INTEGER NOT NULL
);
CREATE INDEX comments_break ON comments (breakId);
CREATE TABLE wanted_builds (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  laneId INTEGER NOT NULL REFERENCES lanes(id) ON DELETE CASCADE,
  sha TEXT NOT NULL,
  askedById INTEGER REFERENCES users(id) ON DELETE SET NULL,
  createdAt INTEGER NOT NULL,
  UNIQUE (laneId, sha)
);
CREATE TABLE waivers (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  state TEXT NOT NULL CHECK (state IN ('asked', 'approved', 'rejected', 'ended')),
  selector TEXT NOT NULL,
  reason TEXT NOT NULL,
  maxError REAL NOT NULL,
  expiresAt INTEGER NOT NULL,
  askedById INTEGER REFERENCES users(id) ON DELETE SET NULL,
  askedAt INTEGER NOT NULL,
  decidedById INTEGER REFERENCES users(id) ON DELETE SET NULL,
  decidedAt INTEGER
);
CREATE INDEX waivers_project ON waivers (projectId, state);
`;

const TABLES = [
  "waivers",
  "wanted_builds",
  "comments",
  "break_entries",
  "breaks",
  "drift_states",
  "build_blocks",
  "block_details",
  "motions",
  "snapshots",
  "tiles",
  "blocks",
  "shards",
  "builds",
  "commit_branches",
  "commit_parents",
  "commits",
  "lanes",
];

export async function up(query: QueryInterface): Promise<void> {
  await statements(query, UP);
}

export async function down(query: QueryInterface): Promise<void> {
  for (const table of TABLES) await query.sequelize.query(`DROP TABLE ${table}`);
  await query.sequelize.query("ALTER TABLE projects DROP COLUMN graphVersion");
}

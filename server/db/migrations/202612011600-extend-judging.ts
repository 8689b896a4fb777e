import type { QueryInterface } from "sequelize";
import { statements } from "../migrator.ts";

/**
 * Drift, probes and coverage. A probe is a block of its own, so the name of a block gets a further part; what a build
 * did not check again keeps its last verdict and its age in `coverages`; drift runs along the default branch in
 * `block_drifts`, and what it told is in `drift_events`.
 */
const UP = `
ALTER TABLE projects ADD COLUMN checkLimit INTEGER NOT NULL DEFAULT 20;
ALTER TABLE lanes ADD COLUMN driftChain BLOB;
ALTER TABLE motions ADD COLUMN leftBehind TEXT;
CREATE TABLE coverages (
  id INTEGER PRIMARY KEY,
  hash BLOB NOT NULL UNIQUE,
  planes BLOB NOT NULL,
  counts TEXT NOT NULL
);
ALTER TABLE build_blocks ADD COLUMN coverageId INTEGER REFERENCES coverages(id);
CREATE TABLE block_drifts (
  laneId INTEGER NOT NULL REFERENCES lanes(id) ON DELETE CASCADE,
  blockId INTEGER NOT NULL REFERENCES blocks(id) ON DELETE CASCADE,
  columnCount INTEGER NOT NULL,
  part INTEGER NOT NULL,
  lastSnapshotId INTEGER NOT NULL REFERENCES snapshots(id),
  repeats INTEGER NOT NULL,
  quiet INTEGER NOT NULL,
  state BLOB,
  PRIMARY KEY (laneId, blockId, columnCount, part)
);
CREATE INDEX block_drifts_snapshot ON block_drifts (lastSnapshotId);
CREATE TABLE drift_events (
  laneId INTEGER NOT NULL REFERENCES lanes(id) ON DELETE CASCADE,
  blockId INTEGER NOT NULL REFERENCES blocks(id) ON DELETE CASCADE,
  columnCount INTEGER NOT NULL,
  buildId INTEGER NOT NULL REFERENCES builds(id) ON DELETE CASCADE,
  kind TEXT NOT NULL CHECK (kind IN ('climb', 'jump', 'end')),
  onsetBuildId INTEGER NOT NULL REFERENCES builds(id) ON DELETE CASCADE,
  entries BLOB NOT NULL,
  decades REAL NOT NULL,
  worstEntry INTEGER NOT NULL
);
CREATE INDEX drift_events_block ON drift_events (laneId, blockId);
CREATE INDEX drift_events_build ON drift_events (buildId);
CREATE INDEX drift_events_onset ON drift_events (onsetBuildId);
CREATE TABLE baselines (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  selector TEXT NOT NULL,
  sha TEXT NOT NULL,
  reason TEXT NOT NULL,
  acceptedById INTEGER REFERENCES users(id) ON DELETE SET NULL,
  acceptedAt INTEGER NOT NULL
);
CREATE INDEX baselines_project ON baselines (projectId);
`;

const DOWN = `
DROP TABLE baselines;
DROP TABLE drift_events;
DROP TABLE block_drifts;
ALTER TABLE build_blocks DROP COLUMN coverageId;
DROP TABLE coverages;
ALTER TABLE motions DROP COLUMN leftBehind;
ALTER TABLE lanes DROP COLUMN driftChain;
ALTER TABLE projects DROP COLUMN checkLimit;
`;

const NAME = "projectId, model, point, output, input";

const tableOfBlocks = (table: string, name: string, probe: string) => `
CREATE TABLE ${table} (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  projectId INTEGER NOT NULL REFERENCES projects(id) ON DELETE CASCADE,
  model TEXT NOT NULL,
  point TEXT NOT NULL,
  output TEXT NOT NULL,
  input TEXT NOT NULL,${probe}
  UNIQUE (${name})
);`;

/**
 * A UNIQUE constraint cannot be altered: the table is made anew. Dropping the old one would delete every row that
 * refers to it, so foreign keys rest meanwhile (SQLite: "Making Other Kinds Of Table Schema Changes").
 */
async function remakeBlocks(query: QueryInterface, create: string, rows: string): Promise<void> {
  await query.sequelize.query("PRAGMA foreign_keys = OFF");
  await statements(query, `${create}\n${rows};\nDROP TABLE blocks;\nALTER TABLE blocks_anew RENAME TO blocks;`);
  await query.sequelize.query("PRAGMA foreign_keys = ON");
}

export async function up(query: QueryInterface): Promise<void> {
  const create = tableOfBlocks("blocks_anew", `${NAME}, probe`, "\n  probe TEXT NOT NULL DEFAULT '',");
  await remakeBlocks(query, create, `INSERT INTO blocks_anew (id, ${NAME}) SELECT id, ${NAME} FROM blocks`);
  await statements(query, UP);
}

export async function down(query: QueryInterface): Promise<void> {
  await statements(query, DOWN);
  // What was recorded of probes has no place in the table before.
  await statements(query, "DELETE FROM blocks WHERE probe <> ''");
  const rows = `INSERT INTO blocks_anew (id, ${NAME}) SELECT id, ${NAME} FROM blocks`;
  await remakeBlocks(query, tableOfBlocks("blocks_anew", NAME, ""), rows);
}

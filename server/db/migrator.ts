import { copyFile, rename, rm } from "node:fs/promises";
import { existsSync } from "node:fs";
import type { QueryInterface, Sequelize } from "sequelize";
import { SequelizeStorage, Umzug } from "umzug";
import { MIGRATIONS } from "./migrations/index.ts";

export interface Migration {
  /** `YYYYMMDDHHMM-<verb>-<what>`, as its file is called. */
  readonly name: string;
  readonly up: (query: QueryInterface) => Promise<void>;
  readonly down: (query: QueryInterface) => Promise<void>;
}

export function migrator(sequelize: Sequelize): Umzug<QueryInterface> {
  return new Umzug({
    migrations: MIGRATIONS.map((migration) => ({
      name: migration.name,
      up: ({ context }) => migration.up(context),
      down: ({ context }) => migration.down(context),
    })),
    context: sequelize.getQueryInterface(),
    storage: new SequelizeStorage({ sequelize, tableName: "migrations" }),
    logger: undefined,
  });
}

/** Splits at the semicolons that end lines and runs each statement. */
export async function statements(query: QueryInterface, sql: string): Promise<void> {
  for (const statement of sql.split(/;\s*$/m)) {
    if (statement.trim() !== "") await query.sequelize.query(statement);
  }
}

/**
 * Brings the database up to date. An existing file is copied beside itself before pending migrations run; when one
 * fails, or the process ends in their midst, the copy is put back: the record is never left half migrated. After
 * success the copy stays as `<file>.before-migration`.
 * Returns the names of the migrations that ran.
 * @throws what the failing migration threw.
 */
export async function migrate(open: () => Promise<Sequelize>, file: string): Promise<string[]> {
  // While this copy is there a migration is under way, or was when the process ended.
  const copy = `${file}.migrating`;
  if (existsSync(copy)) await putBack(copy, file);
  const fresh = !existsSync(file);
  const sequelize = await open();
  const pending = await migrator(sequelize).pending();
  if (pending.length === 0) {
    await sequelize.close();
    return [];
  }
  // After a checkpoint the one file is the whole database.
  await sequelize.query("PRAGMA wal_checkpoint(TRUNCATE)");
  await sequelize.close();
  if (!fresh) {
    // Under its name only once it is whole.
    await copyFile(file, `${copy}.part`);
    await rename(`${copy}.part`, copy);
  }
  const migrating = await open();
  try {
    const ran = await migrator(migrating).up();
    await migrating.close();
    if (!fresh) await rename(copy, `${file}.before-migration`);
    return ran.map((migration) => migration.name);
  } catch (error) {
    await migrating.close();
    if (fresh) await removeDatabase(file);
    else await putBack(copy, file);
    throw error;
  }
}

async function putBack(copy: string, file: string): Promise<void> {
  await removeDatabase(file);
  await rename(copy, file);
}

async function removeDatabase(file: string): Promise<void> {
  for (const suffix of ["-wal", "-shm", ""]) await rm(`${file}${suffix}`, { force: true });
}

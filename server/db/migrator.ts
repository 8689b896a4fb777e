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
 * fails, the copy is put back and the error is thrown on: the record is never left half migrated.
 * Returns the names of the migrations that ran.
 */
export async function migrate(open: () => Promise<Sequelize>, file: string): Promise<string[]> {
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
  const copy = `${file}.before-migration`;
  if (!fresh) await copyFile(file, copy);
  const migrating = await open();
  try {
    const ran = await migrator(migrating).up();
    await migrating.close();
    return ran.map((migration) => migration.name);
  } catch (error) {
    await migrating.close();
    for (const suffix of ["-wal", "-shm"]) await rm(`${file}${suffix}`, { force: true });
    if (fresh) await rm(file, { force: true });
    else await rename(copy, file);
    throw error;
  }
}

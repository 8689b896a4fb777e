import { copyFile, readFile, rm } from "node:fs/promises";
import { existsSync } from "node:fs";
import { QueryTypes } from "sequelize";
import type { Sequelize } from "sequelize";
import { expect, it } from "vitest";
import { connect } from "../../server/db/connection.ts";
import { migrate, migrator } from "../../server/db/migrator.ts";
import { MIGRATIONS } from "../../server/db/migrations/index.ts";
import { startTestServer } from "../support/server.ts";

interface Column {
  name: string;
  type: string;
  notnull: number;
  dflt_value: string | null;
}

async function tablesOf(sequelize: Sequelize): Promise<Record<string, Column[]>> {
  const tables = await sequelize.query<{ name: string }>(
    "SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%' AND name <> 'migrations' ORDER BY name",
    { type: QueryTypes.SELECT },
  );
  const shapes: Record<string, Column[]> = {};
  for (const { name } of tables) {
    shapes[name] = await sequelize.query<Column>(
      `SELECT name, type, "notnull", dflt_value FROM pragma_table_info('${name}') ORDER BY name`,
      { type: QueryTypes.SELECT },
    );
  }
  return shapes;
}

/** What SQLite finds wrong with the file and with references between its rows. */
async function faultsOf(sequelize: Sequelize): Promise<object[]> {
  const references = await sequelize.query<object>("PRAGMA foreign_key_check", { type: QueryTypes.SELECT });
  const file = await sequelize.query<{ integrity_check: string }>("PRAGMA integrity_check", {
    type: QueryTypes.SELECT,
  });
  return [...references, ...file.filter((row) => row.integrity_check !== "ok")];
}

/** A file with people, projects, tokens, a build and a waiver in it. */
async function filledFile(): Promise<string> {
  const server = await startTestServer();
  const { slug, tokens } = await server.seedProject("hull", { "lead@example.org": "lead" });
  const lead = await server.agent("lead@example.org");
  const posted = await server
    .guest()
    .post(`/api/v1/projects/${slug}/builds`)
    .set("Authorization", `Bearer ${tokens.post}`)
    .send({
      format: "clinograph.build/1",
      commit: { sha: "b".repeat(40), branch: "main" },
      run: { id: "1" },
      blocks: [
        {
          model: "rotor.thrust",
          output: { name: "thrust", size: 1 },
          input: { name: "pitch", size: 1 },
          derivative: { method: "analytic", values: [[2]] },
        },
      ],
    });
  expect(posted.status).toBe(201);
  await lead.post(`/api/v1/projects/${slug}/waivers`).send({
    selector: { model: "rotor.*" },
    reason: "known",
    maxError: 1e-3,
    expiresAt: "2099-01-01T00:00:00Z",
  });
  const copy = `${server.context.config.dataFolder}.sqlite`;
  await server.context.idle();
  await server.context.db.sequelize.query("PRAGMA wal_checkpoint(TRUNCATE)");
  await copyFile(server.context.config.databaseFile, copy);
  await server.close();
  return copy;
}

async function removeFile(file: string): Promise<void> {
  for (const suffix of ["", "-wal", "-shm", ".before-migration", ".migrating"])
    await rm(`${file}${suffix}`, { force: true });
}

it("every migration goes down and up again on a filled database, and leaves the same tables", async () => {
  const file = await filledFile();
  const sequelize = await connect(file);
  const before = await tablesOf(sequelize);
  expect(Object.keys(before)).toContain("users");
  for (const { name } of MIGRATIONS.toReversed()) {
    await migrator(sequelize).down({ to: name });
    expect(await faultsOf(sequelize), name).toEqual([]);
  }
  expect(await tablesOf(sequelize)).toEqual({});
  const ran = await migrator(sequelize).up();
  expect(ran.map((migration) => migration.name)).toEqual(MIGRATIONS.map((migration) => migration.name));
  expect(await tablesOf(sequelize)).toEqual(before);
  expect(await faultsOf(sequelize)).toEqual([]);
  await sequelize.close();
  await removeFile(file);
});

it("the newest migration alone leaves what older ones made as it was", async () => {
  const file = await filledFile();
  const sequelize = await connect(file);
  const count = async () =>
    sequelize.query(
      `SELECT (SELECT count(*) FROM users) AS users, (SELECT count(*) FROM tokens) AS tokens,
         (SELECT count(*) FROM blocks) AS blocks, (SELECT count(*) FROM build_blocks) AS ofBuilds`,
      { type: QueryTypes.SELECT },
    );
  const before = await count();
  expect(before).toEqual([{ users: 1, tokens: 3, blocks: 1, ofBuilds: 1 }]);
  await migrator(sequelize).down();
  await migrator(sequelize).up();
  expect(await count()).toEqual(before);
  await sequelize.close();
  await removeFile(file);
});

it("a file is put back as it was when a migration fails", async () => {
  const file = await filledFile();
  const preparing = await connect(file);
  // A table in the way of the newest migration, once that is pending again.
  await migrator(preparing).down();
  await preparing.query("CREATE TABLE coverages (id INTEGER)");
  await preparing.query("PRAGMA wal_checkpoint(TRUNCATE)");
  await preparing.close();
  const before = await readFile(file);
  await expect(migrate(() => connect(file), file)).rejects.toThrow(/coverages/);
  expect((await readFile(file)).equals(before)).toBe(true);
  expect(existsSync(`${file}-wal`)).toBe(false);
  await removeFile(file);
});

it("tells which migrations ran, keeps a copy of what was before, and has nothing to do the second time", async () => {
  const file = await filledFile();
  const names = MIGRATIONS.map((migration) => migration.name);
  const preparing = await connect(file);
  await migrator(preparing).down();
  await preparing.query("PRAGMA wal_checkpoint(TRUNCATE)");
  await preparing.close();
  const before = await readFile(file);
  expect(await migrate(() => connect(file), file)).toEqual(names.slice(-1));
  expect((await readFile(`${file}.before-migration`)).equals(before)).toBe(true);
  expect(await migrate(() => connect(file), file)).toEqual([]);
  await removeFile(file);
  expect(await migrate(() => connect(file), file)).toEqual(names);
  expect(existsSync(`${file}.before-migration`)).toBe(false);
  await removeFile(file);
});

it("a migration in whose midst the process ended is begun again from what was before", async () => {
  const file = await filledFile();
  const preparing = await connect(file);
  await migrator(preparing).down();
  await preparing.query("PRAGMA wal_checkpoint(TRUNCATE)");
  await preparing.close();
  // As it is left: the whole copy, and beside it a file with the first of the new tables.
  await copyFile(file, `${file}.migrating`);
  const killed = await connect(file);
  await killed.query("CREATE TABLE coverages (id INTEGER)");
  await killed.close();
  expect(await migrate(() => connect(file), file)).toEqual([MIGRATIONS.at(-1)?.name]);
  const after = await connect(file);
  expect(await faultsOf(after)).toEqual([]);
  expect(await after.query("SELECT count(*) AS users FROM users", { type: QueryTypes.SELECT })).toEqual([{ users: 1 }]);
  await after.close();
  await removeFile(file);
});

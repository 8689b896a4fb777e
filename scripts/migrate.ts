/** Brings the database of the configured data folder up to date; `npm start` does the same by itself. */
import { mkdir } from "node:fs/promises";
import { dirname } from "node:path";
import { readConfig } from "../server/config.ts";
import { connect } from "../server/db/connection.ts";
import { migrate } from "../server/db/migrator.ts";

const { databaseFile } = readConfig();
await mkdir(dirname(databaseFile), { recursive: true, mode: 0o700 });
const ran = await migrate(() => connect(databaseFile), databaseFile);
for (const name of ran) console.log(name);
console.log(ran.length === 0 ? "Nothing to do: the database is up to date." : `${ran.length} migrations ran.`);

import type { Migration } from "../migrator.ts";
import * as createPeople from "./202612010900-create-people.ts";
import * as createRecord from "./202612010910-create-record.ts";
import * as extendJudging from "./202612011600-extend-judging.ts";

/** All migrations, oldest first. A list, not a folder read at run time: the built server is one file. */
export const MIGRATIONS: readonly Migration[] = [
  { name: "202612010900-create-people", ...createPeople },
  { name: "202612010910-create-record", ...createRecord },
  { name: "202612011600-extend-judging", ...extendJudging },
];

import { mkdir } from "node:fs/promises";
import { dirname } from "node:path";
import { QueryTypes } from "sequelize";
import type { Sequelize } from "sequelize";
import { connect } from "./connection.ts";
import { migrate } from "./migrator.ts";
import { initialiseModels } from "./models/index.ts";
import { WriteQueue } from "./write.ts";
import type { Bindable, Writer } from "./write.ts";

export interface Database {
  readonly sequelize: Sequelize;
  /** One transaction in the single write queue; see `WriteQueue`. */
  write<T>(work: (writer: Writer) => Promise<T>): Promise<T>;
  /** Rows of a query outside any transaction, values bound as $1, $2 ... */
  select<R extends object>(sql: string, bind?: readonly Bindable[]): Promise<R[]>;
  /** Waits for the writes asked for, then closes the file. */
  close(): Promise<void>;
}

/** Opens the database file, migrates it and binds the models to it. One at a time in a process. */
export async function openDatabase(file: string): Promise<Database> {
  await mkdir(dirname(file), { recursive: true });
  await migrate(() => connect(file), file);
  const sequelize = await connect(file);
  initialiseModels(sequelize);
  const queue = new WriteQueue(sequelize);
  return {
    sequelize,
    write: (work) => queue.write(work),
    select: (sql, bind = []) => sequelize.query(sql, { bind: [...bind], type: QueryTypes.SELECT }),
    close: async () => {
      await queue.idle();
      await sequelize.close();
    },
  };
}

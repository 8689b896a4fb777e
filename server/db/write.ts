import { QueryTypes } from "sequelize";
import type {
  Attributes,
  CreationAttributes,
  Model,
  ModelStatic,
  Sequelize,
  Transaction,
  WhereOptions,
} from "sequelize";

/** What SQLite binds. */
export type Bindable = string | number | null | Buffer;

/** Writes inside one transaction. Reads that belong to it pass `{ transaction: writer.transaction }`. */
export class Writer {
  readonly transaction: Transaction;
  private readonly sequelize: Sequelize;

  constructor(sequelize: Sequelize, transaction: Transaction) {
    this.sequelize = sequelize;
    this.transaction = transaction;
  }

  create<M extends Model>(model: ModelStatic<M>, values: CreationAttributes<M>): Promise<M> {
    return model.create(values, { transaction: this.transaction });
  }

  /** Number of rows changed. */
  async update<M extends Model>(
    model: ModelStatic<M>,
    values: Partial<Attributes<M>>,
    where: WhereOptions<Attributes<M>>,
  ): Promise<number> {
    const [changed] = await model.update(values as never, { where, transaction: this.transaction });
    return changed;
  }

  /** Number of rows removed. */
  destroy<M extends Model>(model: ModelStatic<M>, where: WhereOptions<Attributes<M>>): Promise<number> {
    return model.destroy({ where, transaction: this.transaction });
  }

  /** One statement with bound values ($1, $2 ...). */
  async run(sql: string, bind: readonly Bindable[] = []): Promise<void> {
    await this.sequelize.query(sql, { bind: [...bind], transaction: this.transaction, type: QueryTypes.RAW });
  }

  /** Rows of a query inside the transaction. */
  select<R extends object>(sql: string, bind: readonly Bindable[] = []): Promise<R[]> {
    return this.sequelize.query<R>(sql, {
      bind: [...bind],
      transaction: this.transaction,
      type: QueryTypes.SELECT,
    });
  }

  /**
   * Inserts rows of equal columns, at most `rowsPerStatement` a statement, passing over those that exist.
   * BLOBs are bound, not spelled out (bulkCreate would write them as hexadecimal literals).
   */
  insertOrIgnore(
    table: string,
    columns: readonly string[],
    rows: readonly (readonly Bindable[])[],
    rowsPerStatement = 100,
  ): Promise<void> {
    return this.insert("IGNORE", table, columns, rows, rowsPerStatement);
  }

  /** The same, written over rows that exist. */
  insertOrReplace(
    table: string,
    columns: readonly string[],
    rows: readonly (readonly Bindable[])[],
    rowsPerStatement = 100,
  ): Promise<void> {
    return this.insert("REPLACE", table, columns, rows, rowsPerStatement);
  }

  private async insert(
    conflict: "IGNORE" | "REPLACE",
    table: string,
    columns: readonly string[],
    rows: readonly (readonly Bindable[])[],
    rowsPerStatement: number,
  ): Promise<void> {
    for (let first = 0; first < rows.length; first += rowsPerStatement) {
      const part = rows.slice(first, first + rowsPerStatement);
      const tuples = part.map((row, r) => `(${row.map((_, c) => `$${r * columns.length + c + 1}`).join(", ")})`);
      await this.run(
        `INSERT OR ${conflict} INTO ${table} (${columns.join(", ")}) VALUES ${tuples.join(", ")}`,
        part.flat(),
      );
    }
  }
}

/**
 * The only way to write: one transaction at a time in this process, in the order asked for. SQLite allows one writer,
 * and writers that wait for each other's locks fill the thread pool that the lock's holder needs.
 * Not re-entrant: work that is inside passes its writer down.
 */
export class WriteQueue {
  private readonly sequelize: Sequelize;
  private last: Promise<unknown> = Promise.resolve();

  constructor(sequelize: Sequelize) {
    this.sequelize = sequelize;
  }

  /** Runs `work` in a transaction; commits when it resolves, rolls back and rejects when it rejects. */
  write<T>(work: (writer: Writer) => Promise<T>): Promise<T> {
    const result = this.last.then(() =>
      this.sequelize.transaction((transaction) => work(new Writer(this.sequelize, transaction))),
    );
    this.last = result.catch(() => undefined);
    return result;
  }

  /** Resolves when everything asked for so far is done. */
  async idle(): Promise<void> {
    await this.last;
  }
}

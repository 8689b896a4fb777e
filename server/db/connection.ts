import { Sequelize } from "sequelize";
import sqlite3 from "sqlite3";

/** How long one connection waits for another's lock: only a second process can hold one for long. */
const BUSY_TIMEOUT_MS = 10_000;

/** Bytes of a page in a new file: a tile of 32 KiB takes two of them, and a large posting is written a quarter faster. */
const PAGE_BYTES = 16_384;

/**
 * A large posting writes about 1,300 pages: with SQLite's 1,000 its commit would wait until all of them are copied from
 * the log into the file as well.
 *
 * Set on every connection: Sequelize opens a new one for each transaction and SQLite forgets these with it.
 */
const PRAGMAS = `
  PRAGMA synchronous = FULL;
  PRAGMA foreign_keys = ON;
  PRAGMA trusted_schema = OFF;
  PRAGMA cache_size = -8000;
  PRAGMA wal_autocheckpoint = 2500;
`;

interface ConnectionManager {
  getConnection(options: object): Promise<sqlite3.Database>;
}

/**
 * Opens the SQLite file in WAL mode. Every connection, those of transactions included, is durable on commit
 * (`synchronous = FULL`) and checks foreign keys.
 * @throws when the file cannot be opened or written.
 */
export async function connect(file: string): Promise<Sequelize> {
  const sequelize = new Sequelize({
    dialect: "sqlite",
    dialectModule: sqlite3,
    storage: file,
    logging: false,
    transactionType: "IMMEDIATE" as never,
    // The write queue leaves nothing to retry: a lock that is still held after the timeout is a fault worth seeing.
    retry: { max: 1 },
  });
  prepareEveryConnection(sequelize);
  await sequelize.query(`PRAGMA page_size = ${PAGE_BYTES}`);
  await sequelize.query("PRAGMA journal_mode = WAL");
  return sequelize;
}

/** Sequelize runs no `afterConnect` hook for SQLite (its issue 12487), so the manager itself is wrapped. */
function prepareEveryConnection(sequelize: Sequelize): void {
  const manager = (sequelize as unknown as { connectionManager: ConnectionManager }).connectionManager;
  const open = manager.getConnection.bind(manager);
  const prepared = new WeakMap<sqlite3.Database, Promise<void>>();
  manager.getConnection = async (options) => {
    const connection = await open(options);
    let ready = prepared.get(connection);
    if (!ready) {
      ready = new Promise((resolve, reject) => {
        connection.configure("busyTimeout", BUSY_TIMEOUT_MS);
        connection.exec(PRAGMAS, (error) => (error ? reject(error) : resolve()));
      });
      prepared.set(connection, ready);
    }
    await ready;
    return connection;
  };
}

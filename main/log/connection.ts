import sqlite3 from 'sqlite3';

type SqlValue = string | number | null;

/** What can be done inside a transaction. */
export interface Transaction {
  run(sql: string, values?: readonly SqlValue[]): Promise<void>;
  all<Row>(sql: string, values?: readonly SqlValue[]): Promise<readonly Row[]>;
  /** Several statements without values. */
  script(sql: string): Promise<void>;
}

/**
 * One connection to a database file. The binding runs what all callers ask in one stream of statements, so a statement of
 * one caller could land in another's transaction and be rolled back with it. Here everything is a transaction, and
 * transactions wait for each other.
 */
export interface Connection {
  /** Takes the write lock at once (BEGIN IMMEDIATE), waiting for other processes; rolls back when `work` rejects. */
  write<T>(work: (tx: Transaction) => Promise<T>): Promise<T>;
  /** One consistent view, however long it takes. */
  read<T>(work: (tx: Transaction) => Promise<T>): Promise<T>;
  /** Statements that SQLite does not allow in a transaction (PRAGMA journal_mode). */
  outside<T>(work: (tx: Transaction) => Promise<T>): Promise<T>;
  /** Waits for what is under way. Further calls reject. */
  close(): Promise<void>;
}

/** Opens a database file, which is made if it is missing. @throws Error with SQLite's `code` */
export async function openConnection(path: string): Promise<Connection> {
  const database = await new Promise<sqlite3.Database>((resolve, reject) => {
    const opening = new sqlite3.Database(path, sqlite3.OPEN_READWRITE | sqlite3.OPEN_CREATE, (error) =>
      error ? reject(error) : resolve(opening),
    );
  });
  const tx = statementsOf(database);
  let last: Promise<unknown> = Promise.resolve();
  let closed: Promise<void> | null = null;

  const inTurn = <T>(work: () => Promise<T>): Promise<T> => {
    if (closed) return Promise.reject(new Error('The database is closed.'));
    const turn = last.then(work, work);
    last = turn.catch(() => {}); // the caller hears of it; the next in turn must not
    return turn;
  };
  const transaction = <T>(begin: string, work: (tx: Transaction) => Promise<T>) =>
    inTurn(async () => {
      await tx.run(begin);
      try {
        const answer = await work(tx);
        await tx.run('COMMIT');
        return answer;
      } catch (error) {
        // SQLite has already rolled back after some errors (disk full): the first error is the one to tell
        await tx.run('ROLLBACK').catch(() => {});
        throw error;
      }
    });

  return {
    write: (work) => transaction('BEGIN IMMEDIATE', work),
    read: (work) => transaction('BEGIN', work),
    outside: (work) => inTurn(() => work(tx)),
    close() {
      closed ??= last.then(
        () =>
          new Promise<void>((resolve, reject) =>
            database.close((error) => (error ? reject(error) : resolve())),
          ),
      );
      return closed;
    },
  };
}

function statementsOf(database: sqlite3.Database): Transaction {
  return {
    run: async (sql, values = []) => {
      refuseUnbindable(values);
      await new Promise<void>((resolve, reject) =>
        database.run(sql, [...values], (error: Error | null) => (error ? reject(error) : resolve())),
      );
    },
    all: async <Row>(sql: string, values: readonly SqlValue[] = []) => {
      refuseUnbindable(values);
      return new Promise<Row[]>((resolve, reject) =>
        database.all<Row>(sql, [...values], (error, rows) => (error ? reject(error) : resolve(rows))),
      );
    },
    script: (sql) =>
      new Promise((resolve, reject) => database.exec(sql, (error) => (error ? reject(error) : resolve()))),
  };
}

/** The binding turns NaN, infinities and BigInt into NULL without a word. */
function refuseUnbindable(values: readonly unknown[]): void {
  for (const [i, value] of values.entries()) {
    if (value === null) continue;
    if (typeof value === 'string') {
      // a lone surrogate has no UTF-8: it would be stored as another character
      if (Buffer.from(value, 'utf8').toString('utf8') !== value)
        throw new TypeError(`value ${i + 1} of the statement is not well-formed Unicode`);
    } else if (typeof value !== 'number' || !Number.isFinite(value)) {
      throw new TypeError(`value ${i + 1} of the statement is ${String(value)}; it cannot be stored exactly`);
    }
  }
}

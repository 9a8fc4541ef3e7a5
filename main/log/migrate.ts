import { Refusal } from '../refusal.ts';
import type { Connection, Transaction } from './connection.ts';

/** Marks the file as a Tetherfall log for `file` and for us: "Tfal" in ASCII. */
const applicationId = 0x5466616c;

/**
 * Brings a log to the newest schema: the migrations that are missing, all in one transaction.
 *
 * @throws Refusal (status 1): another program's database, or a log of a newer version
 */
export async function migrate(
  connection: Connection,
  path: string,
  migrations: readonly string[],
): Promise<void> {
  if (await isCurrent(connection, path, migrations.length)) return;
  await connection.write(async (tx) => {
    // Read again under the write lock: another process may have been faster.
    const version = await versionOrRefuse(tx, path, migrations.length);
    if (version === 0) await tx.run(`PRAGMA application_id = ${applicationId}`);
    for (const step of migrations.slice(version)) await tx.script(step);
    await tx.run(`PRAGMA user_version = ${migrations.length}`);
  });
}

async function isCurrent(connection: Connection, path: string, newest: number): Promise<boolean> {
  return connection.read(async (tx) => (await versionOrRefuse(tx, path, newest)) === newest);
}

async function versionOrRefuse(tx: Transaction, path: string, newest: number): Promise<number> {
  const [facts] = await tx.all<{ owner: number; version: number; tables: number }>(
    `SELECT (SELECT application_id FROM pragma_application_id) AS owner,
            (SELECT user_version FROM pragma_user_version) AS version,
            (SELECT count(*) FROM sqlite_master) AS tables`,
  );
  const { owner = 0, version = 0, tables = 0 } = facts ?? {};
  if (owner !== applicationId && (owner !== 0 || version !== 0 || tables !== 0)) {
    throw new Refusal('logForeign', 1, `Log ${path}: this is another program's database; give another file.`);
  }
  if (version > newest) {
    throw new Refusal(
      'logNewer',
      1,
      `Log ${path}: it was written by a newer Tetherfall (log version ${version}, this one knows up to ${newest}); use that one, or give another file.`,
    );
  }
  return version;
}

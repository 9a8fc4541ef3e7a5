import { mkdir } from 'node:fs/promises';
import { dirname, resolve } from 'node:path';
import { resultSchema } from '../../analysis/sheet/result.ts';
import { sheetSchema } from '../../analysis/sheet/sheet.ts';
import { Refusal } from '../refusal.ts';
import { type Connection, openConnection } from './connection.ts';
import { exactJson } from './exactJson.ts';
import type { Log, NewReduction, SavedReduction } from './log.ts';
import { logRefusal } from './logRefusal.ts';
import { migrate } from './migrate.ts';
import { migrations } from './migrations/all.ts';
import {
  allColumns,
  ballGOf,
  type HashedColumns,
  hashOfRow,
  noPreviousHash,
  outcomeOf,
  type ReductionRow,
  type SummaryRow,
  summaryColumns,
  summaryOf,
} from './reductionRow.ts';
import { sha256 } from './sha256.ts';
import { faultOf, verifyChain } from './verifyChain.ts';

/** How long to wait for another process that is writing. */
const patienceMs = 10_000;

const insert = `INSERT INTO reductions (${allColumns.join(', ')}) VALUES (${allColumns.map(() => '?').join(', ')})`;

/**
 * Opens the log, which is made with its folder if it is missing, and brings it to the newest schema. Several processes may
 * have the same log open.
 *
 * @param clock  gives the time of saving
 * @throws Refusal (status 1) with one line when it cannot be opened; so do all methods when the file fails later
 */
export async function openLog(path: string, clock: () => Date = () => new Date()): Promise<Log> {
  const file = resolve(path);
  const connection = await connected(file);
  const telling = <T>(work: Promise<T>) =>
    work.catch((error: unknown) => {
      throw logRefusal(file, error);
    });

  return {
    path: file,
    save: (reduction) =>
      telling(
        (async () => {
          const texts = textsOf(reduction); // before the lock is taken: it is the slow part
          return connection.write(async (tx) => {
            const [last] = await tx.all<{ id: number; hash: string }>(
              'SELECT id, hash FROM reductions ORDER BY id DESC LIMIT 1',
            );
            const row = rowOf(reduction, texts, last, clock());
            await tx.run(
              insert,
              allColumns.map((column) => row[column]),
            );
            return summaryOf(row);
          });
        })(),
      ),
    list: () =>
      telling(
        connection.read(async (tx) => {
          const columns = summaryColumns.join(', ');
          const rows = await tx.all<SummaryRow>(`SELECT ${columns} FROM reductions ORDER BY id DESC`);
          return rows.map(summaryOf);
        }),
      ),
    get: (id) =>
      telling(
        connection.read(async (tx) => {
          const columns = allColumns.join(', ');
          const [row] = await tx.all<ReductionRow>(`SELECT ${columns} FROM reductions WHERE id = ?`, [id]);
          if (!row) throw new Refusal('reductionUnknown', 2, `Log ${file}: there is no reduction ${id}.`);
          return savedReduction(file, row);
        }),
      ),
    verify: () => telling(connection.read(verifyChain)),
    close: () => connection.close(),
  };
}

async function connected(file: string): Promise<Connection> {
  try {
    await mkdir(dirname(file), { recursive: true });
    const connection = await openConnection(file);
    try {
      await prepare(connection);
      await migrate(connection, file, migrations);
      return connection;
    } catch (error) {
      await connection.close();
      throw error;
    }
  } catch (error) {
    throw logRefusal(file, error);
  }
}

/** Settings that belong to a connection, not to the file. FULL: what was saved is on the disk, even if the power fails now. */
async function prepare(connection: Connection): Promise<void> {
  await connection.outside(async (tx) => {
    await tx.run(`PRAGMA busy_timeout = ${patienceMs}`);
    await tx.run('PRAGMA foreign_keys = ON');
    await tx.run('PRAGMA synchronous = FULL');
    await tx.run('PRAGMA journal_mode = WAL');
  });
}

interface Texts {
  readonly sheetJson: string;
  readonly resultJson: string;
}

function textsOf({ sheet, result }: NewReduction): Texts {
  return { sheetJson: exactJson(sheet), resultJson: exactJson(result) };
}

function rowOf(
  { result, footagePath }: NewReduction,
  { sheetJson, resultJson }: Texts,
  last: { id: number; hash: string } | undefined,
  savedAt: Date,
): ReductionRow {
  const ballG = ballGOf(result);
  const columns: HashedColumns = {
    id: (last?.id ?? 0) + 1,
    saved_at: savedAt.toISOString(),
    footage_path: footagePath,
    footage_sha256: result.inputs.footageSha256,
    sheet_sha256: result.inputs.sheetSha256,
    sheet_json_sha256: sha256(sheetJson),
    result_json_sha256: sha256(resultJson),
    program_version: result.program.version,
    program_commit: result.program.commit,
    outcome: outcomeOf(result),
    ball_g_mps2: ballG?.value ?? null,
    u_ball_g_mps2: ballG?.u ?? null,
    stops: result.findings.filter((f) => f.level === 'stop').length,
    previous_hash: last?.hash ?? noPreviousHash,
  };
  return { ...columns, hash: hashOfRow(columns), sheet_json: sheetJson, result_json: resultJson };
}

/** @throws Refusal (status 1): the row was changed outside the program, or has a form that this version does not know */
function savedReduction(file: string, row: ReductionRow): SavedReduction {
  const fault = faultOf(row, null);
  if (fault)
    throw new Refusal(
      'reductionChanged',
      1,
      `Log ${file}: reduction ${row.id} cannot be trusted: it ${fault}.`,
    );
  const sheet: unknown = JSON.parse(row.sheet_json);
  const result: unknown = JSON.parse(row.result_json);
  const known = sheetSchema.safeParse(sheet).success && resultSchema.safeParse(result).success;
  if (!known) {
    throw new Refusal(
      'reductionForm',
      1,
      `Log ${file}: reduction ${row.id} was saved by Tetherfall ${row.program_version} in a form that this version does not know; open it with that version.`,
    );
  }
  return {
    ...summaryOf(row),
    sheet: sheet as SavedReduction['sheet'],
    result: result as SavedReduction['result'],
    previousHash: row.previous_hash,
  };
}

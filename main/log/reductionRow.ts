import type { Result } from '../../analysis/sheet/result.ts';
import type { ReductionSummary } from './log.ts';
import { sha256 } from './sha256.ts';

/** The columns of a reduction that its hash is taken over: everything but the texts, for which their own hashes stand. */
export interface HashedColumns {
  readonly id: number;
  readonly saved_at: string;
  readonly footage_path: string;
  readonly footage_sha256: string;
  /** Of the sheet file's bytes, as the result states it. */
  readonly sheet_sha256: string;
  /** Of the text in sheet_json. */
  readonly sheet_json_sha256: string;
  readonly result_json_sha256: string;
  readonly program_version: string;
  readonly program_commit: string;
  readonly outcome: string;
  readonly ball_g_mps2: number | null;
  readonly u_ball_g_mps2: number | null;
  readonly stops: number;
  readonly previous_hash: string;
}

/** A reduction without its texts, as it stands in the table. */
export interface SummaryRow extends HashedColumns {
  readonly hash: string;
}

export interface ReductionRow extends SummaryRow {
  readonly sheet_json: string;
  readonly result_json: string;
}

/** Order of the columns in the hashed text. It is part of the record's format: it never changes. */
const hashedColumns = [
  'id',
  'saved_at',
  'footage_path',
  'footage_sha256',
  'sheet_sha256',
  'sheet_json_sha256',
  'result_json_sha256',
  'program_version',
  'program_commit',
  'outcome',
  'ball_g_mps2',
  'u_ball_g_mps2',
  'stops',
  'previous_hash',
] as const satisfies readonly (keyof HashedColumns)[];

export const summaryColumns = [...hashedColumns, 'hash'] as const;
export const allColumns = [...summaryColumns, 'sheet_json', 'result_json'] as const;

/** What stands as previous hash in the first row. */
export const noPreviousHash = '0'.repeat(64);

/**
 * Hash of a row: SHA-256 over one JSON array without white space, in UTF-8:
 * `["tetherfall/log/reduction/1", id, saved_at, …, previous_hash]` in the order of hashedColumns, numbers as ECMAScript
 * writes them (shortest text that gives the same float64), absent values as null. Anyone can recompute it without Tetherfall.
 */
export function hashOfRow(row: HashedColumns): string {
  return sha256(
    JSON.stringify(['tetherfall/log/reduction/1', ...hashedColumns.map((column) => row[column])]),
  );
}

export function summaryOf(row: SummaryRow): ReductionSummary {
  const { ball_g_mps2: value, u_ball_g_mps2: u } = row;
  return {
    id: row.id,
    savedAt: row.saved_at,
    footagePath: row.footage_path,
    footageSha256: row.footage_sha256,
    sheetSha256: row.sheet_sha256,
    programVersion: row.program_version,
    outcome: row.outcome as ReductionSummary['outcome'], // held to these words by the table's CHECK
    ballG: value === null || u === null ? null : { value, u },
    stops: row.stops,
    hash: row.hash,
  };
}

/** One word for all verdicts: the worst of them, `none` where there is no limit. */
export function outcomeOf(result: Result): ReductionSummary['outcome'] {
  const outcomes = new Set(result.verdicts.map((v) => v.outcome));
  return (['fail', 'undecided', 'pass'] as const).find((o) => outcomes.has(o)) ?? 'none';
}

/** The gravity check's value, where the reduction has one. */
export function ballGOf(result: Result): ReductionSummary['ballG'] {
  const ballG = result.keyValues.find((k) => k.quantity === 'ball.g');
  return ballG ? { value: ballG.value, u: ballG.u } : null;
}

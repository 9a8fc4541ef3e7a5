import type { Transaction } from './connection.ts';
import { allColumns, hashOfRow, noPreviousHash, type ReductionRow, type SummaryRow } from './reductionRow.ts';
import { sha256 } from './sha256.ts';

/** Rows read at once: results are large, and memory must not grow with the log. */
const rowsAtOnce = 20;

/**
 * Recomputes every hash from the first row on.
 *
 * It shows any change made outside the program to a row that has others after it, and a cut-off end as long as
 * sqlite_sequence was left alone. Someone who rewrites the end with all its hashes is only caught by a hash that was noted elsewhere.
 *
 * @returns the first row that does not fit, or null
 */
export async function verifyChain(tx: Transaction): Promise<{ id: number; reason: string } | null> {
  let previous: SummaryRow | null = null;
  for (;;) {
    const rows: readonly ReductionRow[] = await tx.all<ReductionRow>(
      `SELECT ${allColumns.join(', ')} FROM reductions WHERE id > ? ORDER BY id LIMIT ${rowsAtOnce}`,
      [previous?.id ?? 0],
    );
    if (rows.length === 0) break;
    for (const row of rows) {
      const id = (previous?.id ?? 0) + 1;
      if (row.id !== id) return { id, reason: 'is missing: it was taken out of the log' };
      const reason = faultOf(row, previous?.hash ?? noPreviousHash);
      if (reason !== null) return { id, reason };
      previous = row;
    }
  }
  const [sequence] = await tx.all<{ seq: number }>(
    "SELECT seq FROM sqlite_sequence WHERE name = 'reductions'",
  );
  const next = (previous?.id ?? 0) + 1;
  return (sequence?.seq ?? 0) >= next
    ? { id: next, reason: 'is missing: the end of the log was cut off' }
    : null;
}

/** What is wrong with a row in itself, or with its place after the row before. */
export function faultOf(row: ReductionRow, previousHash: string | null): string | null {
  if (sha256(row.sheet_json) !== row.sheet_json_sha256)
    return 'has a sheet that was changed after it was saved';
  if (sha256(row.result_json) !== row.result_json_sha256)
    return 'has a result that was changed after it was saved';
  if (hashOfRow(row) !== row.hash) return 'was changed after it was saved';
  if (previousHash !== null && row.previous_hash !== previousHash)
    return 'does not follow the reduction before it: one of the two was changed or replaced';
  return null;
}

import { noPreviousHash } from '../reductionRow.ts';

/**
 * Reductions with the chain of hashes. The long texts stand last, so that a list need not read past them.
 *
 * AUTOINCREMENT: sqlite_sequence remembers the highest id ever given, so that a cut-off end shows.
 * No other column is UNIQUE: INSERT OR REPLACE would delete the row that is in its way without asking a trigger.
 */
export const reductions = `
CREATE TABLE reductions (
  id INTEGER PRIMARY KEY AUTOINCREMENT,
  saved_at TEXT NOT NULL,
  footage_path TEXT NOT NULL,
  footage_sha256 TEXT NOT NULL,
  sheet_sha256 TEXT NOT NULL,
  sheet_json_sha256 TEXT NOT NULL CHECK (length(sheet_json_sha256) = 64),
  result_json_sha256 TEXT NOT NULL CHECK (length(result_json_sha256) = 64),
  program_version TEXT NOT NULL,
  program_commit TEXT NOT NULL,
  outcome TEXT NOT NULL CHECK (outcome IN ('pass', 'fail', 'undecided', 'none')),
  ball_g_mps2 REAL,
  u_ball_g_mps2 REAL,
  stops INTEGER NOT NULL CHECK (stops >= 0),
  previous_hash TEXT NOT NULL CHECK (length(previous_hash) = 64),
  hash TEXT NOT NULL CHECK (length(hash) = 64),
  sheet_json TEXT NOT NULL CHECK (json_valid(sheet_json)),
  result_json TEXT NOT NULL CHECK (json_valid(result_json)),
  CHECK ((ball_g_mps2 IS NULL) = (u_ball_g_mps2 IS NULL))
) STRICT;

CREATE TRIGGER reductions_are_not_changed BEFORE UPDATE ON reductions
BEGIN SELECT RAISE(ABORT, 'reductions are never changed'); END;

CREATE TRIGGER reductions_are_not_deleted BEFORE DELETE ON reductions
BEGIN SELECT RAISE(ABORT, 'reductions are never deleted'); END;

CREATE TRIGGER reductions_are_chained BEFORE INSERT ON reductions
WHEN NEW.id IS NOT (SELECT coalesce(max(id), 0) + 1 FROM reductions)
  OR NEW.previous_hash IS NOT coalesce((SELECT hash FROM reductions ORDER BY id DESC LIMIT 1), '${noPreviousHash}')
BEGIN SELECT RAISE(ABORT, 'a reduction must follow the one before'); END;
`;

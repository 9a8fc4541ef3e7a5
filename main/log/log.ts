import type { Result } from '../../analysis/sheet/result.ts';
import type { Sheet } from '../../analysis/sheet/sheet.ts';

export interface NewReduction {
  readonly sheet: Sheet;
  readonly result: Result;
  /** Absolute path of the footage when it was reduced: where to look for it again. */
  readonly footagePath: string;
}

/** A row of the list: what one needs to find a reduction again. */
export interface ReductionSummary {
  readonly id: number;
  readonly savedAt: string;
  readonly footagePath: string;
  readonly footageSha256: string;
  readonly sheetSha256: string;
  readonly programVersion: string;
  readonly outcome: 'pass' | 'fail' | 'undecided' | 'none';
  /** The gravity check's value, where there is one. */
  readonly ballG: { readonly value: number; readonly u: number } | null;
  readonly stops: number;
  readonly hash: string;
}

export interface SavedReduction extends ReductionSummary {
  readonly sheet: Sheet;
  readonly result: Result;
  readonly previousHash: string;
}

/** The local database of reductions. Append-only: rows are never changed or deleted. */
export interface Log {
  readonly path: string;
  save(reduction: NewReduction): Promise<ReductionSummary>;
  /** Newest first. */
  list(): Promise<readonly ReductionSummary[]>;
  /** @throws Refusal (status 2) when there is no such reduction */
  get(id: number): Promise<SavedReduction>;
  /** Recomputes the chain of hashes: the first row that does not fit, or null. */
  verify(): Promise<{ readonly id: number; readonly reason: string } | null>;
  close(): Promise<void>;
}

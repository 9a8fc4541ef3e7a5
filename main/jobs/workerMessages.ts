import type { Result } from '../../analysis/sheet/result.ts';
import type { RefusalStatus } from '../refusal.ts';
import type { Progress } from './progress.ts';

/** What a reduce worker says, and hears. */
export type FromWorker =
  | { readonly kind: 'progress'; readonly progress: Progress }
  | { readonly kind: 'done'; readonly result: Result }
  | {
      readonly kind: 'refused';
      readonly code: string;
      readonly status: RefusalStatus;
      readonly message: string;
    }
  | { readonly kind: 'failed'; readonly message: string }
  | { readonly kind: 'cancelled' };

export type ToWorker = 'cancel';

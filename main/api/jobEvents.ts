import type { Result } from '../../analysis/sheet/result.ts';
import type { Progress } from '../jobs/progress.ts';
import type { RefusalStatus } from '../refusal.ts';

/** How a job ended. */
export type JobEnd =
  | { readonly event: 'done'; readonly result: Result }
  | {
      readonly event: 'refused';
      readonly code: string;
      readonly status: RefusalStatus;
      readonly message: string;
    }
  | { readonly event: 'cancelled' };

/** The lines of the answer to GET /api/jobs/:id/events: what the job is at now, every change, and how it ended. */
export type JobEvent = { readonly event: 'queued' } | ({ readonly event: 'progress' } & Progress) | JobEnd;

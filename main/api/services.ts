import type { Result } from '../../analysis/sheet/result.ts';
import type { FrameSource } from '../footage/frameSource.ts';
import type { Shell } from '../hosts/shell.ts';
import type { Progress } from '../jobs/progress.ts';
import type { ReduceOrder } from '../jobs/reduce.ts';
import type { Log } from '../log/log.ts';

/** Runs one reduce job: rejects with a Refusal, or with a DOMException named AbortError when cancelled. */
export type RunReduceJob = (
  order: ReduceOrder,
  options: { readonly signal?: AbortSignal; readonly onProgress?: (progress: Progress) => void },
) => Promise<Result>;

/** Everything the API needs from outside, so that a host or a test can give its own. */
export interface Services {
  readonly program: Result['program'];
  readonly host: 'desktop' | 'loopback';
  readonly shell: Shell;
  readonly openFootage: (path: string) => Promise<FrameSource>;
  readonly reduceInWorker: RunReduceJob;
  /** Where the log is; it is opened by the first route that needs it. */
  readonly logPath: string;
  readonly openLog: (path: string) => Promise<Log>;
  /** The user's data folder; dropped footage is kept below it. */
  readonly dataFolder: string;
  /** Where the server-side file browser starts. */
  readonly homeFolder: string;
  /** The built window. */
  readonly rendererFolder: string;
}

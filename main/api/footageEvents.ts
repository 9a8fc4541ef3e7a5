import type { Finding } from '../../analysis/sheet/result.ts';
import type { FootageIndex, FrameSource } from '../footage/frameSource.ts';
import type { Progress } from '../jobs/progress.ts';
import type { RefusalStatus } from '../refusal.ts';

/** What the window needs to know about opened footage. */
export interface FootageSummary {
  readonly footageId: string;
  readonly path: string;
  readonly name: string;
  readonly frameCount: number;
  readonly widthPx: number;
  readonly heightPx: number;
  readonly bitDepth: number;
  readonly bitsPerPixel: number;
  /** The file's own time of each frame [s]; null where the file gives none. */
  readonly timeS: readonly (number | null)[];
  readonly timeBase: FootageIndex['timeBase'];
  readonly codec: string;
  readonly pixelFormat: string;
  readonly lumaRule: FootageIndex['lumaRule'];
  readonly rotationDeg: FootageIndex['rotationDeg'];
  readonly sha256: string;
  readonly backend: FrameSource['backend'];
  readonly findings: readonly Finding[];
}

/** The lines of the answer to POST /api/footage: any number of `progress`, then one of the others. */
export type FootageEvent =
  | ({ readonly event: 'progress' } & Progress)
  | ({ readonly event: 'opened' } & FootageSummary)
  | {
      readonly event: 'refused';
      readonly code: string;
      readonly status: RefusalStatus;
      readonly message: string;
    };

import type { Progress } from '../jobs/progress.ts';
import { progressBarText, progressText } from './progressText.ts';

/** Shows how far a job is, until it is ended. */
export interface ProgressShow {
  readonly show: (progress: Progress) => void;
  /** Takes away what is only of use while the job runs. */
  readonly end: () => void;
}

/** Where progress goes; a terminal knows its width. */
export interface ProgressOutput {
  write(text: string): unknown;
  readonly isTTY?: boolean;
  readonly columns?: number;
}

export const noProgress: ProgressShow = { show: () => {}, end: () => {} };

/** A bar on a terminal that can redraw a line, else one line per second. */
export function progressFor(output: ProgressOutput, env: NodeJS.ProcessEnv = process.env): ProgressShow {
  return output.isTTY === true && env.TERM !== 'dumb' ? progressBar(output) : progressLines(output);
}

/** One line, drawn over and over. */
export function progressBar(output: ProgressOutput): ProgressShow {
  const eraseLine = '\r\u001b[K';
  let drawn = false;
  return {
    show(progress) {
      drawn = true;
      // one column stays free: a full line would wrap on some terminals; one that does not know its width says 0
      output.write(eraseLine + progressBarText(progress, (output.columns || 80) - 1));
    },
    end() {
      if (drawn) output.write(eraseLine);
      drawn = false;
    },
  };
}

/** One line per second, the first after one second: a short job says nothing. */
export function progressLines(
  output: ProgressOutput,
  nowMs: () => number = () => performance.now(),
): ProgressShow {
  let lastMs = nowMs();
  return {
    show(progress) {
      if (nowMs() - lastMs < 1000) return;
      lastMs = nowMs();
      output.write(`${progressText(progress)}\n`);
    },
    end() {},
  };
}

/** One JSON object per line (NDJSON), for programs. */
export function progressEvents(emit: (event: object) => void): ProgressShow {
  return { show: (progress) => emit({ event: 'progress', ...progress }), end() {} };
}

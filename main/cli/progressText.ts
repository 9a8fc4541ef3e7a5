import type { Progress } from '../jobs/progress.ts';

const phases: Readonly<Record<Progress['phase'], string>> = {
  index: 'Reading footage',
  track: 'Following bodies',
  motion: 'Working out motion',
};

/** The first frames wait for the decoder to start: a rate made from them would say nothing. */
const leastFrames = 20;

/** Longest name of a phase, so that the bars stand under each other. */
const phaseWidth = Math.max(...Object.values(phases).map((p) => p.length));

/** Progress in words: `Following bodies: 213 of 412 frames, 95 frames/s, 2 s left`. */
export function progressText(progress: Progress): string {
  return `${phases[progress.phase]}: ${figures(progress)}`;
}

/** Progress as a bar, at most `width` characters. */
export function progressBarText(progress: Progress, width: number): string {
  const name = phases[progress.phase].padEnd(phaseWidth);
  const text = figures(progress);
  const room = width - name.length - text.length - 6;
  if (room < 8 || progress.framesTotal === null) return `${name}  ${text}`.slice(0, width);
  const cells = Math.min(room, 30);
  const full = Math.floor((cells * progress.framesDone) / Math.max(progress.framesTotal, 1));
  return `${name}  [${'#'.repeat(Math.min(full, cells)).padEnd(cells, '-')}]  ${text}`;
}

function figures({ framesDone, framesTotal, rateHz, timeLeftS }: Progress): string {
  const parts = [framesTotal === null ? `${framesDone} frames` : `${framesDone} of ${framesTotal} frames`];
  if (framesDone < leastFrames) return parts[0] ?? '';
  if (rateHz > 0) parts.push(`${rateHz < 10 ? rateHz.toFixed(1) : rateHz.toFixed(0)} frames/s`);
  if (timeLeftS !== null) parts.push(`${durationText(timeLeftS)} left`);
  return parts.join(', ');
}

function durationText(timeS: number): string {
  const whole = Math.ceil(timeS);
  if (whole < 60) return `${whole} s`;
  return `${Math.floor(whole / 60)} min ${String(whole % 60).padStart(2, '0')} s`;
}

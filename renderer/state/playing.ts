import { signal } from '@preact/signals';
import { frameNumber, goToFrame, hasFrame, lastFrame, stepFrames } from './frames.ts';

export const playing = signal(false);
/** Frames shown per second; the footage itself was captured much faster. */
export const playRateHz = signal(30);
export const playRates = [2, 5, 10, 30, 60] as const;

let nextAtMs = 0;

export function togglePlaying(): void {
  if (playing.value) {
    playing.value = false;
    return;
  }
  if (frameNumber.value >= lastFrame.value) goToFrame(0);
  playing.value = true;
  nextAtMs = performance.now();
  requestAnimationFrame(tick);
}

/** Shows the next frame when its time has come and it is there: a frame is shown late rather than left out. */
function tick(nowMs: number): void {
  if (!playing.value) return;
  if (frameNumber.value >= lastFrame.value) {
    playing.value = false;
    return;
  }
  if (nowMs >= nextAtMs && hasFrame(frameNumber.value)) {
    nextAtMs = Math.max(nextAtMs + 1000 / playRateHz.value, nowMs);
    stepFrames(1);
  }
  requestAnimationFrame(tick);
}

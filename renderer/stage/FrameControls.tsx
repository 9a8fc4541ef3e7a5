import { timeText } from '../parts/numberText.ts';
import { frameTimeS } from '../state/clock.ts';
import { footage } from '../state/footage.ts';
import { frameNumber, goToFrame, lastFrame, stepFrames } from '../state/frames.ts';
import { playing, playRateHz, playRates, togglePlaying } from '../state/playing.ts';

const steps = [
  { label: 'First frame', sign: '⇤', go: () => goToFrame(0), keys: 'Home' },
  { label: 'Back 10 frames', sign: '−10', go: () => stepFrames(-10), keys: 'Shift+←' },
  { label: 'Back 1 frame', sign: '−1', go: () => stepFrames(-1), keys: '←' },
] as const;
const stepsOn = [
  { label: 'On 1 frame', sign: '+1', go: () => stepFrames(1), keys: '→' },
  { label: 'On 10 frames', sign: '+10', go: () => stepFrames(10), keys: 'Shift+→' },
  { label: 'Last frame', sign: '⇥', go: () => goToFrame(lastFrame.value), keys: 'End' },
] as const;

/** Frame number and time, and the ways from frame to frame. */
export function FrameControls() {
  if (!footage.value) return null;
  return (
    <div class="frame-controls">
      <div class="button-row">
        {steps.map(StepButton)}
        <button type="button" class="play" title="Play or pause (space)" onClick={togglePlaying}>
          {playing.value ? 'Pause' : 'Play'}
        </button>
        {stepsOn.map(StepButton)}
      </div>
      <input
        type="range"
        class="frame-slider"
        aria-label="Frame"
        min={0}
        max={lastFrame.value}
        value={frameNumber.value}
        onInput={(event) => goToFrame(Number(event.currentTarget.value))}
      />
      <label class="frame-number">
        Frame
        <input
          type="number"
          min={0}
          max={lastFrame.value}
          value={frameNumber.value}
          onChange={(event) => goToFrame(Number(event.currentTarget.value) || 0)}
        />
        <span class="of">of {lastFrame.value}</span>
      </label>
      <output class="frame-time" aria-label="Time of this frame">
        {timeText(frameTimeS.value)}
      </output>
      <label class="play-rate">
        <span class="hint">shown</span>
        <select
          value={playRateHz.value}
          onChange={(event) => {
            playRateHz.value = Number(event.currentTarget.value);
          }}
        >
          {playRates.map((rate) => (
            <option key={rate} value={rate}>
              {rate} /s
            </option>
          ))}
        </select>
      </label>
    </div>
  );
}

function StepButton({
  label,
  sign,
  go,
  keys,
}: {
  label: string;
  sign: string;
  go: () => void;
  keys: string;
}) {
  return (
    <button key={label} type="button" aria-label={label} title={`${label} (${keys})`} onClick={go}>
      {sign}
    </button>
  );
}

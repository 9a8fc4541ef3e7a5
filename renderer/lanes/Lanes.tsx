import { useSignal } from '@preact/signals';
import { useRef } from 'preact/hooks';
import { timeText } from '../parts/numberText.ts';
import { frameTimeS } from '../state/clock.ts';
import { frameNumber, stepFrames } from '../state/frames.ts';
import { goToTime, lanes, shownTime, zoomedTo, zoomTimeBy, zoomTo } from '../state/lanes.ts';
import { lanesHeightPx } from '../state/panel.ts';
import { reduction } from '../state/reduction.ts';
import { Lane } from './Lane.tsx';
import { LanesHead } from './LanesHead.tsx';
import { gutterPx, rightPx } from './laneChart.ts';
import { Splitter } from './Splitter.tsx';

/** A drag shorter than this is a click [CSS px]. */
const clickPx = 4;

/** The stack of lanes with one time axis and one cursor: click or arrow keys go to a frame, a drag or + and − zoom in time. */
export function Lanes() {
  const stack = useRef<HTMLDivElement>(null);
  const dragged = useSignal<{ from: number; to: number } | null>(null);
  if (!reduction.value) return null;
  const { fromS, toS } = shownTime.value;
  const frames = reduction.value.result.frames;
  const timeAt = (px: number) => {
    const width = (stack.current?.clientWidth ?? 1) - gutterPx - rightPx;
    return fromS + ((px - gutterPx) / width) * (toS - fromS);
  };
  const place = (event: PointerEvent) => event.clientX - (stack.current?.getBoundingClientRect().left ?? 0);
  const end = () => {
    const drag = dragged.value;
    dragged.value = null;
    if (!drag) return;
    if (Math.abs(drag.to - drag.from) < clickPx) goToTime(timeAt(drag.from));
    else zoomTo(timeAt(drag.from), timeAt(drag.to));
  };
  return (
    <>
      <Splitter />
      <section class="lanes" aria-label="Lanes" style={{ height: `${lanesHeightPx.value}px` }}>
        <LanesHead />
        <div
          ref={stack}
          class="lane-stack"
          role="slider"
          tabIndex={0}
          aria-label="Frame on the lanes' time axis"
          aria-valuemin={frames[0]?.n ?? 0}
          aria-valuemax={frames.at(-1)?.n ?? 0}
          aria-valuenow={frameNumber.value}
          aria-valuetext={`frame ${frameNumber.value}, ${timeText(frameTimeS.value)}`}
          onKeyDown={(event) => {
            if (!byKey(event)) return;
            event.preventDefault();
            event.stopPropagation();
          }}
          onPointerDown={(event) => {
            if (event.button !== 0) return;
            event.currentTarget.setPointerCapture(event.pointerId);
            dragged.value = { from: place(event), to: place(event) };
          }}
          onPointerMove={(event) => {
            if (dragged.value) dragged.value = { ...dragged.value, to: place(event) };
          }}
          onPointerUp={end}
          onPointerCancel={() => {
            dragged.value = null;
          }}
          onDblClick={() => {
            zoomedTo.value = null;
          }}
        >
          {lanes.value.map((lane, i) => (
            <Lane key={lane.name} lane={lane} isLast={i === lanes.value.length - 1} />
          ))}
          <span class="time-unit" aria-hidden="true">
            time s
          </span>
          {dragged.value && Math.abs(dragged.value.to - dragged.value.from) >= clickPx ? (
            <div
              class="drag-range"
              style={{
                left: `${Math.min(dragged.value.from, dragged.value.to)}px`,
                width: `${Math.abs(dragged.value.to - dragged.value.from)}px`,
              }}
            />
          ) : null}
        </div>
      </section>
    </>
  );
}

function byKey(event: KeyboardEvent): boolean {
  if (event.ctrlKey || event.metaKey || event.altKey) return false;
  const frames = reduction.value?.result.frames ?? [];
  switch (event.key) {
    case 'ArrowLeft':
    case 'ArrowDown':
      stepFrames(event.shiftKey ? -10 : -1);
      return true;
    case 'ArrowRight':
    case 'ArrowUp':
      stepFrames(event.shiftKey ? 10 : 1);
      return true;
    case 'PageDown':
      stepFrames(-10);
      return true;
    case 'PageUp':
      stepFrames(10);
      return true;
    case 'Home':
      goToTime(frames[0]?.timeS ?? 0);
      return true;
    case 'End':
      goToTime(frames.at(-1)?.timeS ?? 0);
      return true;
    case '+':
      zoomTimeBy(0.5);
      return true;
    case '-':
      zoomTimeBy(2);
      return true;
    case '0':
    case 'Escape':
      zoomedTo.value = null;
      return true;
    default:
      return false;
  }
}

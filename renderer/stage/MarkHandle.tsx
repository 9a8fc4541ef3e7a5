import { useRef } from 'preact/hooks';
import { pxText } from '../parts/numberText.ts';
import type { Point } from '../state/draft.ts';
import { frameNumber } from '../state/frames.ts';
import { type Mark, moveMark, placeMark, pointerAt, selectedId, selectedMark } from '../state/marks.ts';
import { cssPerPx, screenScale, shownZoom } from '../state/zoom.ts';
import { cssOf, picturePoint } from './picturePoint.ts';
import { bringIntoView } from './viewOfPicture.ts';

const steps: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [-1, 0],
  ArrowRight: [1, 0],
  ArrowUp: [0, -1],
  ArrowDown: [0, 1],
};

/** A mark on the picture: drag it, or move it by the arrow keys (1 px; with Shift 0.1 px). */
export function MarkHandle({ mark, at }: { readonly mark: Mark; readonly at: Point }) {
  const grip = useRef<Point | null>(null);
  const selected = selectedId.value === mark.id;
  const elsewhere = mark.frame !== null && mark.frame !== frameNumber.value;
  if (elsewhere && !selected) return null;
  const pointer = (event: PointerEvent) => {
    const picture = (event.currentTarget as Element).parentElement;
    return picture ? picturePoint(event, picture, shownZoom.value, screenScale.value) : at;
  };
  return (
    <button
      type="button"
      id={`mark-${mark.id}`}
      class={`mark mark-${mark.kind}${selected ? ' selected' : ''}${elsewhere ? ' elsewhere' : ''}`}
      style={{ left: `${cssOf(at.x, cssPerPx.value)}px`, top: `${cssOf(at.y, cssPerPx.value)}px` }}
      aria-pressed={selected}
      aria-label={`${mark.name}: x ${pxText(at.x)}, y ${pxText(at.y)} px${mark.frame === null ? '' : `, frame ${mark.frame}`}`}
      onFocus={() => {
        selectedId.value = mark.id;
      }}
      onKeyDown={(event) => {
        const step = steps[event.key];
        if (!step || event.ctrlKey || event.metaKey || event.altKey) return;
        const size = event.shiftKey ? 0.1 : 1;
        moveMark(mark.id, step[0] * size, step[1] * size);
        bringIntoView(selectedMark.value?.at ?? at);
        event.preventDefault();
        event.stopPropagation();
      }}
      onPointerDown={(event) => {
        if (event.button !== 0) return;
        selectedId.value = mark.id;
        event.currentTarget.setPointerCapture(event.pointerId);
        event.currentTarget.focus({ preventScroll: true });
        const from = pointer(event);
        grip.current = { x: from.x - at.x, y: from.y - at.y }; // a grip beside the centre does not make it jump
        event.preventDefault();
      }}
      onPointerMove={(event) => {
        if (!grip.current) return;
        const to = pointer(event);
        placeMark(mark.id, { x: to.x - grip.current.x, y: to.y - grip.current.y });
        pointerAt.value = null;
        event.stopPropagation();
      }}
      onPointerUp={() => {
        grip.current = null;
      }}
      onPointerCancel={() => {
        grip.current = null;
      }}
    >
      <span class="mark-letter" aria-hidden="true">
        {mark.letter}
      </span>
    </button>
  );
}

import { useEffect, useRef } from 'preact/hooks';
import { footage } from '../state/footage.ts';
import { shownFrame } from '../state/frames.ts';
import { marks, placeMark, pointerAt, selectedMark } from '../state/marks.ts';
import { cssPerPx, room, screenScale, shownZoom } from '../state/zoom.ts';
import { MarkHandle } from './MarkHandle.tsx';
import { Outlines } from './Outlines.tsx';
import { paintLuma } from './paintLuma.ts';
import { picturePoint } from './picturePoint.ts';
import { TrackOverlay } from './TrackOverlay.tsx';

/** The frame at true pixels with everything that is marked on it. */
export function Picture() {
  const canvas = useRef<HTMLCanvasElement>(null);
  const frame = shownFrame.value;
  useEffect(() => {
    if (canvas.current && frame) paintLuma(canvas.current, frame);
  }, [frame]);
  const size = footage.value;
  if (!size) return null;
  const widthCss = size.widthPx * cssPerPx.value;
  const heightCss = size.heightPx * cssPerPx.value;
  const at = (event: MouseEvent) =>
    picturePoint(event, event.currentTarget as Element, shownZoom.value, screenScale.value);
  const place = (event: MouseEvent) => {
    if (event.target instanceof Element && event.target.closest('.mark')) return;
    const mark = selectedMark.value;
    if (!mark || event.button !== 0) return;
    placeMark(mark.id, at(event));
    focusMark(mark.id);
  };
  return (
    // biome-ignore lint/a11y/noStaticElementInteractions: the pointer's way; by keyboard the marks' handles and Enter do the same
    // biome-ignore lint/a11y/useKeyWithClickEvents: as above
    <div
      class={selectedMark.value ? `picture placing${selectedMark.value.at ? '' : ' setting'}` : 'picture'}
      style={{
        width: `${widthCss}px`,
        height: `${heightCss}px`,
        marginLeft: `${middled(room.value.widthPx, widthCss)}px`,
        marginTop: `${middled(room.value.heightPx, heightCss)}px`,
      }}
      onClick={place}
      onPointerMove={(event) => {
        if (selectedMark.value) pointerAt.value = at(event);
      }}
      onPointerLeave={() => {
        pointerAt.value = null;
      }}
    >
      <canvas
        ref={canvas}
        role="img"
        aria-label={`Frame ${frame?.n ?? 0} of ${size.name}`}
        data-frame={frame?.n}
        style={{ width: `${widthCss}px`, height: `${heightCss}px` }}
      />
      <Outlines widthCss={widthCss} heightCss={heightCss} />
      <TrackOverlay widthCss={widthCss} heightCss={heightCss} />
      {marks.value.map((mark) => (mark.at ? <MarkHandle key={mark.id} mark={mark} at={mark.at} /> : null))}
    </div>
  );
}

/** Space before the picture that puts it in the middle, on whole pixels of the screen: else they would not be true. */
function middled(roomCss: number, sizeCss: number): number {
  const scale = screenScale.value;
  return Math.max(0, Math.floor(((roomCss - sizeCss) / 2) * scale) / scale);
}

/** After a click the mark's handle has the focus, so that the arrow keys go on from there. */
export function focusMark(id: string): void {
  requestAnimationFrame(() => document.getElementById(`mark-${id}`)?.focus({ preventScroll: true }));
}

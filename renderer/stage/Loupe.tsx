import { useEffect, useRef } from 'preact/hooks';
import { pxText } from '../parts/numberText.ts';
import { shownFrame } from '../state/frames.ts';
import { pointerAt, selectedMark } from '../state/marks.ts';
import { paintLuma } from './paintLuma.ts';
import { RefinedPlace } from './RefinedPlace.tsx';

const sidePx = 21;
const magnification = 9;
const sideCss = sidePx * magnification;

/** The picture around the selected mark, or around the pointer while it has no place, with a cross-hair at the exact place. */
export function Loupe({ onLeft }: { readonly onLeft: boolean }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const mark = selectedMark.value;
  const frame = shownFrame.value;
  const at = mark ? (mark.at ?? pointerAt.value) : null;
  useEffect(() => {
    if (canvas.current && frame && at) drawLoupe(canvas.current, pictureOf(frame), at);
  });
  if (!mark || !frame) return null;
  return (
    <div class={onLeft ? 'loupe loupe-left' : 'loupe'}>
      <div class="loupe-head">
        <span class={`chip chip-${mark.kind}`}>{mark.letter}</span> {mark.name}
      </div>
      {at ? (
        <>
          <canvas
            ref={canvas}
            width={sideCss}
            height={sideCss}
            role="img"
            aria-label={`Magnified ${magnification} times around ${mark.name}`}
          />
          <output class="loupe-place">
            x {pxText(at.x)}&ensp;y {pxText(at.y)} px
          </output>
          <RefinedPlace />
          <div class="hint">Arrows 1 px, Shift 0.1 px; {magnification}×</div>
        </>
      ) : (
        <div class="hint">
          Click its place in the picture, or press Enter to start at the middle of the view.
        </div>
      )}
    </div>
  );
}

let painted: { frame: object; canvas: HTMLCanvasElement } | null = null;

function pictureOf(frame: NonNullable<typeof shownFrame.value>): HTMLCanvasElement {
  if (painted?.frame !== frame) {
    const canvas = painted?.canvas ?? document.createElement('canvas');
    paintLuma(canvas, frame);
    painted = { frame, canvas };
  }
  return painted.canvas;
}

function drawLoupe(
  canvas: HTMLCanvasElement,
  picture: HTMLCanvasElement,
  at: { x: number; y: number },
): void {
  const context = canvas.getContext('2d', { alpha: false });
  if (!context) return;
  context.imageSmoothingEnabled = false;
  context.fillStyle = '#777';
  context.fillRect(0, 0, sideCss, sideCss);
  const centre = sideCss / 2;
  // The edge of pixel 0 is half a pixel before its centre, where the coordinates have their zero.
  context.drawImage(
    picture,
    centre - (at.x + 0.5) * magnification,
    centre - (at.y + 0.5) * magnification,
    picture.width * magnification,
    picture.height * magnification,
  );
  for (const [width, colour] of [
    [3, '#fff'],
    [1, '#000'],
  ] as const) {
    context.lineWidth = width;
    context.strokeStyle = colour;
    context.beginPath();
    for (const [dx, dy] of [
      [1, 0],
      [-1, 0],
      [0, 1],
      [0, -1],
    ] as const) {
      context.moveTo(centre + dx * 5, centre + dy * 5);
      context.lineTo(centre + dx * (centre - 6), centre + dy * (centre - 6));
    }
    context.stroke();
  }
}

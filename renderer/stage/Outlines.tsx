import { assumedPatchPx } from '../state/assumed.ts';
import { draft, type Point } from '../state/draft.ts';
import { frameNumber } from '../state/frames.ts';
import { marks } from '../state/marks.ts';
import { cssPerPx } from '../state/zoom.ts';
import { cssOf } from './picturePoint.ts';

interface Size {
  readonly widthCss: number;
  readonly heightCss: number;
}

/** The lines of bar and plumb, and the outline of each body's patch. Drawn twice: a pale edge keeps them visible on any grey. */
export function Outlines({ widthCss, heightCss }: Size) {
  const { scale } = draft.value;
  return (
    <svg class="over-picture" width={widthCss} height={heightCss} aria-hidden="true">
      {scale.bars.map((bar, i) => (
        <Line key={`bar${i}`} kind="bar" a={bar.a} b={bar.b} />
      ))}
      <Line kind="plumb" a={scale.plumb.a} b={scale.plumb.b} />
      {marks.value.map((mark) =>
        mark.at && mark.frame === frameNumber.value ? (
          <Patch key={mark.id} kind={mark.kind} at={mark.at} sidePx={mark.patchPx ?? assumedPatchPx} />
        ) : null,
      )}
    </svg>
  );
}

function Line({ kind, a, b }: { kind: string; a?: Point; b?: Point }) {
  if (!a || !b) return null;
  const css = cssPerPx.value;
  const ends = { x1: cssOf(a.x, css), y1: cssOf(a.y, css), x2: cssOf(b.x, css), y2: cssOf(b.y, css) };
  return (
    <g>
      <line class="edge" {...ends} />
      <line class={`ink ink-${kind}`} {...ends} />
    </g>
  );
}

function Patch({ kind, at, sidePx }: { kind: string; at: Point; sidePx: number }) {
  const css = cssPerPx.value;
  const box = {
    x: cssOf(at.x - sidePx / 2, css),
    y: cssOf(at.y - sidePx / 2, css),
    width: sidePx * css,
    height: sidePx * css,
  };
  return (
    <g>
      <rect class="edge" {...box} />
      <rect class={`ink ink-${kind}`} {...box} />
    </g>
  );
}

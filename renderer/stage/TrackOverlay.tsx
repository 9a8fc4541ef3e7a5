import { letterOfBody } from '../state/marks.ts';
import { bodiesInFrame } from '../state/reduction.ts';
import { cssPerPx } from '../state/zoom.ts';
import { cssOf } from './picturePoint.ts';
import { StateShape } from './StateShape.tsx';

/** Where the reduction found each body in this frame: letter, and its state by shape and word. */
export function TrackOverlay({
  widthCss,
  heightCss,
}: {
  readonly widthCss: number;
  readonly heightCss: number;
}) {
  const css = cssPerPx.value;
  return (
    <svg class="over-picture" width={widthCss} height={heightCss} aria-hidden="true">
      {bodiesInFrame.value.map(({ id, role, state, x, y }) =>
        x === undefined || y === undefined ? null : (
          <g
            key={id}
            class={`track track-${role}`}
            transform={`translate(${cssOf(x, css)} ${cssOf(y, css)})`}
          >
            <StateShape state={state} />
            <text class="track-letter" x="11" y="18">
              {state === 'measured' ? letterOfBody(id) : `${letterOfBody(id)} ${state}`}
            </text>
          </g>
        ),
      )}
    </svg>
  );
}

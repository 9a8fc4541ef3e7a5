import { useEffect, useLayoutEffect, useRef } from 'preact/hooks';
import { footage } from '../state/footage.ts';
import { frameProblem } from '../state/frames.ts';
import { pointerAt, selectedMark } from '../state/marks.ts';
import { cssPerPx, room, zoom, zoomBy, zooms } from '../state/zoom.ts';
import { FrameControls } from './FrameControls.tsx';
import { Loupe } from './Loupe.tsx';
import { Picture } from './Picture.tsx';
import { cssOf } from './picturePoint.ts';
import { StartCard } from './StartCard.tsx';
import { TrackStates } from './TrackStates.tsx';
import { middleOn, seenMiddle } from './viewOfPicture.ts';

/** The picture, its zoom and its frames. */
export function Stage() {
  const view = useRef<HTMLDivElement>(null);
  useEffect(() => {
    const element = view.current;
    if (!element) return;
    const watch = new ResizeObserver(() => {
      room.value = { widthPx: element.clientWidth, heightPx: element.clientHeight };
    });
    watch.observe(element);
    return () => watch.disconnect();
  }, []);
  useKeptPlace(footage.value?.footageId ?? '');
  const at = selectedMark.value?.at ?? pointerAt.value;
  const inView = at && view.current ? cssOf(at.x, cssPerPx.value) - view.current.scrollLeft : 0;
  return (
    <section class="stage" aria-label="Picture">
      <div class="stage-head">
        <TrackStates />
        {footage.value ? <ZoomControls /> : null}
      </div>
      <div class="stage-room">
        <section
          class="stage-view"
          id="stage-view"
          ref={view}
          // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by keyboard
          tabIndex={0}
          aria-label="Picture, scrolls"
        >
          {footage.value ? <Picture /> : <StartCard />}
        </section>
        {footage.value ? <Loupe onLeft={inView > room.value.widthPx / 2} /> : null}
      </div>
      {frameProblem.value ? (
        <p class="problem" role="alert">
          {frameProblem.value}
        </p>
      ) : null}
      <FrameControls />
    </section>
  );
}

/** When the zoom changes, the view stays on the selected mark, or on what was in its middle. */
function useKeptPlace(footageId: string): void {
  const css = cssPerPx.value;
  const before = useRef({ footageId, css, middle: seenMiddle(css) });
  useLayoutEffect(() => {
    const { middle } = before.current;
    const isSame = before.current.footageId === footageId;
    const to = selectedMark.peek()?.at ?? middle;
    if (isSame && before.current.css !== css && to) middleOn(to);
    before.current = { footageId, css, middle: seenMiddle(css) };
    const view = document.getElementById('stage-view');
    const follow = () => {
      before.current.middle = seenMiddle(css);
    };
    view?.addEventListener('scroll', follow);
    return () => view?.removeEventListener('scroll', follow);
  }, [footageId, css]);
}

function ZoomControls() {
  return (
    <fieldset class="button-row" aria-label="Zoom">
      <button type="button" aria-label="Smaller" onClick={() => zoomBy(-1)}>
        −
      </button>
      <button
        type="button"
        aria-pressed={zoom.value === 'fit'}
        onClick={() => {
          zoom.value = 'fit';
        }}
      >
        Fit
      </button>
      {zooms.slice(0, 4).map((z) => (
        <button
          key={z}
          type="button"
          aria-pressed={zoom.value === z}
          onClick={() => {
            zoom.value = z;
          }}
        >
          {z}×
        </button>
      ))}
      <button type="button" aria-label="Larger" onClick={() => zoomBy(1)}>
        +
      </button>
    </fieldset>
  );
}

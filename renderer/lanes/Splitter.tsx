import { useRef } from 'preact/hooks';
import { lanesHeightPx } from '../state/panel.ts';

const least = 150;
const stepPx = 20;

/** The edge between picture and lanes: drag it, or move it by the up and down keys. */
export function Splitter() {
  const grip = useRef<number | null>(null);
  const most = Math.max(least, window.innerHeight - 320);
  const set = (heightPx: number) => {
    lanesHeightPx.value = Math.min(Math.max(Math.round(heightPx), least), most);
  };
  return (
    // biome-ignore lint/a11y/useSemanticElements: hr cannot be moved; this is the separator that can (WAI-ARIA window splitter)
    <div
      class="splitter"
      role="separator"
      tabIndex={0}
      aria-orientation="horizontal"
      aria-label="Height of the lanes"
      aria-valuenow={lanesHeightPx.value}
      aria-valuemin={least}
      aria-valuemax={most}
      onKeyDown={(event) => {
        if (event.key === 'ArrowUp') set(lanesHeightPx.value + stepPx);
        else if (event.key === 'ArrowDown') set(lanesHeightPx.value - stepPx);
        else return;
        event.preventDefault();
      }}
      onPointerDown={(event) => {
        event.currentTarget.setPointerCapture(event.pointerId);
        grip.current = lanesHeightPx.value + event.clientY;
      }}
      onPointerMove={(event) => {
        if (grip.current !== null) set(grip.current - event.clientY);
      }}
      onPointerUp={() => {
        grip.current = null;
      }}
    />
  );
}

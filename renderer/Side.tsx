import { useLayoutEffect, useRef } from 'preact/hooks';
import { LogList } from './log/LogList.tsx';
import { Cautions } from './parts/Cautions.tsx';
import { ResultView } from './parts/ResultView.tsx';
import { SheetForm } from './sheet/SheetForm.tsx';
import { type Panel, panel } from './state/panel.ts';
import { reduction } from './state/reduction.ts';

const panels: readonly { readonly name: Panel; readonly title: string }[] = [
  { name: 'sheet', title: 'Sheet' },
  { name: 'result', title: 'Result' },
  { name: 'log', title: 'Log' },
  { name: 'cautions', title: 'Drop area cautions' },
];

/** Beside the picture: one of sheet, result, log. */
export function Side() {
  const scrolled = useOwnScroll();
  return (
    <aside class="side" aria-label="Sheet, result and log">
      <div class="side-choice" role="tablist" aria-label="Beside the picture">
        {panels.map(({ name, title }) => (
          <button
            key={name}
            type="button"
            role="tab"
            id={`choose-${name}`}
            aria-selected={panel.value === name}
            aria-controls="side-panel"
            tabIndex={panel.value === name ? 0 : -1}
            onClick={() => {
              panel.value = name;
            }}
            onKeyDown={(event) => step(event, name)}
          >
            {title}
          </button>
        ))}
      </div>
      <div
        class="side-panel"
        id="side-panel"
        ref={scrolled}
        role="tabpanel"
        aria-labelledby={`choose-${panel.value}`}
        // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable by keyboard
        tabIndex={0}
      >
        {panel.value === 'sheet' ? <SheetForm /> : null}
        {panel.value === 'result' ? <ResultView /> : null}
        {panel.value === 'log' ? <LogList /> : null}
        {panel.value === 'cautions' ? <Cautions /> : null}
      </div>
    </aside>
  );
}

/** Each panel stays where it was scrolled to; a new result is seen from its top, where verdicts and key values are. */
function useOwnScroll() {
  const element = useRef<HTMLDivElement>(null);
  const places = useRef<Partial<Record<Panel, number>>>({});
  const name = panel.value;
  const result = reduction.value?.result;
  useLayoutEffect(() => {
    places.current.result = 0;
    if (panel.peek() === 'result') element.current?.scrollTo(0, 0);
  }, [result]);
  useLayoutEffect(() => {
    const shown = element.current;
    if (!shown) return;
    shown.scrollTop = places.current[name] ?? 0;
    const remember = () => {
      places.current[name] = shown.scrollTop;
    };
    shown.addEventListener('scroll', remember);
    return () => shown.removeEventListener('scroll', remember);
  }, [name]);
  return element;
}

function step(event: KeyboardEvent, from: Panel): void {
  const by = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
  if (by === 0) return;
  event.preventDefault();
  const i = panels.findIndex((p) => p.name === from);
  const next = panels[(i + by + panels.length) % panels.length];
  if (!next) return;
  panel.value = next.name;
  document.getElementById(`choose-${next.name}`)?.focus();
}

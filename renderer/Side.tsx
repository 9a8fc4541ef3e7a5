import { LogList } from './log/LogList.tsx';
import { Cautions } from './parts/Cautions.tsx';
import { ResultView } from './parts/ResultView.tsx';
import { SheetForm } from './sheet/SheetForm.tsx';
import { type Panel, panel } from './state/panel.ts';

const panels: readonly { readonly name: Panel; readonly title: string }[] = [
  { name: 'sheet', title: 'Sheet' },
  { name: 'result', title: 'Result' },
  { name: 'log', title: 'Log' },
  { name: 'cautions', title: 'Drop area cautions' },
];

/** Beside the picture: one of sheet, result, log. */
export function Side() {
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

import { theoryNames } from '../parts/theoryNames.ts';
import { axis, hiddenModels, lanes, zoomedTo, zoomTimeBy } from '../state/lanes.ts';
import { reduction } from '../state/reduction.ts';
import { bodyLooks, otherLook, theoryColour } from './colours.ts';

/** What the lines mean, which of them are shown, and zoom in time. */
export function LanesHead() {
  const traces = lanes.value[0]?.traces ?? [];
  const models = [...new Set((reduction.value?.result.theory ?? []).map((t) => t.model))];
  return (
    <div class="lanes-head">
      <label>
        <span class="visually-hidden">Direction</span>
        <select
          value={axis.value}
          onChange={(event) => {
            axis.value = event.currentTarget.value === 'x' ? 'x' : 'y';
          }}
        >
          <option value="y">vertical, up</option>
          <option value="x">horizontal</option>
        </select>
      </label>
      {traces.map(({ id, role, letter }) => {
        const look = bodyLooks[role] ?? otherLook;
        return (
          <span key={id} class="legend">
            <Sample colour={look.colour} dash={look.dash} /> {letter} {id}
          </span>
        );
      })}
      {axis.value === 'x'
        ? null
        : models.map((model) => {
            const { short, text, letter, dash } = theoryNames[model];
            return (
              <label key={model} class="legend" title={text}>
                <input
                  type="checkbox"
                  checked={!hiddenModels.value.has(model)}
                  onChange={() => {
                    const next = new Set(hiddenModels.value);
                    if (!next.delete(model)) next.add(model);
                    hiddenModels.value = next;
                  }}
                />
                <Sample colour={theoryColour} dash={dash} /> {letter} <span class="legend-text">{short}</span>
              </label>
            );
          })}
      <fieldset class="button-row lanes-zoom" aria-label="Zoom in time">
        <button type="button" aria-label="Longer time" title="- (in the lanes)" onClick={() => zoomTimeBy(2)}>
          −
        </button>
        <button
          type="button"
          aria-label="Shorter time"
          title="+ (in the lanes)"
          onClick={() => zoomTimeBy(0.5)}
        >
          +
        </button>
        <button
          type="button"
          disabled={zoomedTo.value === null}
          title="0 (in the lanes), or double click"
          onClick={() => {
            zoomedTo.value = null;
          }}
        >
          All time
        </button>
      </fieldset>
    </div>
  );
}

function Sample({ colour, dash }: { readonly colour: string; readonly dash: readonly number[] }) {
  return (
    <svg width="26" height="8" aria-hidden="true">
      <line x1="0" y1="4" x2="26" y2="4" stroke={colour} stroke-width="2" stroke-dasharray={dash.join(' ')} />
    </svg>
  );
}

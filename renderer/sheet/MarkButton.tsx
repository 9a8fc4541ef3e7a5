import { focusSelected } from '../keys.ts';
import { pxText } from '../parts/numberText.ts';
import { marks, selectedId, selectMark } from '../state/marks.ts';

/** Selects a mark, to be set or moved on the picture; shows where it is. */
export function MarkButton({ id }: { readonly id: string }) {
  const mark = marks.value.find((m) => m.id === id);
  if (!mark) return null;
  return (
    <button
      type="button"
      id={`field-${id}`}
      class={`mark-button${mark.at ? '' : ' asked'}`}
      aria-pressed={selectedId.value === id}
      onClick={() => {
        selectMark(id);
        focusSelected();
      }}
    >
      <span class={`chip chip-${mark.kind}`} aria-hidden="true">
        {mark.letter}
      </span>
      <span class="visually-hidden">{mark.name} </span>
      <span class="figures">{mark.at ? `${pxText(mark.at.x)}, ${pxText(mark.at.y)}` : 'set on picture'}</span>
      {mark.at && mark.frame !== null ? <span class="hint"> frame {mark.frame}</span> : null}
    </button>
  );
}

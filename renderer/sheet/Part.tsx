import type { ComponentChildren } from 'preact';
import {
  confirmPart,
  isCarriedOver,
  type PartName,
  type PartState,
  partState,
  parts,
  shownProblemsOfPart,
} from '../state/check.ts';

const signs: Readonly<Record<PartState, string>> = { empty: '○', unsettled: '◐', settled: '●', stale: '↻' };

/** One numbered part of the sheet with its state, and the problems that belong to the part as a whole. */
export function Part({
  name,
  title,
  children,
  ownFields,
}: {
  readonly name: PartName;
  readonly title: string;
  readonly children: ComponentChildren;
  /** Problems of these fields are said by the fields. */
  readonly ownFields: readonly string[];
}) {
  const state = partState(name);
  const found = shownProblemsOfPart(name).filter((p) => !ownFields.includes(p.field));
  return (
    <section class={`sheet-part part-${state}`} aria-labelledby={`part-${name}`}>
      <h2 id={`part-${name}`}>
        <span class="part-number">{parts.indexOf(name) + 1}</span> {title}
        <span class={`part-state state-${state}`}>
          <span aria-hidden="true">{signs[state]}</span> {state}
        </span>
      </h2>
      {isCarriedOver(name) ? (
        <p class="carried">
          Set on the drop before.
          <button type="button" onClick={() => confirmPart(name)}>
            Still right
          </button>
        </p>
      ) : null}
      {children}
      {found.map((p) => (
        <p key={p.text} class={p.level === 'stop' ? 'field-problem' : 'field-caution'}>
          {p.text.startsWith(p.field) ? p.text : `${p.field}: ${p.text}`}
        </p>
      ))}
    </section>
  );
}

import type { Verdict } from '../../analysis/sheet/result.ts';

const signs: Readonly<Record<Verdict['outcome'], string>> = { pass: '✓', fail: '✕', undecided: '?' };

/** A verdict's outcome by sign and word, not by colour alone. */
export function Outcome({ outcome }: { readonly outcome: Verdict['outcome'] | 'none' }) {
  if (outcome === 'none') return <span class="outcome">no limit</span>;
  return (
    <span class={`outcome outcome-${outcome}`}>
      <span aria-hidden="true">{signs[outcome]}</span> {outcome}
    </span>
  );
}

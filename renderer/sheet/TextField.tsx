import { shownProblemsOfField } from '../state/check.ts';
import { draft, setField } from '../state/draft.ts';
import { type FieldPath, valueAt } from '../state/fieldPath.ts';

export function TextField({ field, label }: { readonly field: FieldPath; readonly label: string }) {
  const stated = valueAt(draft.value, field);
  const text = typeof stated === 'string' ? stated : '';
  const found = shownProblemsOfField(field);
  return (
    <div class="text-field">
      <label for={`field-${field}`}>{label}</label>
      <input
        id={`field-${field}`}
        type="text"
        spellcheck={false}
        autocomplete="off"
        value={text}
        aria-invalid={found.length > 0}
        onInput={(event) => setField(field, event.currentTarget.value || undefined)}
      />
      {found.map((p) => (
        <p key={p.text} class="field-problem">
          {p.text}
        </p>
      ))}
    </div>
  );
}

import { useState } from 'preact/hooks';
import { type FieldUnit, fieldText, readQuantity } from '../parts/quantityText.ts';
import { shownProblemsOfField } from '../state/check.ts';
import { draft, setField, setUnreadable, unreadable } from '../state/draft.ts';
import { type FieldPath, valueAt } from '../state/fieldPath.ts';

export interface NumberFieldProps {
  readonly field: FieldPath;
  readonly label: string;
  readonly unit: FieldUnit;
  /** What the reduction takes when this is left empty, as shown in the empty field. */
  readonly assumed?: string | undefined;
  /** True for the standard uncertainty of the field before it. */
  readonly isU?: boolean;
  /** What an empty field means, where it is no assumption. */
  readonly placeholder?: string | undefined;
  readonly needed?: boolean;
  readonly title?: string;
}

/** A number of the sheet with its unit; what is typed is taken as it is typed, problems are said below it. */
export function NumberField({
  field,
  label,
  unit,
  assumed,
  isU = false,
  needed = false,
  placeholder,
  title,
}: NumberFieldProps) {
  const [typing, setTyping] = useState<string | null>(null);
  const stated = valueAt(draft.value, field);
  const kept = unreadable.value.get(field);
  const text = typing ?? kept?.text ?? fieldText(typeof stated === 'number' ? stated : undefined);
  const found = shownProblemsOfField(field);
  const missing = text === '';
  const asked = missing && (isU || needed);
  const silence = needed ? 'needed' : isU ? 'not stated' : '';
  const described = found.length > 0 ? `${field}-problem` : undefined;
  return (
    <div
      class={`number-field${isU ? ' is-u' : ''}${asked ? ' asked' : ''}${found.length > 0 ? ' wrong' : ''}`}
    >
      <label for={`field-${field}`}>
        {isU ? <abbr title={`standard uncertainty of ${label}, k = 1`}>u</abbr> : label}
      </label>
      <span class="number-box">
        <input
          id={`field-${field}`}
          type="text"
          inputMode="decimal"
          autocomplete="off"
          spellcheck={false}
          value={text}
          placeholder={placeholder ?? (assumed === undefined ? silence : `${assumed} assumed`)}
          aria-label={
            isU ? `Standard uncertainty of ${label} [${unit}]` : `${label}${unit === '' ? '' : ` [${unit}]`}`
          }
          title={title}
          aria-invalid={found.some((p) => p.level === 'stop')}
          aria-describedby={described}
          onFocus={(event) => event.currentTarget.select()}
          onInput={(event) => {
            setTyping(event.currentTarget.value);
            take(field, event.currentTarget.value, unit);
          }}
          onBlur={() => setTyping(null)}
        />
        {unit === '' ? null : <span class="unit">{unit === '1' ? 'rel.' : unit}</span>}
      </span>
      {found.length > 0 ? (
        <p class="field-problem" id={described}>
          {found.map((p) => p.text).join('; ')}
        </p>
      ) : null}
    </div>
  );
}

function take(field: FieldPath, text: string, unit: FieldUnit): void {
  const read = text.trim() === '' ? { value: undefined } : readQuantity(text, unit);
  setUnreadable(field, 'problem' in read ? { text, problem: read.problem } : null);
  setField(field, 'problem' in read ? undefined : read.value);
}

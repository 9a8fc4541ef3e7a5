import { quantities, unitOfQuantity } from '../../analysis/verdict/quantities.ts';
import { quantityMeaning } from '../parts/quantityMeaning.ts';
import type { FieldUnit } from '../parts/quantityText.ts';
import { type DraftLimit, draft, setField } from '../state/draft.ts';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';

const fieldUnits: Readonly<Record<string, FieldUnit>> = {
  'm/s2': 'm/s²',
  'm/s3': 'm/s³',
  m: 'm',
  s: 's',
  '1': '1',
  'm/s': 'm/s',
};
const first: DraftLimit = { quantity: 'tip.peakAcceleration', unit: 'm/s2', rule: 'guarded' };

export function LimitsPart() {
  const { limits } = draft.value;
  const own = limits.flatMap((_, i) => [`limits[${i}].min`, `limits[${i}].max`]);
  return (
    <Part name="limits" title="Limits" ownFields={own}>
      {limits.length === 0 ? <p class="hint">Without a limit there is no verdict.</p> : null}
      {limits.map((limit, i) => (
        <fieldset key={i} aria-label={`Limit ${i + 1}`}>
          <div class="mark-row">
            <select
              aria-label="Quantity"
              value={limit.quantity}
              onChange={(event) => setField(`limits[${i}]`, forQuantity(limit, event.currentTarget.value))}
            >
              {[...new Set([...quantities.map((q) => q.quantity), limit.quantity])].map((name) => (
                <option key={name} value={name}>
                  {name}
                </option>
              ))}
            </select>
            <select
              aria-label="Decision rule"
              value={limit.rule}
              title="guarded: the 95 % interval must lie inside the limit; simple: the value alone decides"
              onChange={(event) => setField(`limits[${i}].rule`, event.currentTarget.value)}
            >
              <option value="guarded">guarded</option>
              <option value="simple">simple</option>
            </select>
            <button
              type="button"
              aria-label={`Remove limit ${i + 1}`}
              onClick={() =>
                setField(
                  'limits',
                  limits.filter((_, k) => k !== i),
                )
              }
            >
              Remove
            </button>
          </div>
          <p class="hint">{quantityMeaning(limit.quantity)}</p>
          <div class="measured-field pair">
            <NumberField field={`limits[${i}].min`} label="At least" unit={fieldUnits[limit.unit] ?? ''} />
            <NumberField field={`limits[${i}].max`} label="At most" unit={fieldUnits[limit.unit] ?? ''} />
          </div>
        </fieldset>
      ))}
      <button type="button" onClick={() => setField('limits', [...limits, first])}>
        Add a limit
      </button>
    </Part>
  );
}

/** Another quantity has another unit, so the numbers do not go with it. */
function forQuantity(limit: DraftLimit, quantity: string): DraftLimit {
  const unit = unitOfQuantity(quantity) ?? limit.unit;
  return unit === limit.unit ? { ...limit, quantity } : { quantity, unit, rule: limit.rule };
}

import { useState } from 'preact/hooks';
import type { KeyValue } from '../../analysis/sheet/result.ts';
import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';
import { Budget } from './Budget.tsx';
import { QuantityName } from './QuantityName.tsx';

/** Key values with their expanded uncertainty at 95 %; each opens its budget. */
export function KeyValues({ keyValues }: { readonly keyValues: readonly KeyValue[] }) {
  if (keyValues.length === 0) return <p class="hint">None could be given; the findings say why.</p>;
  return (
    <table class="key-values">
      <thead>
        <tr>
          <th scope="col">Quantity</th>
          <th scope="col">
            Value ± <i>U</i>
            <sub>95</sub>
          </th>
          <th scope="col">
            <i>k</i>
          </th>
          <th scope="col">Budget</th>
        </tr>
      </thead>
      <tbody>
        {keyValues.map((v) => (
          <KeyValueRows key={v.quantity} keyValue={v} />
        ))}
      </tbody>
    </table>
  );
}

function KeyValueRows({ keyValue }: { readonly keyValue: KeyValue }) {
  const [open, setOpen] = useState(false);
  const { quantity, value, U95, unit, k } = keyValue;
  return (
    <>
      <tr data-quantity={quantity}>
        <th scope="row">
          <QuantityName quantity={quantity} />
        </th>
        <td class="figures">{formatMeasured(value, U95, unit)}</td>
        <td class="figures">{k.toFixed(2)}</td>
        <td>
          <button
            type="button"
            class="quiet"
            aria-expanded={open}
            aria-label={`Budget of ${quantity}`}
            onClick={() => setOpen(!open)}
          >
            {open ? '▾' : '▸'}
          </button>
        </td>
      </tr>
      {open ? (
        <tr class="budget-row">
          <td colSpan={4}>
            <Budget keyValue={keyValue} />
          </td>
        </tr>
      ) : null}
    </>
  );
}

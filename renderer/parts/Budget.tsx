import type { KeyValue } from '../../analysis/sheet/result.ts';
import { unitSign } from '../../analysis/uncertainty/formatMeasured.ts';
import { quantityMeaning } from './quantityMeaning.ts';

/** The uncertainty contributions behind a value, the largest first, with each one's share of the variance. */
export function Budget({ keyValue }: { readonly keyValue: KeyValue }) {
  const { quantity, u, unit, dof, bandwidthHz, definition, budget } = keyValue;
  const total = budget.reduce((sum, c) => sum + c.u ** 2, 0);
  const ordered = [...budget].sort((a, b) => b.u - a.u);
  return (
    <div class="budget">
      <p>
        {quantityMeaning(quantity)}
        {definition === undefined ? '' : `: ${definition}`}
        {bandwidthHz === undefined ? '' : ` (bandwidth ${bandwidthHz.toFixed(0)} Hz)`}
      </p>
      <table>
        <thead>
          <tr>
            <th scope="col">Source</th>
            <th scope="col">
              <i>u</i> [{unitSign(unit) || '1'}]
            </th>
            <th scope="col">Share</th>
          </tr>
        </thead>
        <tbody>
          {ordered.map((c) => (
            <tr key={c.source}>
              <th scope="row">{c.source}</th>
              <td class="figures">{c.u.toPrecision(2)}</td>
              <td class="figures">{total > 0 ? `${((100 * c.u ** 2) / total).toFixed(0)} %` : '–'}</td>
            </tr>
          ))}
          <tr class="total">
            <th scope="row">Together</th>
            <td class="figures">{u.toPrecision(2)}</td>
            <td class="figures">{dof === null ? 'dof ∞' : `dof ${dof.toFixed(0)}`}</td>
          </tr>
        </tbody>
      </table>
    </div>
  );
}

import type { Verdict } from '../../analysis/sheet/result.ts';
import { unitSign } from '../../analysis/uncertainty/formatMeasured.ts';
import type { DraftLimit } from '../state/draft.ts';
import { Outcome } from './Outcome.tsx';
import { QuantityName } from './QuantityName.tsx';

export function Verdicts({
  verdicts,
  limits,
}: {
  readonly verdicts: readonly Verdict[];
  readonly limits: readonly DraftLimit[];
}) {
  if (verdicts.length === 0) return <p class="hint">The sheet states no limit.</p>;
  return (
    <table class="verdicts">
      <thead>
        <tr>
          <th scope="col">Quantity</th>
          <th scope="col">Limit</th>
          <th scope="col">Margin</th>
          <th scope="col">Verdict</th>
        </tr>
      </thead>
      <tbody>
        {verdicts.map((v, i) => (
          <tr key={i}>
            <th scope="row">
              <QuantityName quantity={v.quantity} />
            </th>
            <td class="figures">{limitText(limits[i])}</td>
            <td class="figures">{v.margin === null ? '–' : `${marginText(v.margin)} ${unitSign(v.unit)}`}</td>
            <td>
              <Outcome outcome={v.outcome} /> <span class="hint">{v.rule}</span>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function limitText(limit: DraftLimit | undefined): string {
  if (!limit) return '';
  const unit = unitSign(limit.unit);
  const bounds = [
    limit.min === undefined ? '' : `≥ ${limit.min} ${unit}`,
    limit.max === undefined ? '' : `≤ ${limit.max} ${unit}`,
  ];
  return bounds.filter(Boolean).join(', ');
}

function marginText(margin: number): string {
  return Number(margin.toPrecision(4)).toString().replace('-', '\u2212');
}

import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';
import { reduction } from '../state/reduction.ts';
import { Outcome } from './Outcome.tsx';

/** The result in one line: gravity check, fastest acceleration, verdicts. */
export function Summary() {
  const now = reduction.value;
  if (!now) return <div class="summary" />;
  const { keyValues, verdicts } = now.result;
  const ball = keyValues.find((v) => v.quantity === 'ball.g');
  return (
    <div class="summary" role="status">
      {ball ? <span class="figures">ball.g {formatMeasured(ball.value, ball.U95, ball.unit)}</span> : null}
      {verdicts.map((v) => (
        <span key={v.quantity} class="summary-verdict">
          {v.quantity} <Outcome outcome={v.outcome} />
        </span>
      ))}
    </div>
  );
}

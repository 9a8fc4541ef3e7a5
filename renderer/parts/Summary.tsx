import type { Verdict } from '../../analysis/sheet/result.ts';
import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';
import { reduction } from '../state/reduction.ts';
import { Outcome } from './Outcome.tsx';

const gravest = ['fail', 'undecided', 'pass'] as const;

/** The result in one line: gravity check, and the gravest verdict with the quantities that it is about. */
export function Summary() {
  const now = reduction.value;
  if (!now) return <div class="summary" />;
  const { keyValues, verdicts } = now.result;
  const ball = keyValues.find((v) => v.quantity === 'ball.g');
  const outcome = gravest.find((o) => verdicts.some((v) => v.outcome === o));
  return (
    <div class="summary" role="status">
      {ball ? <span class="figures">ball.g {formatMeasured(ball.value, ball.U95, ball.unit)}</span> : null}
      {outcome ? (
        <span>
          <Outcome outcome={outcome} /> {aboutText(outcome, verdicts)}
        </span>
      ) : null}
    </div>
  );
}

function aboutText(outcome: Verdict['outcome'], verdicts: readonly Verdict[]): string {
  const about = verdicts.filter((v) => v.outcome === outcome);
  if (about.length === 1) return about[0]?.quantity ?? '';
  return outcome === 'pass'
    ? `all ${verdicts.length} limits`
    : `${about.length} of ${verdicts.length} limits`;
}

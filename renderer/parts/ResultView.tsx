import { footageGone } from '../state/footage.ts';
import { reduction } from '../state/reduction.ts';
import { Findings } from './Findings.tsx';
import { KeyValues } from './KeyValues.tsx';
import { TheoryTable } from './TheoryTable.tsx';
import { Verdicts } from './Verdicts.tsx';

/** What the reduction answers: verdicts, key values with their budgets, findings. */
export function ResultView() {
  const now = reduction.value;
  if (!now) return <p class="hint">No reduction yet: fill in the sheet and press Reduce (Ctrl+Enter).</p>;
  const { result } = now;
  return (
    <div class="result">
      {footageGone.value ? (
        <p class="problem" role="alert">
          {footageGone.value}
        </p>
      ) : null}
      <h2>Verdicts</h2>
      <Verdicts verdicts={result.verdicts} limits={now.draft.limits} />
      <h2>Key values</h2>
      <KeyValues keyValues={result.keyValues} />
      <h2>Findings</h2>
      {result.findings.length === 0 ? <p class="hint">None.</p> : <Findings findings={result.findings} />}
      <h2>Theory</h2>
      <TheoryTable theory={result.theory} />
      <h2>Worked out from</h2>
      <dl class="facts">
        <dt>Sheet SHA-256</dt>
        <dd>{result.inputs.sheetSha256}</dd>
        <dt>Footage SHA-256</dt>
        <dd>{result.inputs.footageSha256}</dd>
        <dt>Decoder</dt>
        <dd>{result.inputs.footage.decoder}</dd>
        <dt>Program</dt>
        <dd>
          {result.program.name} {result.program.version} ({result.program.commit})
        </dd>
      </dl>
    </div>
  );
}

import { useEffect } from 'preact/hooks';
import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';
import type { ReductionSummary } from '../../main/log/log.ts';
import { instantText } from '../parts/instantText.ts';
import { Outcome } from '../parts/Outcome.tsx';
import { nameOfPath } from '../state/footage.ts';
import { chainSaid, checkChain, logProblem, openFromLog, readLog, saved } from '../state/log.ts';
import { program } from '../state/program.ts';
import { reduction } from '../state/reduction.ts';

/** Saved reductions, newest first. */
export function LogList() {
  useEffect(() => {
    void readLog();
  }, []);
  return (
    <div class="log">
      <div class="button-row">
        <button type="button" onClick={() => void checkChain()}>
          Verify the chain
        </button>
        {chainSaid.value ? (
          <span role="status" class={chainSaid.value.sound ? 'said' : 'problem'}>
            {chainSaid.value.text}
          </span>
        ) : null}
      </div>
      <p class="hint path">{program.value?.logPath}</p>
      {logProblem.value ? (
        <p class="problem" role="alert">
          {logProblem.value}
        </p>
      ) : null}
      {saved.value?.length === 0 ? <p class="hint">Nothing is saved yet.</p> : null}
      {saved.value && saved.value.length > 0 ? <Saved rows={saved.value} /> : null}
    </div>
  );
}

function Saved({ rows }: { readonly rows: readonly ReductionSummary[] }) {
  return (
    <table class="saved">
      <thead>
        <tr>
          <th scope="col">No.</th>
          <th scope="col">
            Footage, saved, ball.g ± <i>U</i> (<i>k</i> = 2)
          </th>
          <th scope="col">Verdict</th>
          <th scope="col">
            <span class="visually-hidden">Open</span>
          </th>
        </tr>
      </thead>
      <tbody>
        {rows.map((row) => (
          <tr key={row.id} class={reduction.value?.savedId === row.id ? 'shown' : ''}>
            <th scope="row">{row.id}</th>
            <td>
              <span class="path" title={row.footagePath}>
                {nameOfPath(row.footagePath)}
              </span>
              <div class="figures hint">
                {instantText(row.savedAt)}
                {row.ballG ? ` · ${formatMeasured(row.ballG.value, 2 * row.ballG.u, 'm/s2')}` : ''}
              </div>
            </td>
            <td>
              <Outcome outcome={row.outcome} />
              {row.stops > 0 ? <span class="finding-stop"> ■ {row.stops} stop</span> : null}
            </td>
            <td>
              <button
                type="button"
                aria-label={`Open reduction ${row.id}`}
                onClick={() => openFromLog(row.id)}
              >
                Open
              </button>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

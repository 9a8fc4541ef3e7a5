import type { Progress } from '../main/jobs/progress.ts';
import { durationText } from './parts/numberText.ts';
import { Summary } from './parts/Summary.tsx';
import { attemptReduce } from './state/attempt.ts';
import { askForFile } from './state/browsing.ts';
import { openNextInFolder } from './state/drop.ts';
import { footage, footageProblem, opening } from './state/footage.ts';
import { saveProblem, saveToLog, saving } from './state/log.ts';
import { windowProblem } from './state/program.ts';
import { cancelReduce, isUnsaved, job, reduceProblem, reduction } from './state/reduction.ts';
import { newSheet, sheetNote, sheetProblem } from './state/sheetFile.ts';

const phases: Readonly<Record<Progress['phase'], string>> = {
  index: 'Reading frames',
  track: 'Following bodies',
  motion: 'Working out motion',
};

/** What is done with a drop as a whole, and what came of it. */
export function HeadBar() {
  return (
    <header class="head">
      <div class="head-row">
        <span class="program-name">Tetherfall</span>
        <fieldset class="button-row" aria-label="Footage and sheet">
          <button type="button" title="Ctrl+O" onClick={() => void askForFile('openFootage')}>
            Open footage…
          </button>
          <button
            type="button"
            title="The footage after this one in its folder; the sheet is kept (Ctrl+Shift+O)"
            disabled={!footage.value}
            onClick={openNextInFolder}
          >
            Next drop
          </button>
          <span class="gap" />
          <button type="button" onClick={newSheet}>
            New sheet
          </button>
          <button type="button" onClick={() => void askForFile('openSheet')}>
            Open sheet…
          </button>
          <button type="button" title="Ctrl+S" onClick={() => void askForFile('saveSheet')}>
            Save sheet…
          </button>
        </fieldset>
        <Summary />
        <div class="button-row">
          <button
            type="button"
            class="primary"
            title="Ctrl+Enter"
            disabled={job.value !== null || opening.value !== null}
            onClick={() => void attemptReduce()}
          >
            Reduce
          </button>
          <button
            type="button"
            title="Ctrl+Shift+S"
            disabled={!isUnsaved.value || saving.value}
            onClick={() => void saveToLog()}
          >
            {reduction.value && reduction.value.savedId !== null
              ? `In the log: no. ${reduction.value.savedId}`
              : 'Save to log'}
          </button>
        </div>
      </div>
      <OpeningRow />
      <JobRow />
      <Line text={windowProblem.value} close={() => (windowProblem.value = null)} />
      <Line text={footageProblem.value} close={() => (footageProblem.value = null)} />
      <Line text={sheetProblem.value} close={() => (sheetProblem.value = null)} />
      <Line text={reduceProblem.value} close={() => (reduceProblem.value = null)} />
      <Line text={saveProblem.value} close={() => (saveProblem.value = null)} />
      {sheetNote.value ? (
        <p class="said" role="status">
          {sheetNote.value}
        </p>
      ) : null}
    </header>
  );
}

function OpeningRow() {
  const now = opening.value;
  if (!now) return null;
  const { progress } = now;
  return (
    <div class="work-row" role="status">
      <span>{progress ? `Reading ${now.name}` : `Opening ${now.name}`}</span>
      <ProgressBar label="Reading frames" progress={progress} />
      <button type="button" onClick={now.cancel}>
        Cancel
      </button>
    </div>
  );
}

function JobRow() {
  const now = job.value;
  if (!now) return null;
  return (
    <div class="work-row" role="status">
      <span>
        {now.cancelling ? 'Cancelling' : now.progress ? phases[now.progress.phase] : 'Waiting to start'}
      </span>
      <ProgressBar label="Reduction" progress={now.progress} />
      <button type="button" disabled={now.cancelling} onClick={() => void cancelReduce()}>
        Cancel
      </button>
    </div>
  );
}

function ProgressBar({ label, progress }: { label: string; progress: Progress | null }) {
  if (!progress) return <progress aria-label={label} />;
  const { framesDone, framesTotal, rateHz, timeLeftS } = progress;
  return (
    <>
      {framesTotal === null ? (
        <progress aria-label={label} />
      ) : (
        <progress aria-label={label} max={framesTotal} value={framesDone} />
      )}
      <span class="figures">
        {framesDone}
        {framesTotal === null ? '' : ` of ${framesTotal}`} frames
        {rateHz > 0 ? `, ${rateHz.toFixed(0)} /s` : ''}
        {timeLeftS === null ? '' : `, ${durationText(timeLeftS)} left`}
      </span>
    </>
  );
}

function Line({ text, close }: { text: string | null; close?: () => void }) {
  if (text === null) return null;
  return (
    <p class="problem" role="alert">
      <span>{text}</span>
      {close ? (
        <button type="button" aria-label="Close this message" onClick={close}>
          ×
        </button>
      ) : null}
    </p>
  );
}

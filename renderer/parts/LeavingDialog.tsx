import { useEffect, useRef } from 'preact/hooks';
import { leaving } from '../state/drop.ts';
import { sheetIsUnsaved } from '../state/keptSheet.ts';
import { saveProblem, saveToLog } from '../state/log.ts';
import { isUnsaved, job } from '../state/reduction.ts';

/** Asked before something that is not saved is left: what would be lost, and the ways on. */
export function LeavingDialog() {
  const dialog = useRef<HTMLDialogElement>(null);
  const open = leaving.value !== null;
  useEffect(() => {
    if (open && !dialog.current?.open) dialog.current?.showModal();
    if (!open) dialog.current?.close();
  }, [open]);
  const goOn = () => {
    const next = leaving.value?.goOn;
    leaving.value = null;
    next?.();
  };
  const running = job.value !== null;
  return (
    <dialog
      ref={dialog}
      class="question"
      aria-label="Not saved"
      onClose={() => {
        leaving.value = null;
      }}
    >
      <h2>Go on without saving?</h2>
      {running ? <p>A reduction is running; it is cancelled when you go on.</p> : null}
      {isUnsaved.value ? <p>This reduction is not in the log; its result is gone when you go on.</p> : null}
      {leaving.value?.losing === 'resultAndSheet' && sheetIsUnsaved.value ? (
        <p>What was changed in the sheet is in no file; it is gone when you go on.</p>
      ) : null}
      {saveProblem.value ? <p class="problem">{saveProblem.value}</p> : null}
      <div class="button-row dialog-end">
        <button
          type="button"
          onClick={() => {
            leaving.value = null;
          }}
        >
          Stay
        </button>
        <button type="button" onClick={goOn}>
          Go on without saving
        </button>
        {isUnsaved.value && !running ? (
          <button
            type="button"
            class="primary"
            onClick={async () => {
              if (await saveToLog()) goOn();
            }}
          >
            Save to log and go on
          </button>
        ) : null}
      </div>
    </dialog>
  );
}

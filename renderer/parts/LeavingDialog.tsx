import { useEffect, useRef } from 'preact/hooks';
import { leaving } from '../state/drop.ts';
import { saveProblem, saveToLog } from '../state/log.ts';

/** Asked before a result that is not in the log is left. */
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
  return (
    <dialog
      ref={dialog}
      class="question"
      aria-label="Not in the log"
      onClose={() => {
        leaving.value = null;
      }}
    >
      <h2>This reduction is not in the log</h2>
      <p>Without saving, its result is gone when you go on.</p>
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
        <button
          type="button"
          class="primary"
          onClick={async () => {
            if (await saveToLog()) goOn();
          }}
        >
          Save to log and go on
        </button>
      </div>
    </dialog>
  );
}

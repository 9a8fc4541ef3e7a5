import { middleOfView } from './stage/middleOfView.ts';
import { focusMark } from './stage/Picture.tsx';
import { bringIntoView, panBy } from './stage/viewOfPicture.ts';
import { attemptReduce } from './state/attempt.ts';
import { askForFile } from './state/browsing.ts';
import { openNextInFolder } from './state/drop.ts';
import { footage } from './state/footage.ts';
import { goToFrame, lastFrame, stepFrames } from './state/frames.ts';
import { saveUnsaved } from './state/log.ts';
import { marks, placeMark, selectedId, selectedMark, selectNextUnplaced } from './state/marks.ts';
import { togglePlaying } from './state/playing.ts';
import { zoom, zoomBy } from './state/zoom.ts';

/** Keys that work wherever the focus is, unless a dialog is open or a field takes them. */
export function listenToKeys(): void {
  window.addEventListener('keydown', (event) => {
    if (event.defaultPrevented || document.querySelector('dialog[open]')) return;
    const handled =
      event.ctrlKey || event.metaKey ? withControl(event) : takesText(event.target) ? false : plain(event);
    if (handled) event.preventDefault();
  });
}

/** Ctrl and an arrow move the view over the picture, by a quarter of it. */
const pans: Readonly<Record<string, readonly [number, number]>> = {
  ArrowLeft: [-0.25, 0],
  ArrowRight: [0.25, 0],
  ArrowUp: [0, -0.25],
  ArrowDown: [0, 0.25],
};

function withControl(event: KeyboardEvent): boolean {
  const pan = takesText(event.target) ? undefined : pans[event.key];
  if (pan) panBy(...pan);
  else if (event.key === 'Enter') attemptReduce();
  else if (event.key.toLowerCase() === 'o' && event.shiftKey) openNextInFolder();
  else if (event.key.toLowerCase() === 'o') void askForFile('openFootage');
  else if (event.key.toLowerCase() === 's' && event.shiftKey) void saveUnsaved();
  else if (event.key.toLowerCase() === 's') void askForFile('saveSheet');
  else return false;
  return true;
}

function plain(event: KeyboardEvent): boolean {
  if (event.altKey || !footage.value) return false;
  const onButton = event.target instanceof HTMLElement && event.target.closest('button, summary, a') !== null;
  switch (event.key) {
    case 'ArrowLeft':
      stepFrames(event.shiftKey ? -10 : -1);
      return true;
    case 'ArrowRight':
      stepFrames(event.shiftKey ? 10 : 1);
      return true;
    case ',':
      stepFrames(-1);
      return true;
    case '.':
      stepFrames(1);
      return true;
    case 'PageUp':
      stepFrames(-10);
      return true;
    case 'PageDown':
      stepFrames(10);
      return true;
    case 'Home':
      goToFrame(0);
      return true;
    case 'End':
      goToFrame(lastFrame.value);
      return true;
    case ' ':
      if (onButton) return false;
      togglePlaying();
      return true;
    case '+':
      zoomBy(1);
      return true;
    case '-':
      zoomBy(-1);
      return true;
    case '0':
      zoom.value = 'fit';
      return true;
    case 'n':
      selectNextUnplaced();
      focusSelected();
      return true;
    case 'Escape':
      selectedId.value = null;
      return true;
    case 'Enter':
      return !onButton && placeAtMiddle();
    default:
      return false;
  }
}

/** Gives the focus to the selected mark, or to the picture where it is still to be placed. */
export function focusSelected(): void {
  const mark = selectedMark.value;
  if (mark?.at) {
    bringIntoView(mark.at);
    focusMark(mark.id);
  } else document.getElementById('stage-view')?.focus();
}

function placeAtMiddle(): boolean {
  const mark = marks.value.find((m) => m.id === selectedId.value);
  const middle = middleOfView();
  if (!mark || mark.at || !middle) return false;
  placeMark(mark.id, middle);
  focusMark(mark.id);
  return true;
}

function takesText(target: EventTarget | null): boolean {
  return (
    target instanceof HTMLElement &&
    target.closest('input, select, textarea, [role="slider"], [role="separator"], [contenteditable]') !== null
  );
}

import { askForFile } from '../state/browsing.ts';

/** What is seen before there is footage. */
export function StartCard() {
  return (
    <div class="start-card">
      <h1>Open the footage of a drop</h1>
      <p>Drop a video file here, or</p>
      <div class="button-row">
        <button type="button" class="primary" onClick={() => void askForFile('openFootage')}>
          Open footage…
        </button>
        <button type="button" onClick={() => void askForFile('openSheet')}>
          Open sheet…
        </button>
      </div>
      <p class="hint">
        Then fill in the sheet from 1 to 7, and reduce. Marks are set on the picture: select one in the sheet,
        click its place, and move it by the arrow keys. Ctrl and an arrow key move the view.
      </p>
    </div>
  );
}

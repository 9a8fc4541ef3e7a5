import { useEffect } from 'preact/hooks';
import { fileOver } from './dropping.ts';
import { HeadBar } from './HeadBar.tsx';
import { Lanes } from './lanes/Lanes.tsx';
import { FileBrowser } from './parts/FileBrowser.tsx';
import { LeavingDialog } from './parts/LeavingDialog.tsx';
import { Side } from './Side.tsx';
import { Stage } from './stage/Stage.tsx';
import { followScreen } from './state/zoom.ts';

/** The picture with its lanes under it; the sheet, the result and the log beside it. */
export function Window() {
  useEffect(followScreen, []);
  return (
    <div class={fileOver.value ? 'window file-over' : 'window'}>
      <HeadBar />
      <main class="left">
        <Stage />
        <Lanes />
      </main>
      <Side />
      <FileBrowser />
      <LeavingDialog />
    </div>
  );
}

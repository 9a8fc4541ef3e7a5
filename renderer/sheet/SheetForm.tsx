import { sheetPath } from '../state/draft.ts';
import { BodiesPart } from './BodiesPart.tsx';
import { ClockPart } from './ClockPart.tsx';
import { FootagePart } from './FootagePart.tsx';
import { LimitsPart } from './LimitsPart.tsx';
import { MotionPart } from './MotionPart.tsx';
import { ScalePart } from './ScalePart.tsx';
import { SitePart } from './SitePart.tsx';
import { TetherPart } from './TetherPart.tsx';

/** The sheet, in the order of the work. */
export function SheetForm() {
  return (
    <form class="sheet" aria-label="Sheet" autocomplete="off" onSubmit={(event) => event.preventDefault()}>
      <p class="hint">
        <span class="path sheet-path">{sheetPath.value ?? 'Not saved in a file.'}</span> Numbers take a unit:
        450 mm, 200 µs, 10 ppm. u: standard uncertainty (k = 1).
      </p>
      <FootagePart />
      <ClockPart />
      <ScalePart />
      <SitePart />
      <BodiesPart />
      <TetherPart />
      <MotionPart />
      <LimitsPart />
    </form>
  );
}

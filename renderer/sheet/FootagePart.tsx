import { Findings } from '../parts/Findings.tsx';
import { draft, setField } from '../state/draft.ts';
import { footage } from '../state/footage.ts';
import { frameNumber } from '../state/frames.ts';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';

export function FootagePart() {
  const shown = footage.value;
  const { path } = draft.value.footage;
  const useFrame = (field: string) => () => setField(field, frameNumber.value);
  return (
    <Part name="footage" title="Footage" ownFields={['footage.firstFrame', 'footage.lastFrame']}>
      {path === undefined ? <p class="hint">No footage yet.</p> : <p class="path">{path}</p>}
      {shown ? (
        <p class="hint">
          {shown.widthPx} × {shown.heightPx} px, {shown.bitDepth} bit, {shown.frameCount} frames;{' '}
          {shown.codec}, {shown.pixelFormat}, luma {shown.lumaRule}; SHA-256 {shown.sha256.slice(0, 12)}…
        </p>
      ) : null}
      <div class="field-row">
        <NumberField field="footage.firstFrame" label="First frame" unit="" placeholder="0" />
        <button type="button" disabled={!shown} onClick={useFrame('footage.firstFrame')}>
          this frame
        </button>
        <NumberField
          field="footage.lastFrame"
          label="Last frame"
          unit=""
          placeholder={shown ? String(shown.frameCount - 1) : 'the last'}
        />
        <button type="button" disabled={!shown} onClick={useFrame('footage.lastFrame')}>
          this frame
        </button>
      </div>
      {shown ? <Findings findings={shown.findings} /> : null}
    </Part>
  );
}

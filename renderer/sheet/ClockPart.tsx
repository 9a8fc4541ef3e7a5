import { assumedExposureS, assumedRowTimeS, assumedUCaptureRateRel } from '../state/assumed.ts';
import { draft, setField } from '../state/draft.ts';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';
import { TextField } from './TextField.tsx';

const kinds = [
  { kind: 'captureRate', text: 'Capture rate of the camera' },
  { kind: 'container', text: "The file's own times" },
  { kind: 'timestamps', text: 'A list of times' },
] as const;

const own = [
  'clock.captureRateHz',
  'clock.uCaptureRateRel',
  'clock.path',
  'camera.exposureS',
  'camera.rowTimeS',
];

export function ClockPart() {
  const { clock } = draft.value;
  return (
    <Part name="clock" title="Clock" ownFields={own}>
      <label class="choice-field">
        Time from
        <select
          id="field-clock.kind"
          value={clock.kind}
          onChange={(event) => setField('clock.kind', event.currentTarget.value)}
        >
          {kinds.map(({ kind, text }) => (
            <option key={kind} value={kind}>
              {text}
            </option>
          ))}
        </select>
      </label>
      {clock.kind === 'captureRate' ? (
        <div class="measured-field">
          <NumberField field="clock.captureRateHz" label="Capture rate" unit="Hz" needed />
          <NumberField
            field="clock.uCaptureRateRel"
            label="Capture rate, relative"
            unit="1"
            assumed={String(assumedUCaptureRateRel)}
            isU
          />
        </div>
      ) : null}
      {clock.kind === 'timestamps' ? (
        <TextField field="clock.path" label="File, one time in s per frame" />
      ) : null}
      <div class="measured-field pair">
        <NumberField field="camera.exposureS" label="Exposure" unit="s" assumed={String(assumedExposureS)} />
        <NumberField field="camera.rowTimeS" label="Row time" unit="s" assumed={String(assumedRowTimeS)} />
      </div>
      {draft.value.camera.lens ? <p class="hint">With the lens model of the sheet file.</p> : null}
    </Part>
  );
}

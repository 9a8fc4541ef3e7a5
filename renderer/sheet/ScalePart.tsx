import { pxText } from '../parts/numberText.ts';
import {
  assumedPlaneOffsetM,
  assumedUDownDeg,
  assumedULengthM,
  assumedUMarkPx,
  assumedUPitchDeg,
  assumedUPlaneOffsetM,
  assumedUYawDeg,
} from '../state/assumed.ts';
import { draft, setField } from '../state/draft.ts';
import { MarkButton } from './MarkButton.tsx';
import { MeasuredField } from './MeasuredField.tsx';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';

const planeFields = [
  'planeOffsetM',
  'uPlaneOffsetM',
  'cameraDistanceM',
  'pitchDeg',
  'uPitchDeg',
  'yawDeg',
  'uYawDeg',
  'pitchFromFall',
].map((name) => `scale.${name}`);

export function ScalePart() {
  const { bars, plumb, fiducials, cameraDistanceM, pitchFromFall } = draft.value.scale;
  const { origin } = draft.value;
  const barFields = bars.flatMap((_, i) =>
    ['lengthM', 'uLengthM', 'uMarkPx'].map((name) => `scale.bars[${i}].${name}`),
  );
  return (
    <Part name="scale" title="Scale" ownFields={[...barFields, ...planeFields]}>
      {bars.map((bar, i) => (
        <fieldset key={i}>
          <legend>Scale bar{bars.length > 1 ? ` ${i + 1}` : ''}</legend>
          <div class="mark-row">
            <MarkButton id={`scale.bars[${i}].a`} />
            <MarkButton id={`scale.bars[${i}].b`} />
          </div>
          <MeasuredField
            field={`scale.bars[${i}].lengthM`}
            u={`scale.bars[${i}].uLengthM`}
            label="Length"
            unit="m"
            needed
            assumedU={String(assumedULengthM)}
          />
          <div class="measured-field">
            <span class="beside-u">Each mark</span>
            <NumberField
              field={`scale.bars[${i}].uMarkPx`}
              label="each mark"
              unit="px"
              assumed={String(assumedUMarkPx)}
              isU
            />
          </div>
          <label>
            <input
              type="checkbox"
              checked={bar.refine === true}
              onChange={(event) =>
                setField(`scale.bars[${i}].refine`, event.currentTarget.checked || undefined)
              }
            />{' '}
            Find the centres of its targets
          </label>
          {bars.length > 1 ? (
            <button
              type="button"
              onClick={() =>
                setField(
                  'scale.bars',
                  bars.filter((_, k) => k !== i),
                )
              }
            >
              Remove this bar
            </button>
          ) : null}
        </fieldset>
      ))}
      <button type="button" onClick={() => setField('scale.bars', [...bars, {}])}>
        Add a scale bar
      </button>
      <fieldset>
        <legend>Plumb line</legend>
        <div class="mark-row">
          <MarkButton id="scale.plumb.a" />
          <MarkButton id="scale.plumb.b" />
          {plumb.a || plumb.b ? (
            <button type="button" onClick={() => setField('scale.plumb', {})}>
              Remove
            </button>
          ) : null}
        </div>
        {plumb.a && plumb.b ? null : (
          <p class="field-caution">
            Without it, the picture's columns are assumed vertical to {assumedUDownDeg.toFixed(1)}°.
          </p>
        )}
      </fieldset>
      {fiducials ? <p class="hint">With {fiducials.length} fiducials of the sheet file.</p> : null}
      {origin ? (
        <p class="hint">
          With the origin of the sheet file: x {pxText(origin.x)}, y {pxText(origin.y)} px.
        </p>
      ) : null}
      <NumberField field="scale.cameraDistanceM" label="Camera to bar" unit="m" />
      {cameraDistanceM === undefined ? (
        <p class="field-caution">Not stated: 2.2 heights of the picture are assumed.</p>
      ) : null}
      <MeasuredField
        field="scale.planeOffsetM"
        u="scale.uPlaneOffsetM"
        label="Plane offset"
        title="How far the plane of the bodies is in front of the bar, towards the camera (+) or away from it (−)"
        unit="m"
        assumed={String(assumedPlaneOffsetM)}
        assumedU={String(assumedUPlaneOffsetM)}
      />
      <label>
        <input
          type="checkbox"
          checked={pitchFromFall === true}
          onChange={(event) => {
            const isFound = event.currentTarget.checked;
            setField('scale.pitchFromFall', isFound || undefined);
            // A pitch that is found has its own uncertainty; a stated one would contradict it.
            if (isFound) setField('scale.uPitchDeg', undefined);
          }}
        />{' '}
        Find the camera's pitch from the reference body's fall
      </label>
      {pitchFromFall ? null : (
        <MeasuredField
          field="scale.pitchDeg"
          u="scale.uPitchDeg"
          label="Camera pitch"
          title="How far the camera looks down on the plane of the fall (+); 1° at 2 m is 0.43 % of g"
          unit="°"
          assumed="0"
          assumedU={assumedUPitchDeg.toFixed(1)}
        />
      )}
      <MeasuredField
        field="scale.yawDeg"
        u="scale.uYawDeg"
        label="Camera yaw"
        title="How far the camera is turned so that the left side of the plane is nearer (+)"
        unit="°"
        assumed="0"
        assumedU={assumedUYawDeg.toFixed(1)}
      />
    </Part>
  );
}

import { pxText } from '../parts/numberText.ts';
import {
  assumedPlaneOffsetM,
  assumedUDownDeg,
  assumedULengthM,
  assumedUMarkPx,
  assumedUPlaneOffsetM,
} from '../state/assumed.ts';
import { draft, setField } from '../state/draft.ts';
import { MarkButton } from './MarkButton.tsx';
import { MeasuredField } from './MeasuredField.tsx';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';

const planeFields = ['scale.planeOffsetM', 'scale.uPlaneOffsetM', 'scale.cameraDistanceM'];

export function ScalePart() {
  const { bars, plumb, fiducials, cameraDistanceM } = draft.value.scale;
  const { origin } = draft.value;
  const barFields = bars.flatMap((_, i) =>
    ['lengthM', 'uLengthM', 'uMarkPx'].map((name) => `scale.bars[${i}].${name}`),
  );
  return (
    <Part name="scale" title="Scale" ownFields={[...barFields, ...planeFields]}>
      {bars.map((_, i) => (
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
        <p class="field-caution">
          Not stated: the bodies' distance from the bar's plane is not in the budget.
        </p>
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
    </Part>
  );
}

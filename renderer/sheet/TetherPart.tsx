import { MeasuredField } from './MeasuredField.tsx';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';

const own = ['lengthM', 'uLengthM', 'separationM', 'massKg', 'links', 'tipMassKg'].map(
  (name) => `tether.${name}`,
);

export function TetherPart() {
  return (
    <Part name="tether" title="Tether" ownFields={own}>
      <p class="hint">Leave this part empty for a plain drop without a tether.</p>
      <MeasuredField field="tether.lengthM" u="tether.uLengthM" label="Length" unit="m" />
      <div class="measured-field pair">
        <NumberField field="tether.separationM" label="Ends apart" unit="m" />
        <NumberField field="tether.links" label="Links" unit="" />
      </div>
      <div class="measured-field pair">
        <NumberField field="tether.massKg" label="Mass" unit="kg" />
        <NumberField field="tether.tipMassKg" label="Tip mass" unit="kg" />
      </div>
    </Part>
  );
}

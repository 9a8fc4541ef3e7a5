import { draft, setField } from '../state/draft.ts';
import { MeasuredField } from './MeasuredField.tsx';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';

const own = [
  'site.gMps2',
  'site.uGMps2',
  'site.latitudeDeg',
  'site.heightM',
  'ambient.temperatureC',
  'ambient.pressurePa',
  'ambient.relativeHumidity',
];

export function SitePart() {
  return (
    <Part name="site" title="Site and air" ownFields={own}>
      <label class="choice-field">
        Gravity from
        <select
          id="field-site"
          value={draft.value.siteBy}
          onChange={(event) => setField('siteBy', event.currentTarget.value)}
        >
          <option value="gravity">Known local gravity</option>
          <option value="place">Latitude and height</option>
        </select>
      </label>
      {draft.value.siteBy === 'gravity' ? (
        <MeasuredField field="site.gMps2" u="site.uGMps2" label="Local gravity" unit="m/s²" />
      ) : (
        <div class="measured-field pair">
          <NumberField field="site.latitudeDeg" label="Latitude" unit="°" />
          <NumberField field="site.heightM" label="Height" unit="m" />
        </div>
      )}
      <div class="measured-field three">
        <NumberField field="ambient.temperatureC" label="Temperature" unit="°C" />
        <NumberField field="ambient.pressurePa" label="Pressure" unit="Pa" />
        <NumberField field="ambient.relativeHumidity" label="Humidity, 0 to 1" unit="1" />
      </div>
    </Part>
  );
}

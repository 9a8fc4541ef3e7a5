import { type DraftBody, draft, setField } from '../state/draft.ts';
import { HandPlaces } from './HandPlaces.tsx';
import { MarkButton } from './MarkButton.tsx';
import { NumberField } from './NumberField.tsx';

const roles = { tip: 'tip', reference: 'reference body', other: 'other body' } as const;

export function BodyFields({
  body,
  index,
  assumedPatch,
}: {
  readonly body: DraftBody;
  readonly index: number;
  readonly assumedPatch: string;
}) {
  const at = `bodies[${index}]`;
  return (
    <fieldset>
      <legend>
        {body.id} <span class="hint">{roles[body.role]}</span>
      </legend>
      <div class="mark-row">
        <MarkButton id={at} />
        <button
          type="button"
          aria-label={`Remove ${body.id}`}
          onClick={() =>
            setField(
              'bodies',
              body.role === 'other'
                ? draft.value.bodies.filter((_, k) => k !== index)
                : draft.value.bodies.map((b, k) => (k === index ? { id: b.id, role: b.role, frame: 0 } : b)),
            )
          }
        >
          {body.role === 'other' ? 'Remove' : 'Clear'}
        </button>
      </div>
      <div class="measured-field three">
        <NumberField field={`${at}.patchPx`} label="Patch" unit="px" assumed={assumedPatch} />
        <NumberField field={`${at}.diameterM`} label="Diameter" unit="m" />
        <NumberField field={`${at}.massKg`} label="Mass" unit="kg" />
      </div>
      <HandPlaces body={body} index={index} />
    </fieldset>
  );
}

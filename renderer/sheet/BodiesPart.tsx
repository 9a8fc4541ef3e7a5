import { assumedPatchPx } from '../state/assumed.ts';
import { freshBodyId } from '../state/bodies.ts';
import { draft, setField } from '../state/draft.ts';
import { BodyFields } from './BodyFields.tsx';
import { Part } from './Part.tsx';

export function BodiesPart() {
  const { bodies } = draft.value;
  const own = bodies.flatMap((_, i) =>
    ['patchPx', 'diameterM', 'massKg'].map((name) => `bodies[${i}].${name}`),
  );
  return (
    <Part name="bodies" title="Bodies" ownFields={own}>
      {bodies.map((body, i) => (
        <BodyFields key={body.id} body={body} index={i} assumedPatch={String(assumedPatchPx)} />
      ))}
      <button
        type="button"
        onClick={() => setField('bodies', [...bodies, { id: freshBodyId(bodies), role: 'other', frame: 0 }])}
      >
        Add another body
      </button>
    </Part>
  );
}

import { focusSelected } from '../keys.ts';
import { type DraftBody, setField } from '../state/draft.ts';
import { footage } from '../state/footage.ts';
import { frameNumber, goToFrame } from '../state/frames.ts';
import { handMarkId, selectMark } from '../state/marks.ts';

/** Places of a body set by hand in single frames; they win over what was tracked. */
export function HandPlaces({ body, index }: { readonly body: DraftBody; readonly index: number }) {
  const places = body.marks ?? [];
  if (body.x === undefined || !footage.value) return null;
  return (
    <div class="hand-places">
      <button
        type="button"
        onClick={() => {
          selectMark(handMarkId(index));
          focusSelected();
        }}
      >
        Set by hand in frame {frameNumber.value}
      </button>
      {places.map((place) => (
        <span key={place.frame} class="hand-place">
          <button type="button" class="quiet" onClick={() => goToFrame(place.frame)}>
            frame {place.frame}
          </button>
          <button
            type="button"
            class="quiet"
            aria-label={`Remove the place set by hand in frame ${place.frame}`}
            onClick={() =>
              setField(
                `bodies[${index}].marks`,
                places.length === 1 ? undefined : places.filter((p) => p.frame !== place.frame),
              )
            }
          >
            ×
          </button>
        </span>
      ))}
    </div>
  );
}

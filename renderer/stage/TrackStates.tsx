import { footage } from '../state/footage.ts';
import { letterOfBody } from '../state/marks.ts';
import { bodiesInFrame } from '../state/reduction.ts';
import { StateShape } from './StateShape.tsx';

/** Which footage is shown, and the state and score of each body in this frame. */
export function TrackStates() {
  const shown = footage.value;
  if (!shown) return <div class="stage-name" />;
  return (
    <div class="stage-name">
      <strong title={shown.path}>{shown.name}</strong>
      {bodiesInFrame.value.map(({ id, role, state, score }) => (
        <span key={id} class={`track-state track track-${role}`}>
          <svg width="20" height="20" viewBox="-12 -12 24 24" aria-hidden="true">
            <StateShape state={state} />
          </svg>
          {letterOfBody(id)} {state}
          {score === undefined ? '' : ` ${score.toFixed(3)}`}
        </span>
      ))}
    </div>
  );
}

import type { MotionSettings } from '../../analysis/sheet/motionSettings.ts';
import { draft, setField } from '../state/draft.ts';
import { NumberField } from './NumberField.tsx';
import { Part } from './Part.tsx';

const methods: readonly { readonly method: MotionSettings['method']; readonly text: string }[] = [
  { method: 'adaptive', text: 'Bandwidth chosen at each instant from the data' },
  { method: 'localPolynomial', text: 'Local polynomial in a fixed window' },
  { method: 'quinticSpline', text: 'Quintic smoothing spline, cross-validated' },
  { method: 'butterworth', text: 'Butterworth, forward and backward' },
  { method: 'channelClass', text: 'Channel frequency class' },
  { method: 'centralDifference', text: 'Central differences' },
];
const classes = [60, 180, 600, 1000];
const own = ['motion.degree', 'motion.windowFrames', 'motion.cutoffHz', 'motion.strideFrames'];

/** How velocity and acceleration are worked out, where a procedure prescribes it. */
export function MotionPart() {
  const motion = draft.value.motion;
  const method = motion?.method ?? 'adaptive';
  return (
    <Part name="motion" title="Motion" ownFields={own}>
      <label class="choice-field">
        Velocity and acceleration by
        <select
          id="field-motion.method"
          value={method}
          onChange={(event) => setField('motion', withMethod(motion, event.currentTarget.value))}
        >
          {methods.map((m) => (
            <option key={m.method} value={m.method}>
              {m.text}
            </option>
          ))}
        </select>
      </label>
      {method === 'localPolynomial' ? (
        <div class="measured-field pair">
          <NumberField field="motion.degree" label="Degree" unit="" placeholder="from the data" />
          <NumberField
            field="motion.windowFrames"
            label="Window, frames"
            unit=""
            placeholder="from the data"
          />
        </div>
      ) : null}
      {method === 'butterworth' ? (
        <NumberField field="motion.cutoffHz" label="Cut-off" unit="Hz" placeholder="by residual analysis" />
      ) : null}
      {motion?.method === 'channelClass' ? (
        <label class="choice-field">
          Class
          <select
            id="field-motion.class"
            value={String(motion.class)}
            onChange={(event) => setField('motion.class', Number(event.currentTarget.value))}
          >
            {classes.map((c) => (
              <option key={c} value={String(c)}>
                {c}
              </option>
            ))}
          </select>
        </label>
      ) : null}
      {method === 'centralDifference' ? (
        <NumberField field="motion.strideFrames" label="Frames to either side" unit="" needed />
      ) : null}
      {motion?.intervals || motion?.heightsM ? (
        <p class="hint">With the intervals and heights of the sheet file.</p>
      ) : null}
    </Part>
  );
}

/** What is asked of the motion stays when the method changes; a method's own settings go. */
function withMethod(motion: typeof draft.value.motion, method: string) {
  const { intervals, heightsM, simultaneousBands } = motion ?? { method: 'adaptive' };
  const asked = {
    ...(intervals ? { intervals } : {}),
    ...(heightsM ? { heightsM } : {}),
    ...(simultaneousBands === undefined ? {} : { simultaneousBands }),
  };
  if (method === 'adaptive' && Object.keys(asked).length === 0) return undefined;
  return { method, ...asked, ...(method === 'channelClass' ? { class: classes[0] } : {}) };
}

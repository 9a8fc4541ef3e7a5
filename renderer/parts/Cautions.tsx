const cautions = [
  [
    'Falling bodies',
    'Nobody and nothing that matters is below the bodies or in their reach when they are let go.',
  ],
  [
    'Whipping tether',
    'The free end moves much faster than a falling body just before the tether is straight, and may throw parts that come loose.',
  ],
  [
    'Stored energy',
    'A stretched line gives its energy back at once: stay out of its line and let it down before you touch it.',
  ],
  [
    'Exclusion zone',
    'Mark it out for the full length of the tether and what may fly off, and keep it clear until all is at rest.',
  ],
  ['Eye protection', 'Everyone in sight of the drop wears it, and a helmet where local rules say so.'],
  [
    'Strobe light',
    'Flashing light can trigger seizures and makes moving parts look still: say so before it is switched on.',
  ],
] as const;

/** The usual cautions for a drop area. */
export function Cautions() {
  return (
    <div class="cautions">
      <h2>Before a drop</h2>
      <dl>
        {cautions.map(([what, text]) => (
          <div key={what}>
            <dt>{what}</dt>
            <dd>{text}</dd>
          </div>
        ))}
      </dl>
      <p>
        These are the usual cautions and no more. Local rules and licensed practice decide. This program works
        on footage; it makes no rig safe.
      </p>
    </div>
  );
}

import type { BodyState } from '../../analysis/sheet/result.ts';

/** A state by its shape: circle measured, dashed square bridged, diamond manual, cross lost. Drawn around (0, 0). */
export function StateShape({ state }: { readonly state: BodyState }) {
  const shape = shapes[state];
  return (
    <g>
      <g class="edge">{shape}</g>
      <g class="ink">{shape}</g>
    </g>
  );
}

const shapes = {
  measured: <path d="M-7 0a7 7 0 1 0 14 0a7 7 0 1 0 -14 0M-11 0h5M6 0h5M0 -11v5M0 6v5" />,
  bridged: <path d="M-7 -7h14v14h-14z" stroke-dasharray="3 2" />,
  manual: <path d="M0 -9l9 9l-9 9l-9 -9z" />,
  lost: <path d="M-7 -7l14 14M7 -7l-14 14" />,
};

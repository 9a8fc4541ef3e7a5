import type { Goal, Measured } from './goals.ts';

/** Tables of everything measured, in Markdown; lengths in 10⁻³ px. */
export function report(measured: Measured, goals: readonly Goal[], makerErrorPx: number): string {
  const { rows, sweeps, drifts } = measured;
  const milli = (px: number) => (1000 * px).toFixed(2);
  const parts = [
    '# Tracking\n',
    `The maker puts the centroid of a disc to ${milli(makerErrorPx)} · 10⁻³ px. Lengths in 10⁻³ px; errors from release to extension with their mean taken off; the offset is that mean, less the error of placing by hand.\n`,
  ];
  if (rows.length > 0) {
    parts.push(
      table(
        [
          'film',
          'body',
          'goal',
          'RMS x',
          'RMS y',
          'offset x',
          'offset y',
          '95 %',
          'max',
          'bound x',
          'bound y',
          '× x',
          '× y',
          'lost',
          'bridged',
          'coverage %',
          'ms whole',
          'ms refine',
        ],
        rows.map((r) => [
          r.name,
          r.body,
          r.goal ?? '',
          ...[r.rmsX, r.rmsY, r.offsetX, r.offsetY, r.distance95, r.distanceMax, r.boundX, r.boundY].map(
            milli,
          ),
          r.multipleX.toFixed(2),
          r.multipleY.toFixed(2),
          String(r.lost),
          String(r.bridged),
          (100 * r.coverage).toFixed(1),
          r.trackingMs.toFixed(2),
          r.refiningMs.toFixed(3),
        ]),
      ),
    );
  }
  if (sweeps.length > 0) {
    parts.push(
      '## Pixel locking\n',
      table(
        ['body', 'half-amplitude x', 'half-amplitude y', 'standard error of a phase'],
        sweeps.map((s) => [s.name, milli(s.halfAmplitudeX), milli(s.halfAmplitudeY), milli(s.uMean)]),
      ),
    );
  }
  if (drifts.length > 0) {
    parts.push(
      '## Drift per 1000 frames\n',
      table(
        ['body', 'x', 'y', 'standard error', 'frames not measured'],
        drifts.map((d) => [d.name, milli(d.xPer1000), milli(d.yPer1000), milli(d.u), String(d.lost)]),
      ),
    );
  }
  parts.push(
    '## Goals\n',
    table(
      ['goal', '', 'figure'],
      goals.map((g) => [g.text, g.reached ? 'reached' : 'MISSED', g.figure]),
    ),
  );
  return parts.join('\n');
}

function table(head: readonly string[], lines: readonly (readonly string[])[]): string {
  const line = (cells: readonly string[]) => `| ${cells.join(' | ')} |`;
  return `${[line(head), line(head.map(() => '---')), ...lines.map(line)].join('\n')}\n`;
}

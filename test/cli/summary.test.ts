import { describe, expect, it } from 'vitest';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import { summary } from '../../main/cli/summary.ts';
import { ballG, reductionExample } from '../log/reductionExample.ts';

const limits: Sheet['limits'] = [
  { quantity: 'ball.g', min: 9.7, max: 9.9, unit: 'm/s2', rule: 'guarded' },
  { quantity: 'tip.peakSpeed', max: 14, unit: 'm/s', rule: 'simple' },
];

describe('summary', () => {
  const { sheet, result } = reductionExample({
    keyValues: [
      ballG(9.8071, 0.0102),
      { ...ballG(3140, 490), quantity: 'tip.peakAcceleration', bandwidthHz: 168.2 },
    ],
    verdicts: [
      { quantity: 'ball.g', outcome: 'pass', rule: 'guarded', margin: 0.0929, unit: 'm/s2' },
      { quantity: 'tip.peakSpeed', outcome: 'undecided', rule: 'simple', margin: null, unit: 'm/s' },
    ],
    findings: [
      { level: 'note', code: 'a', text: 'A note.' },
      { level: 'stop', code: 'b', text: `A stop ${'with many words '.repeat(12)}to its end.` },
    ],
  });
  const lines = summary({ ...sheet, limits }, result);

  it('gives each value with its uncertainty, to two digits of it', () => {
    expect(lines[1]).toMatch(/^ {2}ball\.g +\(9\.807 ± 0\.010\) m\/s² +U95 0\.020$/);
    expect(lines[2]).toMatch(/^ {2}tip\.peakAcceleration +\(3140 ± 490\) m\/s² +U95 960 +bandwidth 168 Hz$/);
  });

  it('names each method of the motion once, and the bandwidth of each body', () => {
    const none: number[] = [];
    const motion = (bandwidthHz: (number | null)[]) => ({
      ...{ timeS: none, xM: none, yM: none, vxMps: none, vyMps: none, axMps2: none, ayMps2: none },
      ...{ uXM: none, uYM: none, uVxMps: none, uVyMps: none, uAxMps2: none, uAyMps2: none },
      ...{ measuredXM: none, measuredYM: none, method: 'central differences', settings: { bandwidthHz } },
    });
    const said = summary(sheet, {
      ...result,
      motion: { tip: motion([12.345, null, 168.2]), ball: motion([30, 30]) },
    });
    const at = said.indexOf('Motion');
    expect(said.slice(at + 1, at + 4).map((l) => l.trim().replace(/ +/g, ' '))).toEqual([
      'central differences',
      'tip bandwidth 12.3 to 168 Hz',
      'ball bandwidth 30 Hz',
    ]);
  });

  it('holds each verdict against its limit, with a margin as uncertain as the value', () => {
    expect(
      lines.some((l) =>
        /^ {2}PASS +ball\.g +min 9\.7, max 9\.9 m\/s² +margin \(0\.093 ± 0\.010\) m\/s² +\(guarded\)$/.test(
          l,
        ),
      ),
    ).toBe(true);
    expect(lines.some((l) => /^ {2}UNDECIDED +tip\.peakSpeed +max 14 m\/s +\(simple\)$/.test(l))).toBe(true);
  });

  it('puts the gravest finding first and keeps lines readable', () => {
    const findings = lines.slice(lines.indexOf('Findings') + 1);
    expect(findings[0]).toMatch(/^ {2}stop {5}A stop with/);
    expect(findings.at(-1)).toBe('  note     A note.');
    for (const line of findings) expect(line.length).toBeLessThanOrEqual(110);
  });
});

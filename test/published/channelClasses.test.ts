import { describe, expect, it } from 'vitest';
import { channelClassFilter } from '../../analysis/motion/prescribed/channelClass.ts';
import { forwardAndBackward, type LowPass } from '../../analysis/motion/prescribed/lowPass.ts';
import { publishedRows } from './publishedRows.ts';

// SAE J211-1 (MAR95), appendix C, and ISO 6487: formula read in public sources, coefficients worked out with another program and equal
// to those of its Butterworth design; -3 dB frequencies and gains computed there too (head of the file).
const rows = publishedRows('channel-frequency-class.csv').map((r) => ({
  standard: r.standard === 'ISO 6487' ? ('ISO 6487' as const) : ('SAE J211-1' as const),
  class: classOf(r.cfc),
  sampleRateHz: Number(r.sampleRateHz),
  coefficients: [r.a0, r.a1, r.b1, r.b2].map(Number),
  f3dBHz: Number(r.f3dBHz),
  gainAtClassDb: Number(r.gainAtCfc_dB),
  gainAt5over3Db: Number(r.gainAt5over3Cfc_dB),
}));

function classOf(text: string): 60 | 180 | 600 | 1000 {
  const found = ([60, 180, 600, 1000] as const).find((c) => String(c) === text);
  if (found === undefined) throw new Error(`no class ${text}`);
  return found;
}

/** Gain of both runs at a frequency, from their response to an impulse. */
function gainDb(filter: LowPass, frequencyHz: number, sampleRateHz: number): number {
  const half = 4000;
  const impulse = new Float64Array(2 * half + 1);
  impulse[half] = 1;
  const response = forwardAndBackward(impulse, filter, 10);
  const omega = (2 * Math.PI * frequencyHz) / sampleRateHz;
  const gain = response.reduce((sum, v, k) => sum + v * Math.cos(omega * (k - half - 10)), 0);
  return 20 * Math.log10(gain);
}

describe('channel frequency classes', () => {
  it('are checked on both standards and all classes', () => {
    expect(new Set(rows.map((r) => `${r.standard} ${r.class}`)).size).toBe(8);
  });

  it.each(rows)('$standard, class $class at $sampleRateHz Hz: coefficients', (row) => {
    const { a0, a1, a2, b1, b2 } = channelClassFilter(row, row.sampleRateHz);
    // Twelve significant digits in the table: half a unit of the last is 5e-12. The factor of ISO 6487 is 1.25 · 5/3.
    [a0, a1, b1, b2].forEach((value, k) => {
      expect(Math.abs(value - row.coefficients[k])).toBeLessThan(6e-12);
    });
    expect(a2).toBe(a0);
  });

  it.each(rows)(
    '$standard, class $class at $sampleRateHz Hz: gains and the -3 dB point of both runs',
    (row) => {
      const filter = channelClassFilter(row, row.sampleRateHz);
      // Four decimals of a decibel, three of a hertz in the table.
      expect(gainDb(filter, row.class, row.sampleRateHz)).toBeCloseTo(row.gainAtClassDb, 3);
      expect(gainDb(filter, (5 / 3) * row.class, row.sampleRateHz)).toBeCloseTo(row.gainAt5over3Db, 3);
      expect(gainDb(filter, row.f3dBHz, row.sampleRateHz)).toBeCloseTo(-3, 3);
    },
  );

  // As rounded in the collection of published values: -3 dB near 100, 300, 1000, 1650 Hz.
  it.each([
    [60, 10_000, [0.00145237, 1.88934322, -0.89515269], 100],
    [180, 10_000, [0.01179627, 1.67011746, -0.71730255], 300],
    [600, 20_000, [0.02980607, 1.45572821, -0.5749525], 1000],
    [1000, 20_000, [0.0718931, 1.11158618, -0.39915856], 1650],
  ] as const)('SAE J211-1, class %d at %d Hz as printed', (cfc, rateHz, [a0, b1, b2], nearHz) => {
    const filter = channelClassFilter({ class: cfc, standard: 'SAE J211-1' }, rateHz);
    expect(filter.a0).toBeCloseTo(a0, 8);
    expect(filter.b1).toBeCloseTo(b1, 8);
    expect(filter.b2).toBeCloseTo(b2, 8);
    // "Near": within 3 %, the nominal figures being round.
    expect(gainDb(filter, nearHz * 0.97, rateHz)).toBeGreaterThan(-3.01);
    expect(gainDb(filter, nearHz * 1.03, rateHz)).toBeLessThan(-2.99);
  });

  it('lie within the corridor of SAE J211-1, figure 1 (from memory): 0.5 dB up to the class, +0.5 to -4 dB at 5/3 of it', () => {
    for (const row of rows.filter((r) => r.standard === 'SAE J211-1' && r.sampleRateHz >= 10 * r.class)) {
      const filter = channelClassFilter(row, row.sampleRateHz);
      for (const share of [0.01, 0.1, 0.5, 0.9]) {
        expect(Math.abs(gainDb(filter, share * row.class, row.sampleRateHz))).toBeLessThan(0.5);
      }
      expect(gainDb(filter, row.class, row.sampleRateHz)).toBeGreaterThan(-1);
      expect(gainDb(filter, (5 / 3) * row.class, row.sampleRateHz)).toBeGreaterThan(-4);
    }
  });
});

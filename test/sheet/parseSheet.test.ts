import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import { exampleSheet } from './exampleSheet.ts';

function problemsOf(change: (sheet: ReturnType<typeof exampleSheet>) => void): string[] {
  const sheet = exampleSheet();
  change(sheet);
  const parsed = parseSheet(JSON.parse(JSON.stringify(sheet)));
  return parsed.ok ? [] : parsed.problems;
}

describe('parseSheet', () => {
  it("accepts the contract's example without a finding", () => {
    const parsed = parseSheet(exampleSheet());
    expect(parsed).toMatchObject({ ok: true, findings: [] });
  });

  it('says where a negative length is and what it was', () => {
    const [line] = problemsOf((s) => Object.assign(s.scale.bars?.[0] ?? {}, { lengthM: -0.7 }));
    expect(line).toBe('scale.bars[0].lengthM: must be greater than 0 (it is -0.7)');
  });

  it('refuses a capture rate of 0', () => {
    expect(problemsOf((s) => Object.assign(s.clock, { captureRateHz: 0 }))).toEqual([
      'clock.captureRateHz: must be greater than 0 (it is 0)',
    ]);
  });

  it('names the field that was meant when a required length comes in another unit', () => {
    const [line] = problemsOf((s) => {
      const bar = s.scale.bars?.[0] as Record<string, unknown>;
      delete bar.lengthM;
      bar.lengthMm = 700;
    });
    expect(line).toContain('scale.bars[0].lengthM: is missing; the sheet has lengthMm instead');
  });

  it('refuses an optional field in another unit rather than ignore it', () => {
    expect(problemsOf((s) => Object.assign(s.tether ?? {}, { uLengthMm: 1 }))).toEqual([
      'tether.uLengthMm: is not a field of the sheet; did you mean uLengthM? (SI units, as in its name)',
    ]);
  });

  it('keeps a sheet with a field it does not know, and says so', () => {
    const parsed = parseSheet({ ...exampleSheet(), remark: 'left arm of the rig' });
    expect(parsed).toMatchObject({ ok: true, findings: [{ code: 'fieldNotKnown' }] });
  });

  it('says what a clock can be', () => {
    expect(problemsOf((s) => Object.assign(s.clock, { kind: 'sundial' }))[0]).toContain(
      'must be "captureRate", "container", "timestamps" or "secondClock"',
    );
  });

  it('gives lines, never an exception, for whatever JSON it is handed', () => {
    fc.assert(
      fc.property(fc.jsonValue(), (json) => {
        const parsed = parseSheet(json);
        expect(parsed.ok).toBe(false);
        if (!parsed.ok) for (const line of parsed.problems) expect(line).toMatch(/^[^\n]+: [^\n]+$/);
      }),
    );
  });
});

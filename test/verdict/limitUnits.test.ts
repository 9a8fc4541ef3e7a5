import { describe, expect, it } from 'vitest';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { type SheetInput, sheetSchema } from '../../analysis/sheet/sheet.ts';
import { quantities } from '../../analysis/verdict/quantities.ts';
import { sameUnit } from '../../analysis/verdict/sameUnit.ts';
import { exampleSheet } from '../sheet/exampleSheet.ts';

/** What is said of a sheet with this one limit. */
function saidOf(limit: NonNullable<SheetInput['limits']>[number]) {
  return checkSheet(sheetSchema.parse({ ...exampleSheet(), limits: [limit] }));
}

describe('sameUnit', () => {
  it('takes either spelling of the unit of acceleration', () => {
    expect(sameUnit('m/s²', 'm/s2')).toBe(true);
    expect(sameUnit('m/s2', 'm/s²')).toBe(true);
  });

  it('tells different units apart', () => {
    expect(sameUnit('m/s', 'm/s2')).toBe(false);
    expect(sameUnit('g', 'm/s2')).toBe(false);
    expect(sameUnit('mm', 'm')).toBe(false);
  });
});

describe('limits of a sheet', () => {
  it('take a limit in m/s² like one in m/s2', () => {
    expect(saidOf({ quantity: 'tip.peakAcceleration', max: 900, unit: 'm/s²' })).toEqual([]);
    expect(saidOf({ quantity: 'tip.peakAcceleration', max: 900, unit: 'm/s2' })).toEqual([]);
  });

  it('name a quantity that does not exist, and those that do', () => {
    const findings = saidOf({ quantity: 'tip.peakForce', max: 6, unit: 'kN' });
    expect(findings).toHaveLength(1);
    expect(findings[0]).toMatchObject({ level: 'stop', code: 'limitUnknown' });
    expect(findings[0].text).toMatch(/^limits\[0\]: there is no quantity "tip\.peakForce"; it can be /);
    for (const { quantity } of quantities) expect(findings[0].text).toContain(quantity);
  });

  it('name a limit in another unit, with both units', () => {
    const findings = saidOf({ quantity: 'tip.peakAcceleration', max: 90, unit: 'g' });
    expect(findings).toHaveLength(1);
    expect(findings[0]).toMatchObject({ level: 'stop', code: 'limitUnit' });
    expect(findings[0].text).toBe(
      'limits[0]: tip.peakAcceleration is in m/s2, but its limit is stated in g; convert the limit.',
    );
  });
});

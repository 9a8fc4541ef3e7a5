import { describe, expect, it } from 'vitest';
import { readQuantity } from '../../renderer/parts/quantityText.ts';

describe('readQuantity', () => {
  it.each([
    ['0.45', 'm', 0.45],
    ['450 mm', 'm', 0.45],
    ['450mm', 'm', 0.45],
    ['200 µs', 's', 0.0002],
    ['200 \u03bcs', 's', 0.0002], // the Greek letter is another character than the micro sign
    ['1.2 kHz', 'Hz', 1200],
    ['10 ppm', '1', 0.00001],
    ['0.1 %', '1', 0.001],
    ['32.7 g', 'kg', 0.0327],
    ['1013.25 hPa', 'Pa', 101325],
    ['1e-5', '1', 0.00001],
    ['\u22120.5', 'm', -0.5],
    ['.5', 'px', 0.5],
  ] as const)('reads %s in a field in %s as %d', (text, unit, value) => {
    expect(readQuantity(text, unit)).toEqual({ value });
  });

  it.each([
    ['', 'm', 'is not a number'],
    ['fast', 'm', '"fast" is not a number'],
    ['Infinity', 'm', '"Infinity" is not a number'],
    ['0,45', 'm', '"0,45" has a comma'], // could be meant as a decimal mark
    ['1,000', 'Hz', '"1,000" has a comma'], // or between thousands
    ['12 ft', 'm', '"ft" is not a unit of this field; it takes m, mm'],
    ['5 mm', 's', '"mm" is not a unit of this field; it takes s, ms'],
    ['1 2', 'm', '"2" is not a unit'],
    ['0x10', 'm', '"x10" is not a unit'],
    ['10 px', '', '"px" is not a unit of this field'],
  ] as const)('refuses "%s" in a field in "%s": %s', (text, unit, line) => {
    const read = readQuantity(text, unit);
    expect('problem' in read && read.problem).toContain(line);
  });
});

import { describe, expect, it } from 'vitest';
import { resultSchema } from '../../analysis/sheet/result.ts';
import { theorySettingsSchema } from '../../analysis/sheet/theorySettings.ts';
import { type TheoryInput, theories } from '../../analysis/theory/theories.ts';
import { type FoldedSpec, foldedFall, recordOf } from './foldedRecord.ts';
import { gMps2, theoryInput } from './theoryInput.ts';

const bare: FoldedSpec = { lengthM: 0.9005, gMps2, energyShare: 1, endWeightShare: 0 };
const spec = { captureRateHz: 1000, releaseS: 0.0504, lastS: 0.45, noiseM: 25e-6, seed: 3 };

const trackOf = (
  tether: Partial<FoldedSpec> = {},
  rest: Partial<typeof spec> & { correlation?: number } = {},
) => recordOf((t) => foldedFall({ ...bare, ...tether }, t), { ...spec, ...rest });

function held(input: TheoryInput, model: string) {
  const { theory, findings } = theories(input);
  const found = theory.find((t) => t.model === model);
  if (!found) throw new Error(`no ${model}`);
  return { ...found, findings, text: findings.map((f) => f.text).join('\n') };
}
const settings = (asked: Parameters<typeof theorySettingsSchema.parse>[0]) =>
  theorySettingsSchema.parse(asked);

describe('theories', () => {
  const energyDrop = theoryInput(trackOf());
  const { theory, findings } = theories(energyDrop);

  it('give each model of the tip its entry, as the result has it', () => {
    expect(theory.map((t) => t.model)).toEqual([
      'freeFall',
      'foldedTetherEnergy',
      'foldedTetherMomentum',
      'foldedTetherShare',
      'foldedTetherEndWeight',
    ]);
    expect(resultSchema.shape.theory.safeParse(theory).error).toBeUndefined();
  });

  it('tell in a sentence which form describes the drop and which is excluded from when on', () => {
    const { text } = findings.find((f) => f.code === 'theoryCompared') ?? { text: '' };
    expect(text).toMatch(
      /^The energy form describes the fall of "tip" \(chi-squared \d+ on \d+ degrees of freedom\)/,
    );
    expect(text).toMatch(
      /the momentum form is excluded: its residuals are \d+ times the uncertainty from 0\.\d+ s on/,
    );
  });

  it('find length, release and height of rest within their uncertainties', () => {
    const { parameters, uParameters } = theory[1];
    // Four standard uncertainties: once in 16 000 draws
    expect(Math.abs(parameters.lengthM * parameters.lengthScale - bare.lengthM)).toBeLessThan(
      4 * (uParameters.lengthM + uParameters.lengthScale * bare.lengthM),
    );
    expect(Math.abs(parameters.releaseS - spec.releaseS)).toBeLessThan(4 * uParameters.releaseS);
    expect(Math.abs(parameters.startYM)).toBeLessThan(4 * uParameters.startYM);
  });

  it('say what settles each parameter', () => {
    expect(theory[1].settledBy).toMatchObject({
      gMps2: 'sheet',
      energyShare: 'held',
      releaseS: 'footage',
      startYM: 'footage',
    });
  });

  it('end their curves where they say no more, and start them at the height of the body', () => {
    for (const { curve, parameters } of theory) {
      expect(curve.yM[0]).toBe(parameters.startYM);
      for (const values of [curve.yM, curve.vyMps, curve.ayMps2])
        expect(values).toHaveLength(curve.timeS.length);
    }
    // Extension at 0.05 + 1.19814·√(0.9/9.8123) = 0.413 s
    expect(theory[1].curve.timeS.at(-1)).toBeCloseTo(0.412, 2);
  });

  it('rank a general model no worse than its special case, but charge it for its parameter', () => {
    const [, energy, , share, weight] = theory;
    for (const general of [share, weight]) {
      expect(general.chiSquared).toBeLessThanOrEqual(energy.chiSquared + 1e-6);
      expect((general.aicc ?? 0) - (energy.aicc ?? 0)).toBeGreaterThan(-10);
      expect(general.dof).toBe(energy.dof - 1);
    }
  });

  it('find the share of energy that a fold keeps, and exclude both forms', () => {
    const { parameters, uParameters, text } = held(
      theoryInput(trackOf({ energyShare: 0.7 })),
      'foldedTetherShare',
    );
    expect(Math.abs(parameters.energyShare - 0.7)).toBeLessThan(4 * uParameters.energyShare);
    expect(text).toMatch(/the energy form is excluded/);
    expect(text).toMatch(/the momentum form is excluded/);
  });

  it('find an end weight that was not stated, and take one that was', () => {
    const track = trackOf({ endWeightShare: 0.05 });
    const found = held(theoryInput(track), 'foldedTetherEndWeight');
    expect(Math.abs(found.parameters.endWeightShare - 0.05)).toBeLessThan(
      4 * found.uParameters.endWeightShare,
    );
    expect(found.text).toMatch(/; the energy form is excluded/);
    const tether = {
      lengthM: 0.9,
      uLengthM: 0.001,
      massKg: 0.2,
      uMassKg: 1e-5,
      tipMassKg: 0.01,
      uTipMassKg: 1e-6,
    };
    const stated = held(theoryInput(track, { tether }), 'foldedTetherEnergy');
    // Four standard deviations of chi-squared
    expect(Math.abs(stated.chiSquared - stated.dof)).toBeLessThan(4 * Math.sqrt(2 * stated.dof));
    expect(stated.text).not.toMatch(/the energy form is excluded/i);
  });

  it('ask for the mass at the free end where it is not stated', () => {
    const tether = { lengthM: 0.9, uLengthM: 0.001 };
    const { text } = held(theoryInput(trackOf(), { tether }), 'foldedTetherEnergy');
    expect(text).toMatch(/State tether\.tipMassKg, 0 if there is none/);
  });

  it('say when footage cannot settle a parameter', () => {
    // The first fifth of the fall: length stated, so the forms separate, but the share of energy hardly shows.
    const { settledBy, text } = held(
      theoryInput(trackOf({}, { lastS: 0.13, noiseM: 5e-4 })),
      'foldedTetherShare',
    );
    expect(settledBy?.energyShare).toBe('nothing');
    expect(text).toMatch(/cannot settle the share of the fold's energy that is kept \(energyShare/);
  });

  it('name the statement that the footage contradicts', () => {
    // A tether 30 mm longer than stated to 1 mm, nothing free to take it up
    const { text } = held(
      theoryInput(trackOf({ lengthM: 0.93 }), { settings: settings({ models: ['foldedTetherEnergy'] }) }),
      'foldedTetherEnergy',
    );
    expect(text).toMatch(
      /^No model describes the fall of "tip" within its uncertainty; the nearest is the energy form/,
    );
    expect(text).toMatch(
      /With the length of the tether \(lengthM\) 0\.9\d+ ± 0\.\d+ m instead of 0\.9 m as stated the energy form would describe/,
    );
  });

  it('hold only the models that the sheet asks for, and refuse bounds that exclude them all', () => {
    const asked = theories({
      ...energyDrop,
      settings: settings({ models: ['freeFall', 'foldedTetherEnergy'] }),
    });
    expect(asked.theory.map((t) => t.model)).toEqual(['freeFall', 'foldedTetherEnergy']);
    const none = theories({
      ...energyDrop,
      settings: settings({
        models: ['foldedTetherEnergy', 'foldedTetherMomentum'],
        bounds: [{ parameter: 'energyShare', min: 0.2, max: 0.8 }],
      }),
    });
    expect(none.theory).toEqual([]);
    expect(none.findings).toEqual([
      {
        level: 'caution',
        code: 'boundsExcludeAll',
        text: 'theory.bounds exclude every model for "tip": the energy form (energyShare), the momentum form (energyShare). Widen them.',
      },
    ]);
  });

  it('keep a fitted parameter within the bounds of the sheet', () => {
    const bounds = [{ parameter: 'energyShare', max: 0.9 }];
    const { parameters } = held({ ...energyDrop, settings: settings({ bounds }) }, 'foldedTetherShare');
    expect(parameters.energyShare).toBe(0.9);
  });

  it('give a profile on request: where the errors are normal its interval is ± 1.96 u', () => {
    const { profiles, parameters, uParameters } = held(
      { ...energyDrop, settings: settings({ profiles: ['energyShare'] }) },
      'foldedTetherShare',
    );
    const [{ from, to }] = profiles ?? [];
    // The problem is nearly straight over so small an interval: 2 %
    expect(((to ?? 0) - parameters.energyShare) / (1.95996 * uParameters.energyShare)).toBeCloseTo(1, 1.4);
    expect((parameters.energyShare - (from ?? 0)) / (1.95996 * uParameters.energyShare)).toBeCloseTo(1, 1.4);
  });

  it('let single gross errors hardly count where the sheet asks for it', () => {
    const wrong = { plain: 0, huber: 0, student: 0 };
    const u = { plain: 0, huber: 0, student: 0 };
    for (const seed of [1, 2, 3, 4, 5]) {
      const track = trackOf({}, { seed });
      // Every twentieth frame 2 mm too high, 80 uncertainties
      const spoilt = { ...track, yM: track.yM.map((y, i) => (i % 20 === 10 + seed ? y + 0.002 : y)) };
      for (const kind of ['plain', 'huber', 'student'] as const) {
        const asked = settings({
          models: ['foldedTetherEnergy'],
          ...(kind === 'plain' ? {} : { robust: kind }),
        });
        const entry = held(theoryInput(spoilt, { settings: asked }), 'foldedTetherEnergy');
        wrong[kind] += entry.parameters.startYM ** 2 / 5;
        u[kind] += entry.uParameters.startYM ** 2 / 5;
      }
    }
    expect(wrong.huber).toBeLessThan(wrong.plain / 10);
    expect(wrong.student).toBeLessThan(wrong.huber);
    // and honestly: five squares of about their mean, which chance triples once in a thousand
    expect(wrong.student).toBeLessThan(4 * u.student);
  });

  it('refuse no model for a noise that was understated, where the scatter shows it', () => {
    const track = trackOf();
    const understated = { ...track, uYM: track.uYM.map((u) => u / 3) };
    const asStated = held(theoryInput(understated), 'foldedTetherEnergy');
    expect(asStated.text).toMatch(/^No model describes/);
    const asSeen = held(theoryInput(understated, { noiseOverStated: 3 }), 'foldedTetherEnergy');
    expect(asSeen.text).toMatch(/^The energy form describes/);
  });

  it('widen what they find when neighbouring frames err alike', () => {
    const white = held(energyDrop, 'foldedTetherEnergy');
    const alike = held(
      theoryInput(trackOf({}, { correlation: 0.5 }), { correlation: 0.5 }),
      'foldedTetherEnergy',
    );
    // A long sum of errors with lag-one correlation ρ has (1 + ρ)/(1 - ρ) times the variance: √3, less where few frames decide
    const wider = alike.uParameters.releaseS / white.uParameters.releaseS;
    expect(wider).toBeGreaterThan(1.3);
    expect(wider).toBeLessThan(Math.sqrt(3));
    expect(alike.text).toMatch(/the energy form describes/i);
  });

  it('follow a ball with drag rather than without where the drag shows', () => {
    const body = {
      ...theoryInput(trackOf()).body,
      id: 'ball',
      role: 'reference' as const,
      diameterM: 0.04,
      massKg: 0.0027,
    };
    // Quadratic drag of a constant coefficient 0.45 in 1.2 kg/m³ with added mass, closed form y = ln cosh(√(a k) t)/k
    const movedKg = 0.0027 + (1.2 * Math.PI * 0.04 ** 3) / 12;
    const k = (1.2 * 0.45 * Math.PI * 0.04 ** 2) / 8 / movedKg;
    const pull = (gMps2 * (0.0027 - (1.2 * Math.PI * 0.04 ** 3) / 6)) / movedKg;
    const track = recordOf(
      (t) => t.map((s) => Math.log(Math.cosh(Math.sqrt(pull * k) * s)) / k),
      spec,
      'reference',
    );
    const input = theoryInput(track, {
      body: { ...body, dragCoefficient: 0.45, uDragCoefficient: 0.02 },
      uLengthRel: 1e-4,
    });
    const { text, parameters, uParameters } = held(input, 'freeFallDrag');
    expect(text).toMatch(/^Free fall with drag describes/);
    expect(text).toMatch(/free fall is excluded/);
    expect(Math.abs(parameters.dragShare - 1)).toBeLessThan(4 * uParameters.dragShare);
  });

  it('say nothing of a body with too few points', () => {
    const { theory: none, findings: why } = theories(theoryInput(trackOf(), { releaseS: 10 }));
    expect(none).toEqual([]);
    expect(why.some((f) => f.code === 'theoryNotFitted' && /too few/.test(f.text))).toBe(true);
  });
});

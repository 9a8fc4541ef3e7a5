import { leastSquares, type NoSolution, type Solution } from '../fit/leastSquares.ts';
import { withPriors } from '../fit/priorRows.ts';
import type { Linearised, Problem } from '../fit/problem.ts';
import { type Robust, robustFit } from '../fit/robust.ts';
import { type SettledBy, settledBy } from '../fit/settledBy.ts';
import { whiten } from '../fit/whiten.ts';
import type { Measure } from './measure.ts';
import type { Fall, Model, Parameter, Stated, Values } from './models/model.ts';

/** What the fit needs to know apart from model and measurement. */
export interface FitSetting {
  /** Release and height before it, as the track alone shows them: both are free near there [s], [m]. */
  readonly releaseS: number;
  readonly uReleaseS: number;
  readonly startYM: number;
  readonly uStartYM: number;
  readonly frameTimeS: number;
  /** Relative standard uncertainty of all lengths, and of all times: one factor each, common to all frames. */
  readonly uLengthRel: number;
  readonly uTimeRel: number;
  /** Correlation of the errors of neighbouring frames. */
  readonly correlation: number;
  readonly robust: Robust | null;
}

export interface FittedModel {
  readonly model: Model;
  /** The model's parameters, then release, height of rest and the two scales. */
  readonly parameters: readonly Parameter[];
  readonly values: Values;
  readonly u: Values;
  readonly settledBy: Readonly<Record<string, SettledBy>>;
  readonly solution: Solution;
  /** The problem that was solved: a profile holds one of its parameters. */
  readonly problem: Problem;
  /** Degrees of freedom: data and priors less free parameters. */
  readonly dof: number;
  readonly freeCount: number;
  readonly dataCount: number;
  /** (measured - model)/u at each time, correlation not taken out. */
  readonly standardised: Float64Array;
}

/**
 * Release and height of rest are free within five uncertainties of what the track alone shows, and a frame or this height more: so
 * far its own formula may be off. Without bounds a wrong model would shift its release until it looks less wrong.
 */
const startMarginM = 0.0003;
/** A statement is not stretched beyond so many of its uncertainties: footage that wants more contradicts the sheet. */
const stretchedBy = 5;

/**
 * Fits a model to a measurement: least squares with priors, release and height of rest free.
 *
 * @param starts  further values to start from, of models that are its special cases: it then ends no higher than they
 */
export function fitModel(
  model: Model,
  stated: Stated,
  measure: Measure,
  setting: FitSetting,
  starts: readonly Values[] = [],
): FittedModel | NoSolution {
  const own = model.parameters(stated);
  const parameters = [...own, ...commonParameters(setting)].map(notBeyondStatement);
  const problem = problemOf(model, stated, measure, setting, own, parameters);
  const dataCount = measure.timeS.length;
  const fitFrom = (start: Float64Array) =>
    setting.robust
      ? robustFit({ ...problem, start }, setting.robust, dataCount)
      : leastSquares({ ...problem, start });
  const solution = starts
    .map((values) => fitFrom(startAt(values, parameters, problem)))
    .reduce(lower, fitFrom(problem.start));
  if ('reason' in solution) return solution;
  const held = parameters.map((_, j) => problem.bounds[j][0] === problem.bounds[j][1]);
  const freeCount = held.filter((h) => !h).length;
  const priorCount = solution.at.residuals.length - dataCount;
  if (dataCount + priorCount <= freeCount) return { reason: `${dataCount} points are too few for it` };
  const u = solution.covariance.map((row, j) => Math.sqrt(row[j]));
  const values = named(parameters, solution.parameters);
  const heights = heightsOf(model, stated, measure.timeS, values).yM;
  return {
    model,
    parameters,
    values,
    u: named(parameters, u),
    settledBy: Object.fromEntries(
      parameters.map(({ name, prior }, j) => [
        name,
        settledBy(u[j], prior, problem.bounds[j], solution.atBound[j]),
      ]),
    ),
    solution,
    problem,
    dof: dataCount + priorCount - freeCount,
    freeCount,
    dataCount,
    standardised: measure.residuals(heights).map((r) => -r),
  };
}

function lower(a: Solution | NoSolution, b: Solution | NoSolution): Solution | NoSolution {
  if ('reason' in a) return b;
  return 'reason' in b || a.chiSquared <= b.chiSquared ? a : b;
}

/** Another model's values as far as they are parameters here, within the bounds. */
function startAt(values: Values, parameters: readonly Parameter[], { start, bounds }: Problem): Float64Array {
  return start.map((own, j) =>
    Math.min(bounds[j][1], Math.max(bounds[j][0], values[parameters[j].name] ?? own)),
  );
}

function notBeyondStatement(parameter: Parameter): Parameter {
  const { prior, bounds, start } = parameter;
  if (prior === null || prior.u === 0) return parameter;
  const least = Math.max(bounds[0], prior.value - stretchedBy * prior.u);
  const most = Math.min(bounds[1], prior.value + stretchedBy * prior.u);
  return { ...parameter, bounds: [least, most], start: Math.min(most, Math.max(least, start)) };
}

/** Heights, velocities and accelerations in the world at times of the footage's clock. */
export function heightsOf(model: Model, stated: Stated, timeS: Float64Array, values: Values): Fall {
  const { releaseS, startYM, lengthScale: c, timeScale: k } = values;
  const fall = model.fall(
    timeS.map((t) => k * (t - releaseS)),
    values,
    stated,
  );
  return {
    yM: fall.yM.map((y) => startYM + c * y),
    vyMps: fall.vyMps.map((v) => c * k * v),
    ayMps2: fall.ayMps2.map((a) => c * k * k * a),
    untilS: releaseS + fall.untilS / k,
  };
}

/** What every fit has beside its model. The scales are factors: a measured length is lengthScale times the true one. */
function commonParameters(setting: FitSetting): Parameter[] {
  const { releaseS, startYM, uLengthRel, uTimeRel } = setting;
  const withinS = stretchedBy * setting.uReleaseS + setting.frameTimeS;
  const withinM = stretchedBy * setting.uStartYM + startMarginM;
  const scale = (name: string, meaning: string, u: number): Parameter => ({
    name,
    unit: '',
    meaning,
    start: 1,
    bounds: [0.5, 2],
    prior: { value: 1, u },
  });
  return [
    {
      name: 'releaseS',
      unit: 's',
      meaning: 'the release',
      start: releaseS,
      bounds: [releaseS - withinS, releaseS + withinS],
      prior: null,
    },
    {
      name: 'startYM',
      unit: 'm',
      meaning: 'the height before release',
      start: startYM,
      bounds: [startYM - withinM, startYM + withinM],
      prior: null,
    },
    scale('lengthScale', 'the scale of lengths', uLengthRel),
    scale('timeScale', 'the scale of times', uTimeRel),
  ];
}

function problemOf(
  model: Model,
  stated: Stated,
  measure: Measure,
  { correlation }: FitSetting,
  own: readonly Parameter[],
  parameters: readonly Parameter[],
): Problem {
  const { timeS, frame } = measure;
  const white = (rows: Float64Array) => whiten(rows, frame, correlation);
  const data: Problem = {
    start: Float64Array.from(parameters, (p) => p.start),
    bounds: parameters.map((p) => p.bounds),
    residuals(p) {
      return white(measure.residuals(heightsOf(model, stated, timeS, named(parameters, p)).yM));
    },
    linearised(p): Linearised {
      const values = named(parameters, p);
      const { yM, vyMps } = heightsOf(model, stated, timeS, values);
      const { releaseS, startYM, lengthScale, timeScale } = values;
      const since = timeS.map((t) => timeScale * (t - releaseS));
      const perMetre = measure.perMetre(yM);
      const slopes = model.slopes(since, values, stated);
      const heightPer: readonly Float64Array[] = [
        ...own.map((_, j) => slopes[j].map((slope) => lengthScale * slope)),
        vyMps.map((v) => -v),
        new Float64Array(timeS.length).fill(1),
        yM.map((y) => (y - startYM) / lengthScale),
        vyMps.map((v, i) => (v * (timeS[i] - releaseS)) / timeScale),
      ];
      return {
        residuals: white(measure.residuals(yM)),
        jacobian: heightPer.map((column) => white(column.map((value, i) => value * perMetre[i]))),
      };
    },
  };
  return withPriors(
    data,
    parameters.map((p) => p.prior),
  );
}

function named(parameters: readonly Parameter[], numbers: ArrayLike<number>): Record<string, number> {
  return Object.fromEntries(parameters.map(({ name }, j) => [name, numbers[j]]));
}

import { profile } from '../fit/profile.ts';
import type { WorldTrack } from '../motion/worldTrack.ts';
import type { Finding, Theory } from '../sheet/result.ts';
import type { Sheet } from '../sheet/sheet.ts';
import { admitted } from './admitted.ts';
import { airOf } from './air.ts';
import { aicc, comparison, standings } from './compare.ts';
import { contradicted } from './contradicted.ts';
import { type FittedModel, fitModel, heightsOf } from './fitModel.ts';
import { foldedForces } from './foldedTether.ts';
import { inMetres, type Stretch } from './measure.ts';
import type { Fall, Model, Stated, Values } from './models/model.ts';
import { models } from './models/models.ts';
import type { LocalGravity } from './normalGravity.ts';
import { parameterFindings, tetherAssumed } from './theoryFindings.ts';

/** What the models are held against and what is stated. */
export interface TheoryInput {
  readonly track: WorldTrack;
  readonly body: Sheet['bodies'][number];
  readonly tether: Sheet['tether'];
  readonly ambient: Sheet['ambient'];
  readonly settings: Sheet['theory'];
  readonly gravity: LocalGravity;
  /** Release and height before it, as found from the track alone, with their uncertainties. */
  readonly releaseS: number;
  readonly uReleaseS: number;
  readonly startYM: number;
  readonly uStartYM: number;
  /** Time from frame to frame, median [s]. */
  readonly frameTimeS: number;
  /** Instants at which the curves are wanted; those of the body's motion. */
  readonly timeS: Float64Array;
  /** End of what the models describe: extension or landing [s]. */
  readonly untilS: number;
  /** Relative standard uncertainties of all lengths and of all times. */
  readonly uLengthRel: number;
  readonly uTimeRel: number;
  /** Correlation of the errors of neighbouring frames. */
  readonly correlation: number;
  /** Scatter of the positions about their smooth motion over their stated uncertainty, at least 1. */
  readonly noiseOverStated: number;
}

export interface Theories {
  readonly theory: Theory[];
  readonly findings: Finding[];
}

/** Every model that concerns a body, fitted to its track, and what telling them apart comes to. */
export function theories(input: TheoryInput): Theories {
  const stated = statedOf(input);
  const { chosen, findings } = admitted(models, stated, input.settings);
  const measure = inMetres(input.track, stretchOf(input, stated), input.noiseOverStated);
  const setting = { ...input, robust: input.settings?.robust ?? null };
  const fits: FittedModel[] = [];
  for (const model of chosen) {
    const starts = fits.filter((f) => f.model.specialCaseOf.includes(model.name)).map((f) => f.values);
    const fitted = fitModel(model, stated, measure, setting, starts);
    if ('reason' in fitted) findings.push(notFitted(model, input.body.id, fitted.reason));
    else fits.push(fitted);
  }
  if (fits.some((f) => f.values.lengthM !== undefined)) findings.push(...tetherAssumed(stated));
  const ranked = standings(fits, measure.timeS);
  findings.push(...comparison(ranked, input.body.id), ...parameterFindings(ranked));
  findings.push(...contradicted(ranked, stated, measure, setting));
  return { theory: fits.map((fitted) => entryOf(fitted, input, stated, measure.timeS)), findings };
}

function statedOf({ body, tether, ambient, gravity }: TheoryInput): Stated {
  return {
    body,
    tether: tether
      ? {
          lengthM: tether.lengthM,
          uLengthM: tether.uLengthM ?? null,
          separationM: tether.separationM ?? null,
          massKg: tether.massKg ?? null,
          uMassKg: tether.uMassKg ?? null,
          links: tether.links ?? null,
          tipMassKg: tether.tipMassKg ?? null,
          uTipMassKg: tether.uTipMassKg ?? null,
        }
      : null,
    gravity,
    air: airOf(ambient),
  };
}

/** Frames at rest that are fitted too: enough to settle the height before release, few enough to leave a swing out. */
const restFrames = 20;
/**
 * The last tenth of a tether's fall is ruled by its links and by the distance of its ends, not by a fold without length: the tip's
 * fall is fitted up to here [share of the length].
 */
const lastShare = 0.9;

/** The points that are fitted. They depend on the track alone, so that all models answer for the same ones. */
function stretchOf({ track, releaseS, startYM, untilS }: TheoryInput, { body, tether }: Stated): Stretch {
  const { timeS, yM } = track;
  const released = timeS.findIndex((t) => t > releaseS);
  if (released < 0) return { from: 0, to: 0 };
  const lowestM =
    body.role === 'tip' && tether ? startYM - lastShare * tether.lengthM : Number.NEGATIVE_INFINITY;
  let to = released;
  while (to < timeS.length && timeS[to] <= untilS && yM[to] > lowestM) to++;
  return { from: Math.max(0, released - restFrames), to };
}

const notFitted = (model: Model, bodyId: string, reason: string): Finding => ({
  level: 'note',
  code: 'theoryNotFitted',
  text: `${model.title} could not be fitted to the fall of "${bodyId}": ${reason}.`,
});

function entryOf(fitted: FittedModel, input: TheoryInput, stated: Stated, fittedS: Float64Array): Theory {
  const { model, parameters, values, u, solution, settledBy, problem } = fitted;
  const names = parameters.map((p) => p.name);
  const free = names.flatMap((name, j) => (Number.isFinite(u[name]) && u[name] > 0 ? [{ name, j }] : []));
  const wanted = input.timeS.filter((t) => t <= input.untilS);
  const until = heightsOf(model, stated, new Float64Array(0), values).untilS;
  const timeS = wanted.filter((t) => t < until);
  const curve = heightsOf(model, stated, timeS, values);
  const residuals = residualsOf(fitted, input.track, stated, fittedS);
  const profiled = (input.settings?.profiles ?? []).filter(
    (name) => names.includes(name) && settledBy[name] !== 'held',
  );
  return {
    model: model.name,
    body: input.body.id,
    parameters: { ...values },
    uParameters: Object.fromEntries(
      names.filter((name) => Number.isFinite(u[name])).map((name) => [name, u[name]]),
    ),
    chiSquared: solution.chiSquared,
    dof: fitted.dof,
    curve: {
      timeS: Array.from(timeS),
      yM: Array.from(curve.yM),
      vyMps: Array.from(curve.vyMps),
      ayMps2: Array.from(curve.ayMps2),
    },
    ...forcesOf(curve, values, stated),
    ...(Number.isFinite(aicc(fitted)) ? { aicc: aicc(fitted) } : {}),
    settledBy: { ...settledBy },
    correlation: {
      names: free.map((f) => f.name),
      r: free.map((a) => free.map((b) => solution.covariance[a.j][b.j] / (u[a.name] * u[b.name]))),
    },
    residuals,
    ...(profiled.length > 0
      ? {
          profiles: profiled.map((parameter) => {
            const { values: at, chiSquared, from, to } = profile(problem, solution, names.indexOf(parameter));
            return { parameter, values: [...at], chiSquared: [...chiSquared], from, to };
          }),
        }
      : {}),
  };
}

/** Pull on anchor and falling arm after a folded tether's model; nothing where the tether's mass is not stated. */
function forcesOf({ yM, vyMps }: Fall, values: Values, { tether, gravity }: Stated): Pick<Theory, 'forces'> {
  const { energyShare, lengthM, lengthScale, timeScale, startYM, gMps2 } = values;
  if (energyShare === undefined || tether?.massKg == null) return {};
  const weightN = tether.massKg * gravity.gMps2;
  const pulls = Array.from(yM, (y, i) => {
    const speed = Math.abs(vyMps[i]) / (lengthScale * timeScale * Math.sqrt(gMps2 * lengthM));
    return foldedForces(energyShare, (startYM - y) / (lengthScale * lengthM), speed);
  });
  return {
    forces: { anchorN: pulls.map((p) => weightN * p.anchor), foldN: pulls.map((p) => weightN * p.fold) },
  };
}

function residualsOf(
  { model, values, standardised }: FittedModel,
  track: WorldTrack,
  stated: Stated,
  timeS: Float64Array,
) {
  const { yM } = heightsOf(model, stated, timeS, values);
  const first = track.timeS.indexOf(timeS[0]);
  return {
    timeS: Array.from(timeS),
    yM: Array.from(yM, (y, i) => track.yM[first + i] - y),
    standardised: Array.from(standardised),
  };
}

import { foldedFamily } from '../foldedTether.ts';
import { atRest } from './atRest.ts';
import { gravityParameter } from './gravityParameter.ts';
import type { Fall, Model, Parameter, Stated, Tether, Values } from './model.ts';

/** A mass is weighed; where the sheet does not say how well, it is taken as good to this share of its value. */
export const assumedUMassRel = 0.01;

/** The energy form: the fold gives back all of the energy that arrives at it. */
export const foldedTetherEnergy = folded({
  name: 'foldedTetherEnergy',
  title: 'the energy form',
  specialCaseOf: ['foldedTetherShare', 'foldedTetherEndWeight'],
  energyShare: 1,
});

/** The momentum form: the fold loses all of it, the tip falls freely. */
export const foldedTetherMomentum = folded({
  name: 'foldedTetherMomentum',
  title: 'the momentum form',
  specialCaseOf: ['foldedTetherShare'],
  energyShare: 0,
});

/** The family between the two: the share of the fold's energy that is kept is fitted. */
export const foldedTetherShare = folded({
  name: 'foldedTetherShare',
  title: 'the folded tether that keeps a share of the energy',
  specialCaseOf: [],
  energyShare: 'found',
});

/** The energy form with an end weight that the footage is asked for. */
export const foldedTetherEndWeight = folded({
  name: 'foldedTetherEndWeight',
  title: 'the energy form with an end weight to be found',
  specialCaseOf: [],
  energyShare: 1,
  endWeight: 'found',
});

interface Member {
  readonly name: Model['name'];
  readonly title: string;
  readonly specialCaseOf: Model['specialCaseOf'];
  readonly energyShare: number | 'found';
  /** As stated, unless the footage is to find it. */
  readonly endWeight?: 'found';
}

function folded({ name, title, specialCaseOf, energyShare, endWeight }: Member): Model {
  const parameters = (stated: Stated): readonly Parameter[] => {
    const tether = tetherOf(stated);
    return [
      gravityParameter(stated.gravity),
      lengthParameter(tether),
      endWeightParameter(tether, endWeight === 'found'),
      energyShareParameter(energyShare),
    ];
  };
  return {
    name,
    title,
    expensive: false,
    specialCaseOf,
    concerns: isTipOfTether,
    refusal: tetherRefusal,
    parameters,
    fall: (sinceReleaseS, values) => fallOf(sinceReleaseS, values),
    slopes(sinceReleaseS, values, stated) {
      const byName = slopesOf(sinceReleaseS, values);
      return parameters(stated).map((p) => byName[p.name]);
    },
  };
}

/** Whether a model of a tether speaks of the body. */
function isTipOfTether({ body, tether }: Stated): boolean {
  return body.role === 'tip' && tether !== null;
}

/** Why no model of a tether can be held against a body; null when they can. */
function tetherRefusal(stated: Stated): string | null {
  const { separationM, lengthM, tipMassKg, massKg } = tetherOf(stated);
  if (separationM !== null && separationM >= lengthM)
    return `the ends are ${separationM} m apart, which is not less than the tether's ${lengthM} m: check tether.separationM and tether.lengthM`;
  if (tipMassKg !== null && tipMassKg > 0 && massKg === null)
    return 'an end weight only matters against the mass of the tether: state tether.massKg';
  return null;
}

function tetherOf({ tether }: Stated): Tether {
  if (!tether) throw new RangeError('a model of a tether was asked without one');
  return tether;
}

function lengthParameter({ lengthM, uLengthM }: Tether): Parameter {
  return {
    name: 'lengthM',
    unit: 'm',
    meaning: 'the length of the tether',
    start: lengthM,
    bounds: [lengthM / 4, lengthM * 4],
    prior: uLengthM === null ? null : { value: lengthM, u: uLengthM },
  };
}

function energyShareParameter(energyShare: number | 'found'): Parameter {
  const held = energyShare === 'found' ? null : energyShare;
  return {
    name: 'energyShare',
    unit: '',
    meaning: "the share of the fold's energy that is kept",
    start: held ?? 0.8,
    // Beyond 0 and 1 something other than the fold is at work; a fit may go there and so say it.
    bounds: [-0.5, 2],
    prior: held === null ? null : { value: held, u: 0 },
  };
}

/** Mass at the free end as a share of the tether's. Held at 0 where nothing is stated, unless it is to be found. */
function endWeightParameter(tether: Tether, find: boolean): Parameter {
  const { tipMassKg, massKg, uTipMassKg, uMassKg } = tether;
  const share = tipMassKg !== null && massKg !== null ? tipMassKg / massKg : 0;
  // A share of 0 is held: there is no weight whose mass could be wrong.
  const uRel = share === 0 ? 0 : Math.hypot(relative(uTipMassKg, tipMassKg), relative(uMassKg, massKg));
  return {
    name: 'endWeightShare',
    unit: '',
    meaning: "the end weight as a share of the tether's mass",
    start: find ? Math.max(share, 0.005) : share,
    bounds: [0, 20],
    prior: find ? null : { value: share, u: uRel * share },
  };
}

const relative = (u: number | null, value: number | null) =>
  u !== null && value ? u / value : assumedUMassRel;

/** The tether is as one without end weight that is longer by twice the weight's share, followed until it has fallen its length. */
function unitsOf({ gMps2, lengthM, endWeightShare }: Values) {
  const wholeM = lengthM * (1 + 2 * endWeightShare);
  return { wholeM, unitS: Math.sqrt(wholeM / gMps2), unitMps: Math.sqrt(wholeM * gMps2) };
}

function fallOf(sinceReleaseS: Float64Array, values: Values): Fall {
  const family = foldedFamily(values.energyShare);
  const { wholeM, unitS, unitMps } = unitsOf(values);
  const untilS = family.timeOf(values.lengthM / wholeM) * unitS;
  const fall = atRest(sinceReleaseS.length, untilS);
  sinceReleaseS.forEach((t, i) => {
    if (t <= 0) return;
    if (t >= untilS) {
      fall.yM[i] = -values.lengthM;
      return;
    }
    const { share, speed, acceleration } = family.at(t / unitS);
    fall.yM[i] = -share * wholeM;
    fall.vyMps[i] = -speed * unitMps;
    fall.ayMps2[i] = -acceleration * values.gMps2;
  });
  return fall;
}

/**
 * y = -W s(τ √(g/W)) with the whole length W = L(1 + 2μ): ∂y/∂g = v τ/2g, ∂y/∂W = y/W - v τ/2W, and by the chain rule for L and μ;
 * ∂s/∂γ comes with the family.
 */
function slopesOf(sinceReleaseS: Float64Array, values: Values): Readonly<Record<string, Float64Array>> {
  const family = foldedFamily(values.energyShare);
  const { wholeM, unitS, unitMps } = unitsOf(values);
  const untilS = family.timeOf(values.lengthM / wholeM) * unitS;
  const n = sinceReleaseS.length;
  const slopes = {
    gMps2: new Float64Array(n),
    lengthM: new Float64Array(n),
    endWeightShare: new Float64Array(n),
    energyShare: new Float64Array(n),
  };
  sinceReleaseS.forEach((t, i) => {
    if (t <= 0) return;
    if (t >= untilS) {
      slopes.lengthM[i] = -1;
      return;
    }
    const { share, speed, perGamma } = family.at(t / unitS);
    const v = -speed * unitMps;
    const perWhole = -share - (v * t) / (2 * wholeM);
    slopes.gMps2[i] = (v * t) / (2 * values.gMps2);
    slopes.lengthM[i] = perWhole * (1 + 2 * values.endWeightShare);
    slopes.endWeightShare[i] = perWhole * 2 * values.lengthM;
    slopes.energyShare[i] = -perGamma * wholeM;
  });
  return slopes;
}

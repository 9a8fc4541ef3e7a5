import type { Finding } from '../sheet/result.ts';
import type { Standing } from './compare.ts';
import type { FittedModel } from './fitModel.ts';
import { assumedUMassRel } from './models/foldedTether.ts';
import type { Stated } from './models/model.ts';

/** What the models of a tether took because the sheet is silent. */
export function tetherAssumed({ tether, body }: Stated): Finding[] {
  if (!tether || body.role !== 'tip') return [];
  if (tether.tipMassKg === null) {
    return [
      {
        level: 'caution',
        code: 'tipMassNotStated',
        text: "The mass at the free end (clamp, hook, the marker itself) is not stated: theory takes none. 2 % of the tether's mass already cuts the peak fivefold. State tether.tipMassKg, 0 if there is none.",
      },
    ];
  }
  if (tether.tipMassKg === 0 || (tether.uTipMassKg !== null && tether.uMassKg !== null)) return [];
  return [
    {
      level: 'note',
      code: 'assumed',
      text: `Not stated, so assumed for the theory: masses good to ${assumedUMassRel * 100} % (tether.uMassKg, tether.uTipMassKg). State them in the sheet.`,
    },
  ];
}

/** Parameters whose value means nothing, of the models that describe the drop. */
export function parameterFindings(ranked: readonly Standing[]): Finding[] {
  return ranked.filter((s) => s.describes).flatMap(({ fitted }) => unsettled(fitted));
}

function unsettled({ model, parameters, settledBy, solution }: FittedModel): Finding[] {
  const names = parameters.flatMap(({ name, meaning }, j) => {
    if (settledBy[name] !== 'nothing') return [];
    return [`${meaning} (${name}${solution.atBound[j] ? ', at the end of what is possible' : ''})`];
  });
  if (names.length === 0) return [];
  return [
    {
      level: 'note',
      code: 'parameterNotSettled',
      text: `The footage cannot settle ${names.join(' and ')} of ${model.title}: the value means nothing. A longer stretch of the fall, or a statement in the sheet, would.`,
    },
  ];
}

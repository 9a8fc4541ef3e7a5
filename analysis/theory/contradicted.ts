import type { Finding } from '../sheet/result.ts';
import { type Standing, standings } from './compare.ts';
import { type FitSetting, fitModel } from './fitModel.ts';
import type { Measure } from './measure.ts';
import type { Model, Stated } from './models/model.ts';

/**
 * Statements that would explain, each by itself, why no model describes the drop: the nearest model is fitted again with the
 * statement forgotten, and describes it then.
 */
export function contradicted(
  ranked: readonly Standing[],
  stated: Stated,
  measure: Measure,
  setting: FitSetting,
): Finding[] {
  const [best] = ranked;
  if (!best || ranked.some((s) => s.describes)) return [];
  const { model, parameters, solution } = best.fitted;
  const own = new Set(model.parameters(stated).map((p) => p.name));
  return parameters.flatMap(({ name, meaning, unit, prior }, j) => {
    if (!own.has(name) || prior === null || prior.u === 0 || !solution.atBound[j]) return [];
    const refit = fitModel(forgetting(model, name), stated, measure, setting);
    if ('reason' in refit || !standings([refit], measure.timeS)[0].describes) return [];
    const [found, u] = [refit.values[name], refit.u[name]];
    return [
      {
        level: 'caution' as const,
        code: 'statementContradicted',
        text: `With ${meaning} (${name}) ${figure(found, u)} ± ${u.toPrecision(1)}${spaced(unit)} instead of ${prior.value}${spaced(unit)} as stated ${model.title} would describe the fall of "${stated.body.id}": check the statement.`,
      },
    ];
  });
}

/** The model with nothing known of one parameter before. */
function forgetting(model: Model, name: string): Model {
  return {
    ...model,
    parameters: (stated) =>
      model.parameters(stated).map((p) => (p.name === name ? { ...p, prior: null } : p)),
  };
}

/** As many decimals as the first digit of the uncertainty has. */
const figure = (value: number, u: number) =>
  value.toFixed(Math.min(9, Math.max(0, -Math.floor(Math.log10(u)))));
const spaced = (unit: string) => (unit === '' ? '' : ` ${unit}`);

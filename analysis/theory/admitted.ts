import type { Finding } from '../sheet/result.ts';
import type { TheorySettings } from '../sheet/theorySettings.ts';
import type { Model, Parameter, Stated } from './models/model.ts';

/** Which models are to be held against a body, narrowed to the bounds that the sheet states, and why others are not. */
export function admitted(
  models: readonly Model[],
  stated: Stated,
  settings: TheorySettings | undefined,
): { readonly chosen: Model[]; readonly findings: Finding[] } {
  const findings: Finding[] = [];
  const { id } = stated.body;
  const concerned = models.filter(
    (model) =>
      model.concerns(stated) &&
      (settings?.models ? settings.models.some((name) => name === model.name) : !model.expensive),
  );
  const refusals = new Map<string, Model[]>();
  const able = concerned.filter((model) => {
    const reason = model.refusal(stated);
    if (reason === null) return true;
    refusals.set(reason, [...(refusals.get(reason) ?? []), model]);
    return false;
  });
  for (const [reason, refused] of refusals) {
    findings.push({
      level: 'caution',
      code: 'theoryRefused',
      text: `Not held against "${id}": ${refused.map((m) => m.title).join(', ')}; ${reason}.`,
    });
  }
  const bounds = settings?.bounds ?? [];
  if (bounds.length === 0) return { chosen: able, findings };

  const excluded: string[] = [];
  const chosen = able.flatMap((model) => {
    const parameters = model.parameters(stated).map((p) => narrowed(p, bounds));
    const empty = parameters.find(({ bounds: [least, most], prior }) =>
      prior?.u === 0 ? prior.value < least || prior.value > most : least > most,
    );
    if (!empty) return [{ ...model, parameters: () => parameters }];
    excluded.push(`${model.title} (${empty.name})`);
    return [];
  });
  if (excluded.length > 0) {
    const all = chosen.length === 0;
    findings.push({
      level: all ? 'caution' : 'note',
      code: all ? 'boundsExcludeAll' : 'boundsExclude',
      text: `theory.bounds ${all ? 'exclude every model' : 'exclude'} for "${id}": ${excluded.join(', ')}${all ? '. Widen them' : ''}.`,
    });
  }
  return { chosen, findings };
}

function narrowed(parameter: Parameter, bounds: TheorySettings['bounds']): Parameter {
  let [least, most] = parameter.bounds;
  for (const { parameter: name, min, max } of bounds) {
    if (name !== parameter.name) continue;
    least = Math.max(least, min ?? least);
    most = Math.min(most, max ?? most);
  }
  return { ...parameter, bounds: [least, most], start: Math.min(most, Math.max(least, parameter.start)) };
}

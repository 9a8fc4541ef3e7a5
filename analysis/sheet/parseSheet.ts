import type { z } from 'zod';
import { fieldMeantBy, stemOf } from './fieldNames.ts';
import { motionMethods } from './motionSettings.ts';
import type { Finding } from './result.ts';
import { type Sheet, sheetSchema } from './sheet.ts';
import { unknownFields } from './unknownFields.ts';

export type ParsedSheet =
  | { readonly ok: true; readonly sheet: Sheet; readonly findings: Finding[] }
  | { readonly ok: false; readonly problems: string[] };

function pathText(path: readonly PropertyKey[]): string {
  return path.reduce<string>((text, part) => {
    if (typeof part === 'number') return `${text}[${part}]`;
    return text === '' ? String(part) : `${text}.${String(part)}`;
  }, '');
}

function valueAt(json: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>(
    (value, part) =>
      typeof value === 'object' && value !== null ? (value as Record<PropertyKey, unknown>)[part] : undefined,
    json,
  );
}

/** One clear line for one schema issue: where, what, and what to do. */
function problemText(issue: z.core.$ZodIssue, json: unknown): string {
  const where = pathText(issue.path) || 'the sheet';
  const value = valueAt(json, issue.path);
  if (issue.code === 'invalid_union' && issue.path.at(-1) === 'kind') {
    return `${where}: must be "captureRate", "container", "timestamps" or "secondClock"${value === undefined ? ', but is missing' : `, not ${JSON.stringify(value)}`}`;
  }
  if (issue.code === 'invalid_union' && where === 'motion.method') {
    return `${where}: must be ${motionMethods.map((m) => `"${m}"`).join(', ')}${value === undefined ? '; it is missing' : `, not ${JSON.stringify(value)}`}`;
  }
  if (issue.code === 'invalid_union' && where === 'site') {
    return 'site: state gMps2 (greater than 0), or latitudeDeg (-90 to 90) with heightM';
  }
  if (value === undefined) {
    const name = String(issue.path.at(-1) ?? '');
    const siblings = Object.keys((valueAt(json, issue.path.slice(0, -1)) ?? {}) as object);
    const other = siblings.find((s) => s !== name && stemOf(s).toLowerCase() === stemOf(name).toLowerCase());
    return other
      ? `${where}: is missing; the sheet has ${other} instead, but this is stated in the unit of its name: give ${name}`
      : `${where}: is missing; state it`;
  }
  const shown = typeof value === 'object' ? '' : ` (it is ${JSON.stringify(value)})`;
  return `${where}: ${issue.message.replace(/^Invalid input: /, '')}${shown}`;
}

/**
 * Checks what was read from a sheet file against the contract.
 *
 * A field with another unit in its name (`lengthMm`) is a problem; another unknown field is a finding, so that nothing that
 * was stated is ignored in silence.
 *
 * @param json  what JSON.parse gave
 */
export function parseSheet(json: unknown): ParsedSheet {
  const parsed = sheetSchema.safeParse(json);
  if (!parsed.success)
    return { ok: false, problems: parsed.error.issues.map((issue) => problemText(issue, json)) };

  const problems: string[] = [];
  const findings: Finding[] = [];
  for (const path of unknownFields(json, parsed.data)) {
    const meant = fieldMeantBy(path.replace(/^.*\./, ''));
    if (meant)
      problems.push(
        `${path}: is not a field of the sheet; did you mean ${meant}? (SI units, as in its name)`,
      );
    else
      findings.push({
        level: 'caution',
        code: 'fieldNotKnown',
        text: `The sheet's field ${path} is not known and was not used.`,
      });
  }
  return problems.length > 0 ? { ok: false, problems } : { ok: true, sheet: parsed.data, findings };
}

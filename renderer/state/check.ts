import { computed, signal } from '@preact/signals';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import { parseSheet } from '../../analysis/sheet/parseSheet.ts';
import { type Draft, draft, unreadable } from './draft.ts';
import { isPlaced, sheetJson } from './draftSheet.ts';
import { carriedOver } from './drop.ts';
import type { FieldPath } from './fieldPath.ts';
import { reduction } from './reduction.ts';

export interface Problem {
  readonly field: FieldPath;
  readonly text: string;
  readonly level: 'stop' | 'caution';
  /** True where there is nothing yet; such problems are said once a reduction was asked for. */
  readonly missing: boolean;
}

/** True from the first time a reduction was asked for: then what is missing is said, too. */
export const missingIsShown = signal(false);

/** What is wrong or missing in the sheet as it stands. */
const problems = computed<readonly Problem[]>(() => {
  const texts = [...unreadable.value].map(
    ([field, { problem }]): Problem => ({ field, text: problem, level: 'stop', missing: false }),
  );
  const parsed = parseSheet(sheetJson(draft.value));
  if (!parsed.ok) {
    const found = parsed.problems.map((line) => problemOf(line, 'stop'));
    return [...texts, ...found.filter((p) => !unreadable.value.has(p.field))];
  }
  const found = checkSheet(parsed.sheet).flatMap(({ level, text }): Problem[] =>
    level === 'note' ? [] : [problemOf(text, level)],
  );
  return [...texts, ...found];
});

export const stops = computed(() => problems.value.filter((p) => p.level === 'stop'));

/** "clock.captureRateHz: is missing" is a problem of that field; other lines start with the field's name and go on. */
function problemOf(line: string, level: Problem['level']): Problem {
  const [, path, colon, rest] = /^([A-Za-z0-9.[\]]+)(:?)\s+(.*)$/.exec(line) ?? [];
  const missing = / is missing;/.test(line);
  if (path === undefined) return { field: '', text: line, level, missing };
  const field = bodyIndexOfDraft(path);
  return { field, text: colon ? (rest ?? line) : line, level, missing };
}

/** The checked sheet leaves out bodies that are not placed, so its indices are turned into those of the draft. */
function bodyIndexOfDraft(path: string): string {
  const found = /^bodies\[(\d+)\]/.exec(path);
  if (!found) return path;
  const indices = draft.value.bodies.flatMap((body, i) => (isPlaced(body) ? [i] : []));
  return path.replace(/^bodies\[\d+\]/, `bodies[${indices[Number(found[1])] ?? found[1]}]`);
}

export const parts = ['footage', 'clock', 'scale', 'site', 'bodies', 'tether', 'motion', 'limits'] as const;
export type PartName = (typeof parts)[number];
export type PartState = 'empty' | 'unsettled' | 'settled' | 'stale';

const fieldsOf: Readonly<Record<PartName, (draft: Draft) => unknown>> = {
  footage: (d) => d.footage,
  clock: (d) => [d.clock, d.camera],
  scale: (d) => [d.scale, d.origin],
  site: (d) => [d.siteBy, d.site, d.ambient],
  bodies: (d) => d.bodies,
  tether: (d) => d.tether,
  motion: (d) => d.motion,
  limits: (d) => d.limits,
};
const roots: Readonly<Record<PartName, readonly string[]>> = {
  footage: ['footage'],
  clock: ['clock', 'camera'],
  scale: ['scale', 'origin'],
  site: ['site', 'ambient'],
  bodies: ['bodies', 'body'],
  tether: ['tether'],
  motion: ['motion'],
  limits: ['limits'],
};
/** Parts whose marks belong to the picture: they are looked at again when the footage changes. */
const marked: readonly PartName[] = ['scale', 'bodies'];

function problemsOfPart(name: PartName): readonly Problem[] {
  return problems.value.filter(({ field }) => roots[name].includes(field.split(/[.[]/)[0] ?? ''));
}

/** What is to be said of a part now. */
export function shownProblemsOfPart(name: PartName): readonly Problem[] {
  return problemsOfPart(name).filter((p) => missingIsShown.value || !(p.missing || isEmpty(name)));
}

/** What is to be said of a field now. */
export function shownProblemsOfField(field: FieldPath): readonly Problem[] {
  return problems.value.filter((p) => p.field === field && (missingIsShown.value || !p.missing));
}

export function partState(name: PartName): PartState {
  const now = fieldsOf[name](draft.value);
  if (problemsOfPart(name).some((p) => p.level === 'stop')) return isEmpty(name) ? 'empty' : 'unsettled';
  if (isEmpty(name)) return 'empty';
  if (isCarriedOver(name)) return 'stale';
  const reduced = reduction.value?.draft;
  if (reduced && !same(fieldsOf[name](reduced), now)) return 'stale';
  return 'settled';
}

/** The part's marks were set on other footage and nobody has said that they still hold. */
export function isCarriedOver(name: PartName): boolean {
  const before = carriedOver.value;
  return (
    before !== null && marked.includes(name) && same(fieldsOf[name](before), fieldsOf[name](draft.value))
  );
}

/** The technician has looked: the part's marks hold for this footage, too. */
export function confirmPart(name: PartName): void {
  const before = carriedOver.value;
  if (!before) return;
  if (name === 'scale') carriedOver.value = { ...before, scale: { bars: [], plumb: {} } };
  if (name === 'bodies') carriedOver.value = { ...before, bodies: [] };
}

function isEmpty(name: PartName): boolean {
  const { footage, clock, camera, scale, site, ambient, bodies, tether, motion, limits } = draft.value;
  switch (name) {
    case 'footage':
      return footage.path === undefined;
    case 'clock':
      return clock.kind === 'captureRate' && clock.captureRateHz === undefined && nothing(camera);
    case 'scale':
      return scale.bars.every(nothing) && nothing(scale.plumb) && !scale.fiducials;
    case 'site':
      return nothing(site) && nothing(ambient);
    case 'bodies':
      return !bodies.some(isPlaced);
    case 'tether':
      return nothing(tether);
    case 'motion':
      return motion === undefined;
    case 'limits':
      return limits.length === 0;
  }
}

function nothing(value: object): boolean {
  return Object.values(value).every((v) => v === undefined);
}

function same(a: unknown, b: unknown): boolean {
  return a === b || JSON.stringify(a) === JSON.stringify(b);
}

import { readFile } from 'node:fs/promises';
import type { Command } from 'commander';
import { type Plan, type PlannedValue, plan as planFor } from '../../analysis/planner/plan.ts';
import { parsePlan } from '../../analysis/planner/planSchema.ts';
import { formatMeasured } from '../../analysis/uncertainty/formatMeasured.ts';
import { Refusal } from '../refusal.ts';
import { fromHere } from './fromHere.ts';
import { findingLines } from './summary.ts';
import { table } from './table.ts';

const example = `
A plan states what is wanted and what the rig is, in SI units; what is left out is assumed, and listed:
  { "schema": "tetherfall/plan/1",
    "wanted": [ { "quantity": "ball.g", "uRel": 0.003 },
                { "quantity": "tip.peakAcceleration", "uRel": 0.05, "bandwidthHz": 100 } ],
    "tether": { "lengthM": 1, "links": 60, "separationM": 0.05 },
    "picture": { "widthPx": 640, "heightPx": 1024, "fieldHeightM": 1.3 } }
Quantities: ball.g, tip.peakSpeed, tip.peakAcceleration, tip.extensionTime; "u" in the quantity's unit, or "uRel".
Further fields: tether.peakAccelerationMps2; ball.diameterM, massKg; fallM; camera.highestCaptureRateHz, uCaptureRateRel,
shortestExposureS, distanceM, uPlaneOffsetM, uPitchRad, uLensRel; bar.lengthM, uLengthM, uMarkPx; uPositionPx; gMps2.

Exit status: 0 planned (also where what is wanted is not reached: the table says so), 2 the plan is wrong or cannot be.`;

export function addPlan(root: Command): void {
  root
    .command('plan')
    .description('work out before a test which capture rate, exposure and scale reach a wanted uncertainty')
    .argument('<plan>', 'what is wanted and with which rig (JSON)')
    .option('--json', 'as JSON')
    .addHelpText('after', example)
    .action(plan);
}

async function plan(typed: string, options: { json?: true }): Promise<void> {
  const path = fromHere(typed);
  const parsed = parsePlan(await readJson(path));
  if (!parsed.ok) throw new Refusal('planWrong', 2, `Plan ${path}: ${parsed.problems.join('; ')}.`);
  const planned = planFor(parsed.order);
  if (!planned.ok) throw new Refusal('planImpossible', 2, `Plan ${path}: ${planned.problem}.`);
  const text = options.json ? JSON.stringify(planned.plan, null, 2) : planLines(planned.plan).join('\n');
  process.stdout.write(`${text}\n`);
}

async function readJson(path: string): Promise<unknown> {
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch (error) {
    throw new Refusal('planNotRead', 2, `Plan ${path}: it cannot be read; check the path.`, { cause: error });
  }
  try {
    return JSON.parse(text.replace(/^\uFEFF/, ''));
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    throw new Refusal('planNotJson', 2, `Plan ${path}: not JSON (${why}); write it as JSON.`, {
      cause: error,
    });
  }
}

function planLines(plan: Plan): string[] {
  return [
    'Film with',
    ...table(filmRows(plan)),
    '',
    'Expected (value ± standard uncertainty)',
    ...table(plan.values.map(valueRow)),
    '',
    'What makes it up (share of the value, the largest first)',
    ...table(plan.values.map(budgetRow)),
    ...(plan.findings.length > 0 ? ['', 'Findings', ...findingLines(plan.findings)] : []),
  ];
}

function filmRows(plan: Plan): string[][] {
  const needed = (value: number | null, unit: string) =>
    value === null ? 'more alone is not enough' : `${digits(value, 2)} ${unit} would do`;
  return [
    ['capture rate', `${digits(plan.captureRateHz, 5)} Hz`, ''],
    [
      'exposure',
      `${digits(plan.exposureS * 1e6, 2)} µs`,
      `blur ${digits(plan.blurPx, 2)} px at ${digits(plan.fastestMps, 3)} m/s`,
    ],
    ['scale', `${digits(plan.pxPerM, 3)} px/m`, needed(plan.pxPerMNeeded, 'px/m')],
    ['scale bar', `${digits(plan.barM, 3)} m`, needed(plan.barNeededM, 'm')],
    [
      'footage',
      `${plan.frames} frames, ${digits(plan.filmedS, 2)} s`,
      `${megabytes(plan.rawBytes)} uncoded, ${megabytes(plan.codedBytes)} well coded`,
    ],
    ...(plan.peak
      ? [
          [
            'peak',
            `${digits(plan.peak.peakMps2, 2)} m/s²`,
            `half width ${digits(plan.peak.halfWidthS * 1000, 2)} ms, ${digits(plan.framesInHalfWidth ?? 0, 2)} frames`,
          ],
        ]
      : []),
  ];
}

function valueRow(v: PlannedValue): string[] {
  return [
    v.quantity,
    formatMeasured(v.value, v.u, v.unit),
    `${percent(v.u / v.value)}, wanted ${percent(v.uWanted / v.value)}`,
    v.reached ? 'reached' : `NOT REACHED: ${v.limiting} limits`,
    v.bandwidthHz === undefined ? '' : `bandwidth ${digits(v.bandwidthHz, 3)} Hz`,
  ];
}

function budgetRow(v: PlannedValue): string[] {
  return [v.quantity, v.contributions.map((c) => `${c.source} ${percent(c.u / v.value)}`).join(', ')];
}

function percent(share: number): string {
  return `${digits(100 * share, 2)} %`;
}

function megabytes(bytes: number): string {
  return `${digits(bytes / 1e6, 2)} MB`;
}

/** So many significant digits, without a power of ten. */
function digits(value: number, count: number): string {
  return String(Number(value.toPrecision(count)));
}

import { mkdir, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { parseArgs } from 'node:util';
import { scenes } from '../../fixtures/scenes.ts';
import { loadWideSearch } from '../../main/jobs/wideSearch.ts';
import { type Drift, drift, drifts } from './tracking/drift.ts';
import { goalsOf } from './tracking/goals.ts';
import { madeBodies } from './tracking/madeBodies.ts';
import { madeSubject } from './tracking/madeSubject.ts';
import { makerCentroidErrorPx } from './tracking/makerCentroid.ts';
import { type PhaseSweep, phaseSweep, sweeps } from './tracking/phaseSweep.ts';
import { report } from './tracking/report.ts';
import { type Row, rowsOf } from './tracking/rowsOf.ts';
import { sceneSubject } from './tracking/sceneSubject.ts';

/**
 * How well and how fast bodies are followed, against the Cramér-Rao bound and the goals that are set:
 * `npm run bench:tracking -- [--scene NAME] [--quick] [--out DIR]`. A name is that of a scene or of a made body; with one,
 * the sweeps are left out. Writes tracking.json and tracking.md.
 */
const { values: options } = parseArgs({
  options: {
    scene: { type: 'string' },
    quick: { type: 'boolean', default: false },
    out: { type: 'string', default: join(tmpdir(), 'tetherfall-bench') },
  },
});
const quickScenes = ['clean', 'noisy', 'coded', 'blurred', 'faint'];
const only = options.scene;
const chosen = (name: string, quick: boolean) =>
  only === undefined ? !options.quick || quick : name === only;
const chosenScenes = scenes.filter((s) => chosen(s.name, quickScenes.includes(s.name)));
const chosenMade = madeBodies.filter((m) => chosen(m.name, m.quick));
if (chosenScenes.length + chosenMade.length === 0) {
  const names = [...scenes, ...madeBodies].map((s) => s.name).join('; ');
  console.error(`tracking: no scene "${only}"; there are: ${names}`);
  process.exit(2);
}

/** The centroid of a disc must be right to this before the maker may judge a tracker [px]. */
const makerLimitPx = 0.0005;
/** Instants of the motion over which the bound is taken. */
const instants = options.quick ? 6 : 12;

const makerErrorPx = makerCentroidErrorPx();
if (!(makerErrorPx < makerLimitPx)) {
  console.error(`tracking: the maker puts a disc ${makerErrorPx} px beside its place; nothing was measured`);
  process.exit(1);
}
const search = await loadWideSearch();
const rows: Row[] = [];
for (const scene of chosenScenes) {
  rows.push(...(await rowsOf(await sceneSubject(scene, instants), search)));
  console.error(`measured ${scene.name}`);
}
for (const made of chosenMade) {
  rows.push(...(await rowsOf(madeSubject(made, instants), search)));
  console.error(`measured ${made.name}`);
}
const swept: PhaseSweep[] = [];
const drifted: Drift[] = [];
if (only === undefined) {
  for (const s of sweeps) if (!options.quick || s.quick) swept.push(await phaseSweep(s, search));
  for (const d of drifts) if (!options.quick || d.quick) drifted.push(await drift(d, search));
}

const measured = { rows, sweeps: swept, drifts: drifted };
const goals = goalsOf(measured);
const text = report(measured, goals, makerErrorPx);
const folder = resolve(options.out);
await mkdir(folder, { recursive: true });
await writeFile(
  join(folder, 'tracking.json'),
  `${JSON.stringify({ makerErrorPx, ...measured, goals }, null, 2)}\n`,
);
await writeFile(join(folder, 'tracking.md'), text);
console.log(text);
console.log(`Written to ${folder}`);

import { parseArgs } from 'node:util';
import { benchCell, type Cell, type Errors } from './motion/cell.ts';
import { motionTruths } from './motion/truths.ts';

/**
 * How good velocity and acceleration are, against the honest oracle and the best fixed window, and whether intervals hold:
 * `npm run bench:motion -- [--quick] [--truth NAME] [--runs N] [--spline]`. One metre, 2 px/mm: 0.02, 0.05, 0.2 px are 10, 25, 100 µm.
 */
const { values: options } = parseArgs({
  options: {
    quick: { type: 'boolean', default: false },
    spline: { type: 'boolean', default: false },
    truth: { type: 'string' },
    runs: { type: 'string', default: '6' },
  },
});
const truths = motionTruths().filter((t) => options.truth === undefined || t.name.startsWith(options.truth));
if (truths.length === 0) {
  console.error(
    `motion: no truth "${options.truth}"; there are: ${motionTruths()
      .map((t) => t.name)
      .join('; ')}`,
  );
  process.exit(2);
}
const runs = Number(options.runs);
const rates = options.quick ? [500, 5000] : [240, 500, 1000, 2000, 5000];
const noises = options.quick ? [10e-6, 100e-6] : [10e-6, 25e-6, 100e-6];
const white = (uM: number): Errors => ({ uM, lagOne: 0, stated: 1 });

const digits = (value: number, n = 3) => value.toPrecision(n);
const percent = (share: number) => (Number.isNaN(share) ? '–' : (100 * share).toFixed(0));
const threes = (c: Cell['covered']['velocity']) => `${percent(c.all)}/${percent(c.peak)}/${percent(c.ends)}`;
const columns =
  'a core | ×oracle | ×fixed | whole | ×oracle | ×fixed | v core ×oracle ×fixed | cover x | v | a (all/peak/ends) | peak % | noise found | ms';
const line = (name: string, c: Cell) => {
  const { acceleration: a, velocity: v } = c;
  const spline = a.spline.core > 0 ? ` GCV ${digits(a.spline.core)}` : '';
  const peak = c.peak ? `${(100 * c.peak.bias).toFixed(1)} ± ${(100 * c.peak.scatter).toFixed(1)}` : '–';
  return `${name} | ${digits(a.own.core)} | ${(a.own.core / a.oracle.core).toFixed(2)} | ${(a.own.core / a.fixed.core).toFixed(2)} | ${digits(a.own.whole)} | ${(a.own.whole / a.oracle.whole).toFixed(2)} | ${(a.own.whole / a.fixed.whole).toFixed(2)} | ${digits(v.own.core)} ${(v.own.core / v.oracle.core).toFixed(2)} ${(v.own.core / v.fixed.core).toFixed(2)} | ${threes(c.covered.position)} | ${threes(c.covered.velocity)} | ${threes(c.covered.acceleration)} | ${peak} | ${digits(c.noiseFound * 1, 3)} | ${c.ms.toFixed(0)}${spline}`;
};

const all: { kind: 'ball' | 'tip'; cell: Cell }[] = [];
console.log(`truth, frames/s, µm | ${columns}`);
for (const truth of truths) {
  for (const rate of rates) {
    for (const uM of noises) {
      const cell = benchCell(truth, rate, white(uM), runs, options.spline);
      all.push({ kind: truth.kind, cell });
      console.log(line(`${truth.name}, ${rate}, ${Math.round(uM * 1e6)}`, cell));
    }
  }
}
summary('white, as stated', all);

const others: { name: string; errors: Errors }[] = [
  { name: 'correlated 0.5', errors: { uM: 25e-6, lagOne: 0.5, stated: 1 } },
  { name: 'stated half', errors: { uM: 25e-6, lagOne: 0, stated: 0.5 } },
  { name: 'correlated 0.5, stated half', errors: { uM: 25e-6, lagOne: 0.5, stated: 0.5 } },
];
for (const { name, errors } of others) {
  const cells = truths.flatMap((truth) =>
    (options.quick ? [1000] : [1000, 5000]).map((rate) => {
      const cell = benchCell(truth, rate, errors, runs, false);
      console.log(line(`${truth.name}, ${rate}, ${name}`, cell));
      return { kind: truth.kind, cell };
    }),
  );
  summary(name, cells);
}

function summary(title: string, cells: readonly { kind: 'ball' | 'tip'; cell: Cell }[]): void {
  const geometric = (values: readonly number[]) =>
    Math.exp(values.reduce((sum, v) => sum + Math.log(v), 0) / values.length);
  console.log(`\n${title}:`);
  for (const kind of ['ball', 'tip'] as const) {
    const chosen = cells.filter((c) => c.kind === kind).map((c) => c.cell);
    if (chosen.length === 0) continue;
    const goal = kind === 'ball' ? 2 : 1.3;
    for (const [what, ratios] of [
      ['acceleration core / oracle', chosen.map((c) => c.acceleration.own.core / c.acceleration.oracle.core)],
      [
        'acceleration whole / oracle',
        chosen.map((c) => c.acceleration.own.whole / c.acceleration.oracle.whole),
      ],
      [
        'acceleration core / best fixed',
        chosen.map((c) => c.acceleration.own.core / c.acceleration.fixed.core),
      ],
      [
        'acceleration whole / best fixed',
        chosen.map((c) => c.acceleration.own.whole / c.acceleration.fixed.whole),
      ],
      ['velocity core / oracle', chosen.map((c) => c.velocity.own.core / c.velocity.oracle.core)],
      ['velocity core / best fixed', chosen.map((c) => c.velocity.own.core / c.velocity.fixed.core)],
    ] as const) {
      const limit = what.endsWith('fixed') ? 1 : goal;
      const over = ratios.filter((r) => r > limit).length;
      console.log(
        `  ${kind} ${what}: mean ${geometric(ratios).toFixed(2)}, worst ${Math.max(...ratios).toFixed(2)}, over ${limit}: ${over} of ${ratios.length}`,
      );
    }
    for (const q of ['position', 'velocity', 'acceleration'] as const) {
      const mean = (of: (c: Cell) => number) => {
        const known = chosen.map(of).filter((v) => Number.isFinite(v));
        const least = known.length > 0 ? Math.min(...known) : Number.NaN;
        return `${percent(known.reduce((s, v) => s + v, 0) / known.length)} (least ${percent(least)})`;
      };
      console.log(
        `  ${kind} coverage of ${q}: all ${mean((c) => c.covered[q].all)}, near peak ${mean((c) => c.covered[q].peak)}, ends ${mean((c) => c.covered[q].ends)}`,
      );
    }
  }
  console.log('');
}

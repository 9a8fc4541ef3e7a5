import { writeFile } from 'node:fs/promises';
import { type Command, InvalidArgumentError } from 'commander';
import { lensFromTargets } from '../../analysis/scale/lensFromTargets.ts';
import type { GridPoint } from '../../analysis/scale/target/orderGrid.ts';
import { seenTarget, type TargetPattern } from '../../analysis/scale/target/seenTarget.ts';
import { openFootage } from '../footage/openFootage.ts';
import { Refusal } from '../refusal.ts';
import { fromHere } from './fromHere.ts';

const explanation = `
Film a flat target with the camera and lens of the rig, at their settings: regular dots (dark on light) or a chessboard.
Let it fill the picture; some pictures from different sides are better than one. Of footage the first frame is taken.
  tetherfall lens target-1.png target-2.png --dots 9x6
  tetherfall lens board.mp4 --squares 8x5          # counts are of the inner corners
What is printed is the sheet's camera.lens, with its uncertainty. Neither pitch nor distance of the target is needed.

Exit status: 0 done, 2 the command is wrong or the target is not seen, 3 a picture cannot be read.`;

interface Options {
  readonly dots?: Counts;
  readonly squares?: Counts;
  readonly centre?: true;
  readonly out?: string;
}

type Counts = Pick<TargetPattern, 'columns' | 'rows'>;

export function addLens(root: Command): void {
  root
    .command('lens')
    .description('work out the radial distortion of a lens from pictures of a flat dot or chessboard target')
    .argument('<pictures...>', 'pictures or footage of the target')
    .option('--dots <columns x rows>', 'the target has so many dots, as 9x6', counts)
    .option(
      '--squares <columns x rows>',
      'the target is a chessboard with so many inner corners, as 8x5',
      counts,
    )
    .option('--centre', "seek the lens's centre too (needs several pictures from different sides)")
    .option('--out <file>', 'write the lens there instead of printing it (a new file)')
    .addHelpText('after', explanation)
    .action(lens);
}

function counts(text: string): Counts {
  const found = /^(\d{1,3})[x×](\d{1,3})$/.exec(text);
  const [columns, rows] = [Number(found?.[1]), Number(found?.[2])];
  if (!(columns >= 3 && rows >= 3))
    throw new InvalidArgumentError('give columns and rows, 3 or more, as 9x6.');
  return { columns, rows };
}

async function lens(typed: string[], options: Options): Promise<void> {
  const pattern = patternOf(options);
  const views: GridPoint[][] = [];
  let size: { widthPx: number; heightPx: number } | null = null;
  for (const path of typed.map((p) => fromHere(p))) {
    const picture = await firstPicture(path);
    const { widthPx, heightPx } = picture;
    if (size && (size.widthPx !== widthPx || size.heightPx !== heightPx)) {
      throw new Refusal(
        'picturesDiffer',
        2,
        `${path}: is ${widthPx} × ${heightPx} px, the pictures before it ${size.widthPx} × ${size.heightPx}; a lens belongs to one size.`,
      );
    }
    size = { widthPx, heightPx };
    const seen = seenTarget(picture, pattern);
    if ('reason' in seen) {
      throw new Refusal(
        'targetNotSeen',
        2,
        `${path}: ${seen.reason}; check the counts, light and sharpness.`,
      );
    }
    views.push(seen);
  }
  if (!size) throw new Refusal('noPicture', 2, 'Give at least one picture of the target.');
  const found = lensFromTargets(views, size, options.centre ?? false);
  if ('reason' in found) {
    throw new Refusal('lensNotFound', 2, `No lens can be had from these pictures: ${found.reason}.`);
  }
  const json = `${JSON.stringify(found.lens, null, 2)}\n`;
  if (options.out === undefined) process.stdout.write(json);
  else await writeNew(fromHere(options.out), json);
  const points = views.reduce((s, v) => s + v.length, 0);
  process.stderr.write(
    `${points} points in ${views.length} pictures, ${found.residualPx.toPrecision(2)} px off along each axis; state the lens as camera.lens in the sheet.\n`,
  );
}

function patternOf({ dots, squares }: Options): TargetPattern {
  if (dots && !squares) return { kind: 'dots', ...dots };
  if (squares && !dots) return { kind: 'squares', ...squares };
  throw new Refusal('patternMissing', 2, 'State the target by one of --dots 9x6 and --squares 8x5.');
}

async function firstPicture(path: string) {
  const source = await openFootage(path);
  try {
    return await source.frame(0);
  } finally {
    await source.close();
  }
}

async function writeNew(path: string, text: string): Promise<void> {
  try {
    await writeFile(path, text, { flag: 'wx' });
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error);
    throw new Refusal(
      'lensNotWritten',
      2,
      `--out ${path}: it could not be written (${why}); give a new file.`,
      {
        cause: error,
      },
    );
  }
}

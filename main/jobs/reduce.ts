import { resolve } from 'node:path';
import { type FrameTimes, frameTimes } from '../../analysis/clock/frameTimes.ts';
import { reduce } from '../../analysis/reduce.ts';
import { asksToRefine, refineSheet } from '../../analysis/scale/mark/refineSheet.ts';
import { checkSheet } from '../../analysis/sheet/checkSheet.ts';
import type { Finding, Result } from '../../analysis/sheet/result.ts';
import type { Sheet } from '../../analysis/sheet/sheet.ts';
import type { WideSearch } from '../../analysis/track/track.ts';
import type { FootageIndex, FrameSource } from '../footage/frameSource.ts';
import { program } from '../program.ts';
import { Refusal } from '../refusal.ts';
import { followBodies } from './followBodies.ts';
import { refuseMarksOutside } from './placing.ts';
import type { Progress } from './progress.ts';
import { readForceRecord } from './readForceRecord.ts';
import { readTimes } from './readTimes.ts';

export interface ReduceOrder {
  readonly sheet: Sheet;
  readonly sheetSha256: string;
  /** What the sheet's relative paths are relative to. */
  readonly folder: string;
  /** What was found when the sheet was read. */
  readonly findings?: readonly Finding[];
}

export interface ReduceTools {
  readonly openFootage: (path: string) => Promise<FrameSource>;
  /** Called when the footage is open: loading the search takes longer than most refusals. */
  readonly loadSearch: () => Promise<WideSearch>;
  readonly signal?: AbortSignal;
  readonly onProgress?: (progress: Progress) => void;
}

/**
 * The whole way from a sheet to its result: footage → frames → tracks → clock, scale, motion, theory, verdict.
 *
 * @throws Refusal: 2 sheet, 3 footage, 4 a body was lost so that no key value can be given
 */
export async function reduceSheet(order: ReduceOrder, tools: ReduceTools): Promise<Result> {
  const { folder } = order;
  const stop = checkSheet(order.sheet).find((f) => f.level === 'stop');
  if (stop) throw new Refusal(stop.code, 2, stop.text);
  const listedS =
    order.sheet.clock.kind === 'timestamps' ? await readTimes(resolve(folder, order.sheet.clock.path)) : null;
  const { loadCell } = order.sheet;
  const forceRecord = loadCell ? await readForceRecord(resolve(folder, loadCell.path)) : null;

  const source = await tools.openFootage(resolve(folder, order.sheet.footage.path));
  try {
    const { sheet, findings: ofMarks } = await refined(order.sheet, source, tools.signal);
    const report = tools.onProgress ?? (() => {});
    const followed = await followBodies(source, sheet, await tools.loadSearch(), tools.signal, report);
    const { index, firstFrame, lastFrame, tracks } = followed;
    report({
      phase: 'motion',
      framesDone: index.frameCount,
      framesTotal: index.frameCount,
      rateHz: 0,
      timeLeftS: null,
    });

    const times = clockOrRefuse(
      frameTimes(sheet.clock, index, listedS, firstFrame, lastFrame, sheet.camera?.exposureS),
    );
    const result = reduce({
      sheet,
      program,
      inputs: {
        sheetSha256: order.sheetSha256,
        footageSha256: index.sha256,
        footage: footageFacts(index, source),
      },
      timeS: times.timeS,
      tracks,
      forceRecord,
      findings: [
        ...(order.findings ?? []),
        ...index.findings,
        ...ofMarks,
        ...followed.findings,
        ...times.findings,
      ],
    });
    refuseIfUnfit(result);
    refuseIfLost(result);
    return result;
  } finally {
    await source.close();
  }
}

/** The sheet with the marks refined that ask for it, in the first frame that is reduced. */
async function refined(
  sheet: Sheet,
  source: FrameSource,
  signal: AbortSignal | undefined,
): Promise<ReturnType<typeof refineSheet>> {
  if (!asksToRefine(sheet)) return { sheet, findings: [] };
  const picture = await source.frame(sheet.footage.firstFrame, signal);
  refuseMarksOutside(sheet, picture);
  return refineSheet(sheet, picture);
}

function clockOrRefuse(times: FrameTimes): Extract<FrameTimes, { ok: true }> {
  if (!times.ok) throw new Refusal('timesUnusable', 2, `${times.problem}.`);
  return times;
}

function footageFacts(index: FootageIndex, source: FrameSource): Result['inputs']['footage'] {
  return {
    widthPx: index.widthPx,
    heightPx: index.heightPx,
    bitDepth: index.bitDepth,
    frameCount: index.frameCount,
    codec: index.codec,
    pixelFormat: index.pixelFormat,
    lumaRule: index.lumaRule,
    decoder: `${source.backend.name} ${source.backend.version}`,
  };
}

/** A method that the sheet prescribes and this footage cannot carry is the sheet's to change. */
function refuseIfUnfit(result: Result): void {
  const unfit = result.findings.find((f) => f.code === 'methodUnfit');
  if (unfit) throw new Refusal(unfit.code, 2, unfit.text);
}

/** A result without one key value is none: say which body was lost, and where. */
function refuseIfLost(result: Result): void {
  if (result.keyValues.length > 0) return;
  const lost = result.findings
    .filter((f) => f.code === 'bodyLost' || f.code === 'bodyDidNotMove')
    .map((f) => f.text);
  const why = lost.length > 0 ? lost : result.findings.filter((f) => f.level !== 'note').map((f) => f.text);
  throw new Refusal('noKeyValue', 4, `No key value can be given. ${why.join(' ')}`);
}

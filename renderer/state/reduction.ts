import { computed, signal } from '@preact/signals';
import type { BodyInFrame, Result, ResultFrame } from '../../analysis/sheet/result.ts';
import type { SheetInput } from '../../analysis/sheet/sheet.ts';
import type { JobEvent } from '../../main/api/jobEvents.ts';
import type { Progress } from '../../main/jobs/progress.ts';
import { answered, api, lineOf, reached } from './api.ts';
import { type Draft, draft, sheetFolder } from './draft.ts';
import { sheetJson } from './draftSheet.ts';
import { eventLines } from './eventLines.ts';
import { frameNumber } from './frames.ts';

/** A result with the draft that it was worked out from. */
export interface Reduction {
  readonly result: Result;
  readonly draft: Draft;
  /** The job that can be saved to the log; null for a reduction that came from the log. */
  readonly jobId: string | null;
  /** Its number in the log; null while it is not saved. */
  readonly savedId: number | null;
}

export interface RunningJob {
  readonly id: string | null;
  readonly progress: Progress | null;
  readonly cancelling: boolean;
}

export const reduction = signal<Reduction | null>(null);
export const job = signal<RunningJob | null>(null);
export const reduceProblem = signal<string | null>(null);

export const isUnsaved = computed(() => reduction.value !== null && reduction.value.savedId === null);

const framesByNumber = computed(
  () => new Map((reduction.value?.result.frames ?? []).map((f): [number, ResultFrame] => [f.n, f])),
);
/** What the result says of the frame that is shown. */
export const resultFrame = computed(() => framesByNumber.value.get(frameNumber.value) ?? null);

export interface BodySeen extends BodyInFrame {
  readonly id: string;
  readonly role: string;
}

export const bodiesInFrame = computed<readonly BodySeen[]>(() =>
  Object.entries(resultFrame.value?.bodies ?? {}).map(([id, body]) => ({ id, role: roleOf(id), ...body })),
);

/** The role that a body had in the sheet that was reduced. */
export function roleOf(bodyId: string): string {
  return reduction.value?.draft.bodies.find((b) => b.id === bodyId)?.role ?? 'other';
}

/** Reduces the sheet as it stands; nothing changes until there is a result. */
export async function reduceDraft(): Promise<void> {
  if (job.value) return;
  const reduced = draft.value;
  job.value = { id: null, progress: null, cancelling: false };
  reduceProblem.value = null;
  try {
    const sheet = sheetJson(reduced) as unknown as SheetInput; // the program checks it again
    const { jobId } = await answered(api.jobs.$post({ json: { sheet, folder: sheetFolder.value } }));
    job.value = { ...job.value, id: jobId };
    if (job.value.cancelling) await askToCancel(jobId);
    const result = await resultOf(jobId);
    // A result that comes although it was cancelled may belong to a drop that the window no longer shows.
    if (result && !job.value.cancelling) reduction.value = { result, draft: reduced, jobId, savedId: null };
  } catch (error) {
    reduceProblem.value = lineOf(error);
  } finally {
    job.value = null;
  }
}

/** Another drop takes the window, with its own reduction or none: one that still runs belongs to the drop before and is cancelled. */
export function leaveReduction(next: Reduction | null = null): void {
  void cancelReduce();
  reduction.value = next;
  reduceProblem.value = null;
}

export async function cancelReduce(): Promise<void> {
  const running = job.value;
  if (!running || running.cancelling) return;
  job.value = { ...running, cancelling: true };
  try {
    if (running.id !== null) await askToCancel(running.id);
  } catch (error) {
    reduceProblem.value = lineOf(error);
  }
}

async function askToCancel(id: string): Promise<void> {
  await reached(api.jobs[':id'].cancel.$post({ param: { id } }));
}

/** @returns null when the job was cancelled */
async function resultOf(jobId: string): Promise<Result | null> {
  const answer = await reached(api.jobs[':id'].events.$get({ param: { id: jobId } }));
  for await (const event of eventLines<JobEvent>(answer as unknown as Response)) {
    if (event.event === 'done') return event.result;
    if (event.event === 'cancelled') return null;
    if (event.event === 'refused') throw new Error(event.message);
    if (event.event === 'progress' && job.value) job.value = { ...job.value, progress: event };
  }
  throw new Error('The reduction ended without an answer; reduce the sheet again.');
}

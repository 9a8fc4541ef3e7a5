import { signal } from '@preact/signals';
import { answered, api, lineOf } from './api.ts';
import { type Draft, draft, replaceDraft, sheetFolder } from './draft.ts';
import { type Footage, footage, footageProblem, loadDropped, loadFootage, showFootage } from './footage.ts';
import { frameNumber, goToFrame } from './frames.ts';
import { sheetIsUnsaved } from './keptSheet.ts';
import { selectedId } from './marks.ts';
import { playing } from './playing.ts';
import { isUnsaved, job, leaveReduction } from './reduction.ts';

/** What going on may cost: the result (or the reduction that runs), and where another sheet comes also the sheet. */
type Losing = 'result' | 'resultAndSheet';

/** Set while the user is asked whether what is not saved may go. */
export const leaving = signal<{ readonly goOn: () => void; readonly losing: Losing } | null>(null);
/** The sheet as it was when the footage changed under it: parts that are still the same since then are not confirmed for this drop. */
export const carriedOver = signal<Draft | null>(null);

/** Runs at once, or when the user has decided about what would be lost. */
export function afterLeaving(losing: Losing, goOn: () => void): void {
  const sheetIsLost = losing === 'resultAndSheet' && sheetIsUnsaved.value;
  if (isUnsaved.value || job.value || sheetIsLost) leaving.value = { goOn, losing };
  else goOn();
}

/** Opens footage as the next drop: the sheet stays, its marks are to be looked at again. */
export function openFootage(path: string): void {
  afterLeaving('result', async () => takeAsNextDrop(await loadFootage(path)));
}

export function openDropped(file: File): void {
  afterLeaving('result', async () => takeAsNextDrop(await loadDropped(file)));
}

function takeAsNextDrop(next: Footage | null): void {
  if (!next) return;
  const hadFootage = draft.value.footage.path !== undefined;
  const last = next.frameCount - 1;
  replaceDraft({
    ...draft.value,
    footage: { path: next.path },
    bodies: draft.value.bodies.map(({ marks: _, ...body }) => ({
      ...body,
      frame: body.frame <= last ? body.frame : 0,
    })),
  });
  if (hadFootage) carriedOver.value = draft.value;
  leaveReduction();
  show(next);
}

/** Shows footage from its first frame (or the frame that a sheet starts at). */
export function show(next: Footage | null): void {
  playing.value = false;
  selectedId.value = null;
  showFootage(next);
  if (next) {
    frameNumber.value = -1; // so that going to a frame is a change even if its number is the same
    goToFrame(draft.value.footage.firstFrame ?? 0);
  }
}

/** Opens the footage file that comes after this one in its folder, by name. */
export function openNextInFolder(): void {
  const path = footage.value?.path;
  if (!path) return;
  afterLeaving('result', async () => {
    try {
      const folder = path.slice(0, Math.max(path.lastIndexOf('/'), path.lastIndexOf('\\')) + 1);
      const { files } = await answered(api.files.$get({ query: { folder } }));
      const footages = files.filter((f) => f.kind === 'footage');
      const next = footages[footages.findIndex((f) => f.path === path) + 1];
      if (next) takeAsNextDrop(await loadFootage(next.path));
      else footageProblem.value = `There is no footage after ${footage.value?.name ?? path} in its folder.`;
    } catch (error) {
      footageProblem.value = lineOf(error);
    }
  });
}

/** What a relative path of the sheet means. */
export function wholePath(path: string): string {
  const absolute = /^([\\/]|[A-Za-z]:[\\/])/.test(path);
  if (absolute || sheetFolder.value === null) return path;
  const separator = sheetFolder.value.includes('\\') ? '\\' : '/';
  return `${sheetFolder.value.replace(/[\\/]$/, '')}${separator}${path}`;
}

import { computed, signal } from '@preact/signals';
import { draft, type Point, setField } from './draft.ts';
import { footage } from './footage.ts';
import { frameNumber, goToFrame } from './frames.ts';

/** A place in the picture that the technician sets: an end of the bar, a point of the plumb line, a body. */
export interface Mark {
  /** Its place in the sheet. */
  readonly id: string;
  readonly letter: string;
  readonly name: string;
  readonly kind: 'bar' | 'plumb' | 'tip' | 'reference' | 'other';
  readonly at: Point | null;
  /** The frame it belongs to; null where it holds for all. */
  readonly frame: number | null;
  readonly patchPx: number | null;
}

export const marks = computed<readonly Mark[]>(() => {
  const { scale, bodies } = draft.value;
  const several = scale.bars.length > 1;
  const bars = scale.bars.flatMap((bar, i) =>
    (['a', 'b'] as const).map((end): Mark => {
      const letter = `${end.toUpperCase()}${several ? i + 1 : ''}`;
      const name = `Scale bar ${several ? `${i + 1} ` : ''}end ${end.toUpperCase()}`;
      return {
        id: `scale.bars[${i}].${end}`,
        letter,
        name,
        kind: 'bar',
        at: bar[end] ?? null,
        frame: null,
        patchPx: null,
      };
    }),
  );
  const plumb = (['a', 'b'] as const).map((end): Mark => {
    const top = end === 'a';
    const letter = top ? 'P' : 'Q';
    const name = `Plumb line point ${letter}`;
    return {
      id: `scale.plumb.${end}`,
      letter,
      name,
      kind: 'plumb',
      at: scale.plumb[end] ?? null,
      frame: null,
      patchPx: null,
    };
  });
  const placed = bodies.map(
    (body, i): Mark => ({
      id: `bodies[${i}]`,
      letter: letterOfBody(body.id),
      name: `Body ${body.id}`,
      kind: body.role,
      at: body.x === undefined || body.y === undefined ? null : { x: body.x, y: body.y },
      frame: body.frame,
      patchPx: body.patchPx ?? null,
    }),
  );
  const hand = bodies.flatMap((body, i): Mark[] => {
    const letter = letterOfBody(body.id);
    if (body.x === undefined) return [];
    return [frameNumber.value].map((frame) => ({
      id: handMarkId(i),
      letter: `${letter}h`,
      name: `Body ${body.id} set by hand`,
      kind: body.role,
      at: body.marks?.find((m) => m.frame === frame) ?? null,
      frame,
      patchPx: body.patchPx ?? null,
    }));
  });
  return [...bars, ...plumb, ...placed, ...hand];
});

/** The mark for the place of a body that is set by hand in the frame that is shown. */
export function handMarkId(bodyIndex: number): string {
  return `bodies[${bodyIndex}].marks`;
}

export const selectedId = signal<string | null>(null);
export const selectedMark = computed(() => marks.value.find((m) => m.id === selectedId.value) ?? null);
/** Where the pointer is in the picture while there is something to place. */
export const pointerAt = signal<Point | null>(null);

/** T for the tip, B for the ball, O1 for other1: what tells bodies apart in picture and lanes. */
export function letterOfBody(id: string): string {
  return (id[0] ?? '?').toUpperCase() + (/\d+$/.exec(id.slice(1))?.[0] ?? '');
}

/** Selects a mark; a body's frame is shown, for that is where it belongs. */
export function selectMark(id: string | null): void {
  selectedId.value = id;
  const frame = selectedMark.peek()?.frame;
  if (selectedMark.peek()?.at && frame !== null && frame !== undefined) goToFrame(frame);
}

/** The next mark that has no place yet, after the selected one. */
export function selectNextUnplaced(): void {
  const list = marks.peek();
  const from = list.findIndex((m) => m.id === selectedId.peek()) + 1;
  const next = [...list.slice(from), ...list.slice(0, from)].find(
    (m) => m.at === null && !m.id.endsWith('.marks'),
  );
  if (next) selectMark(next.id);
}

/** Sets a mark's place, to 0.01 px and inside the picture; a body is placed in the frame that is shown. */
export function placeMark(id: string, to: Point): void {
  const mark = marks.peek().find((m) => m.id === id);
  const size = footage.peek();
  if (!mark || !size) return;
  const at = { x: within(to.x, size.widthPx), y: within(to.y, size.heightPx) };
  if (mark.frame === null) {
    setField(id, at);
    return;
  }
  const frame = frameNumber.peek();
  const body = draft.peek().bodies[Number(/\d+/.exec(id)?.[0])];
  if (!body) return;
  if (id.endsWith('.marks')) {
    const others = (body.marks ?? []).filter((m) => m.frame !== frame);
    setField(
      id,
      [...others, { frame, ...at }].sort((a, b) => a.frame - b.frame),
    );
  } else setField(id, { ...body, ...at, frame });
}

export function moveMark(id: string, byXPx: number, byYPx: number): void {
  const at = marks.peek().find((m) => m.id === id)?.at;
  if (at) placeMark(id, { x: at.x + byXPx, y: at.y + byYPx });
}

function within(value: number, sizePx: number): number {
  const rounded = Math.round(value * 100) / 100;
  return Math.min(Math.max(rounded, -0.5), sizePx - 0.5);
}

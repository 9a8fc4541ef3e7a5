import { signal } from '@preact/signals';
import type { SheetInput } from '../../analysis/sheet/sheet.ts';
import { type FieldPath, withValue } from './fieldPath.ts';

export interface Point {
  readonly x: number;
  readonly y: number;
}

type Lens = NonNullable<NonNullable<SheetInput['camera']>['lens']>;

/** A sheet while it is filled in: everything may still be missing. Where a choice is open, what was stated for each is kept. */
export interface Draft {
  readonly footage: { readonly path?: string; readonly firstFrame?: number; readonly lastFrame?: number };
  readonly clock: {
    readonly kind: SheetInput['clock']['kind'];
    readonly captureRateHz?: number;
    readonly uCaptureRateRel?: number;
    readonly path?: string;
  };
  readonly camera: { readonly exposureS?: number; readonly rowTimeS?: number; readonly lens?: Lens };
  readonly scale: {
    readonly bars: readonly DraftBar[];
    readonly plumb: { readonly a?: Point; readonly b?: Point };
    readonly fiducials?: SheetInput['scale']['fiducials'];
    readonly planeOffsetM?: number;
    readonly uPlaneOffsetM?: number;
    readonly cameraDistanceM?: number;
    readonly pitchDeg?: number;
    readonly uPitchDeg?: number;
    readonly yawDeg?: number;
    readonly uYawDeg?: number;
    readonly pitchFromFall?: true;
    readonly fromGravity?: true;
  };
  readonly origin?: Point;
  readonly siteBy: 'gravity' | 'place';
  readonly site: {
    readonly gMps2?: number;
    readonly uGMps2?: number;
    readonly latitudeDeg?: number;
    readonly heightM?: number;
  };
  readonly ambient: {
    readonly temperatureC?: number;
    readonly pressurePa?: number;
    readonly relativeHumidity?: number;
  };
  readonly bodies: readonly DraftBody[];
  readonly tether: {
    readonly lengthM?: number;
    readonly uLengthM?: number;
    readonly separationM?: number;
    readonly massKg?: number;
    readonly links?: number;
    readonly tipMassKg?: number;
  };
  /** How motion is worked out: kept as it stood in the sheet file. */
  readonly motion?: SheetInput['motion'];
  readonly limits: readonly DraftLimit[];
}

interface DraftBar {
  readonly a?: Point;
  readonly b?: Point;
  readonly lengthM?: number;
  readonly uLengthM?: number;
  readonly uMarkPx?: number;
  /** The reduction looks for the centres of the targets at the marks. */
  readonly refine?: boolean;
}

export interface DraftBody {
  readonly id: string;
  readonly role: SheetInput['bodies'][number]['role'];
  readonly frame: number;
  readonly x?: number;
  readonly y?: number;
  readonly patchPx?: number;
  readonly diameterM?: number;
  readonly massKg?: number;
  readonly marks?: readonly { readonly frame: number; readonly x: number; readonly y: number }[];
}

export interface DraftLimit {
  readonly quantity: string;
  readonly min?: number;
  readonly max?: number;
  readonly unit: string;
  readonly rule: 'guarded' | 'simple';
}

/** What a drop usually has: one bar, a tip and a ball beside it. */
export const emptyDraft: Draft = {
  footage: {},
  clock: { kind: 'captureRate' },
  camera: {},
  scale: { bars: [{}], plumb: {} },
  siteBy: 'gravity',
  site: {},
  ambient: {},
  bodies: [
    { id: 'tip', role: 'tip', frame: 0 },
    { id: 'ball', role: 'reference', frame: 0 },
  ],
  tether: {},
  limits: [],
};

export const draft = signal<Draft>(emptyDraft);
/** What the draft's relative paths are relative to; null while the sheet was never in a file. */
export const sheetFolder = signal<string | null>(null);
export const sheetPath = signal<string | null>(null);
/** Texts in number fields that are not numbers yet, with what is wrong with them. */
export const unreadable = signal<ReadonlyMap<FieldPath, { readonly text: string; readonly problem: string }>>(
  new Map(),
);

export function setField(path: FieldPath, value: unknown): void {
  draft.value = withValue(draft.peek(), path, value);
}

export function setUnreadable(path: FieldPath, entry: { text: string; problem: string } | null): void {
  if (entry === null && !unreadable.peek().has(path)) return;
  const next = new Map(unreadable.peek());
  if (entry) next.set(path, entry);
  else next.delete(path);
  unreadable.value = next;
}

export function replaceDraft(next: Draft): void {
  draft.value = next;
  unreadable.value = new Map();
}

import type { SheetBody } from '../../sheet/sheet.ts';
import type { ModelName } from '../../sheet/theorySettings.ts';
import type { Air } from '../air.ts';
import type { LocalGravity } from '../normalGravity.ts';

/** A value with its standard uncertainty, known before the footage is looked at. */
interface Prior {
  readonly value: number;
  readonly u: number;
}

/** One number that a model depends on. */
export interface Parameter {
  /** Name with its SI unit at the end, as in the result: `lengthM`. */
  readonly name: string;
  /** The unit as printed; '' for a pure number. */
  readonly unit: string;
  /** What it is, in words that fit into a sentence: "the length of the tether". */
  readonly meaning: string;
  /** Where a fit starts; the value itself where the parameter is held. */
  readonly start: number;
  /** Outside these the model means nothing. */
  readonly bounds: readonly [least: number, most: number];
  /** What the sheet states of it; null where only the footage can tell. A prior with u = 0 holds the parameter at its value. */
  readonly prior: Prior | null;
}

/** Parameter values by name. */
export type Values = Readonly<Record<string, number>>;

/** What is known of a body and its rig apart from the footage. Models take what they need and refuse when it is missing. */
export interface Stated {
  readonly body: Pick<
    SheetBody,
    'id' | 'role' | 'diameterM' | 'massKg' | 'dragCoefficient' | 'uDragCoefficient'
  >;
  readonly tether: Tether | null;
  readonly gravity: LocalGravity;
  readonly air: Air;
}

/** The tether as the sheet states it; null where the sheet is silent. */
export interface Tether {
  readonly lengthM: number;
  readonly uLengthM: number | null;
  readonly separationM: number | null;
  readonly massKg: number | null;
  readonly links: number | null;
  readonly uMassKg: number | null;
  /** Mass at the free end that is not tether: clamp, hook, and the marker that is followed [kg]. */
  readonly tipMassKg: number | null;
  readonly uTipMassKg: number | null;
}

/**
 * A body's fall from rest after a model; arrays have the length of the times asked for. Heights are counted up from the place of
 * rest, so they are 0 until release and negative after. From `untilS` on the model says nothing: the body stays where it is, with
 * velocity and acceleration 0.
 */
export interface Fall {
  readonly yM: Float64Array;
  readonly vyMps: Float64Array;
  readonly ayMps2: Float64Array;
  /** End of what the model describes [s after release]: extension of a tether; infinite for a body that just falls. */
  readonly untilS: number;
}

/**
 * A model of how a body falls. Siblings are one file each in this folder and one line in `models.ts`; a test walks the list.
 * Release time, height of rest and the scales of length and time are no parameters of a model: they are the fit's.
 */
export interface Model {
  readonly name: ModelName;
  /** The model in a sentence: "the energy form". */
  readonly title: string;
  /** Seconds instead of a millisecond for a curve: fitted only where the sheet asks for it. */
  readonly expensive: boolean;
  /** More general models of which this is the special case with one or more of their parameters held. */
  readonly specialCaseOf: readonly ModelName[];
  /** Whether the model speaks of such a body at all. */
  concerns(stated: Stated): boolean;
  /** Why the model cannot be held against a body that it concerns, in words that say what to state; null when it can. */
  refusal(stated: Stated): string | null;
  /** In a fixed order. Only called where `refusal` gave null, as are the following. */
  parameters(stated: Stated): readonly Parameter[];
  /** @param sinceReleaseS  times after release [s], ascending; negative ones are at rest */
  fall(sinceReleaseS: Float64Array, values: Values, stated: Stated): Fall;
  /**
   * ∂y/∂parameter at each time, one array for each of `parameters`, in their order. A model without closed derivatives takes
   * `slopesByDifferences`.
   */
  slopes(sinceReleaseS: Float64Array, values: Values, stated: Stated): readonly Float64Array[];
}

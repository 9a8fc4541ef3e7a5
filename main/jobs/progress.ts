/** How far a reduce job is. `framesTotal` is null while it is not known. */
export interface Progress {
  readonly phase: 'index' | 'track' | 'motion';
  readonly framesDone: number;
  readonly framesTotal: number | null;
  readonly rateHz: number;
  readonly timeLeftS: number | null;
}

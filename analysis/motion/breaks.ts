/** An instant that no smoothing may cross: acceleration jumps there. */
export interface Break {
  readonly kind: 'release' | 'extension';
  readonly timeS: number;
  readonly uTimeS: number;
}

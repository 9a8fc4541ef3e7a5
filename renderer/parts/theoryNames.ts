import type { Theory } from '../../analysis/sheet/result.ts';

/** A model in words, with the letter and the dashes that it has in the lanes. */
export const theoryNames: Readonly<
  Record<
    Theory['model'],
    {
      readonly text: string;
      readonly short: string;
      readonly letter: string;
      readonly dash: readonly number[];
    }
  >
> = {
  freeFall: { text: 'free fall', short: 'free fall', letter: 'F', dash: [1, 3] },
  freeFallDrag: { text: 'free fall with drag', short: 'with drag', letter: 'D', dash: [8, 3, 1, 3] },
  foldedTetherEnergy: {
    text: 'folded tether, energy form',
    short: 'energy form',
    letter: 'E',
    dash: [10, 4],
  },
  foldedTetherMomentum: {
    text: 'folded tether, momentum form',
    short: 'momentum form',
    letter: 'M',
    dash: [3, 3],
  },
  foldedTetherShare: {
    text: 'folded tether, share of energy kept',
    short: 'share of energy',
    letter: 'S',
    dash: [6, 2, 2, 2],
  },
  foldedTetherEndWeight: {
    text: 'folded tether, end weight found',
    short: 'end weight',
    letter: 'W',
    dash: [14, 2],
  },
  linkedTether: { text: 'linked tether', short: 'linked tether', letter: 'L', dash: [12, 3, 2, 3] },
};

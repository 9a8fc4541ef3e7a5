import type { SettingsOf } from '../../sheet/motionSettings.ts';
import { type LowPass, lowPass, twoRunShare } from './lowPass.ts';
import type { MethodWithSettings, PrescribedMethod } from './prescribedMethod.ts';
import { zeroPhaseSmoother } from './zeroPhaseSmoother.ts';

type Settings = SettingsOf<'channelClass'>;

/** Corner of one run over the class: SAE J211-1, appendix C; ISO 6487 (published values, section d). */
const cornerFactor: Readonly<Record<Settings['standard'], number>> = {
  'SAE J211-1': 2.0775,
  'ISO 6487': (1.25 * 5) / 3,
};

/** Both standards ask for a sampling rate of at least so many times the class. */
const samplesPerClass = 10;

/** Filter of a class at a sampling rate, to be run forward and backward. */
export function channelClassFilter(settings: Omit<Settings, 'method'>, sampleRateHz: number): LowPass {
  return lowPass(Math.tan((Math.PI * cornerHz(settings)) / sampleRateHz));
}

function cornerHz(settings: Omit<Settings, 'method'>): number {
  return settings.class * cornerFactor[settings.standard];
}

/** Channel frequency class: the acceleration, as second central difference of the positions, through the filter of the class. */
export const channelClass: PrescribedMethod = {
  name: 'channelClass',
  with(settings): MethodWithSettings | null {
    if (settings.method !== 'channelClass') return null;
    const leastRateHz = samplesPerClass * settings.class;
    return {
      description: `channel frequency class ${settings.class} after ${settings.standard}, applied to the acceleration`,
      rateProblem(frameRateHz) {
        // A rate known to some parts in a million must not miss the rule by its rounding.
        if (frameRateHz * (1 + 1e-4) >= leastRateHz) return null;
        const fit = [1000, 600, 180, 60].find((c) => samplesPerClass * c <= frameRateHz * (1 + 1e-4));
        return `class ${settings.class} of ${settings.standard} needs at least ${leastRateHz} frames per second, and the footage has ${Number(frameRateHz.toPrecision(6))}${fit === undefined ? '' : `; class ${fit} would do`}`;
      },
      needsEvenTimes: true,
      smoother(piece) {
        const n = piece.timeS.length;
        const rateHz = (n - 1) / (piece.timeS[n - 1] - piece.timeS[0]);
        const corner = cornerHz(settings);
        return zeroPhaseSmoother(piece, channelClassFilter(settings, rateHz), corner * twoRunShare, {
          class: settings.class,
          standard: settings.standard,
          cornerHz: corner,
        });
      },
    };
  },
};

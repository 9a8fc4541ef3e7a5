/** Chance that a band leaves the curve anywhere. */
const missed = 0.05;

/**
 * By how many standard uncertainties a band must reach to either side so that it holds the whole curve of the acceleration at once with
 * 95 %.
 *
 * The standardised error of a smoothed curve passes a level k upwards f exp(-k²/2) times per second, f being its RMS frequency (Rice,
 * Bell Syst. Tech. J. 24 (1945) 46), for which the bandwidth stands. The chance to be outside somewhere is at most that of being
 * outside at the start, at most exp(-k²/2), and of passing out on either side later: exp(-k²/2) (1 + 2 ∫ f dt).
 *
 * @param timeS        n times, increasing [s]
 * @param bandwidthHz  bandwidth at each of them; intervals without one do not count
 */
export function simultaneousFactor(timeS: readonly number[], bandwidthHz: Float64Array): number {
  let passings = 0;
  for (let i = 0; i + 1 < timeS.length; i++) {
    const hz = (bandwidthHz[i] + bandwidthHz[i + 1]) / 2;
    if (Number.isFinite(hz)) passings += hz * (timeS[i + 1] - timeS[i]);
  }
  return Math.sqrt(2 * Math.log((1 + 2 * passings) / missed));
}

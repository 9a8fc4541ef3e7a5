/** What a tether is expected to do at its end. */
export interface TetherPeak {
  readonly peakMps2: number;
  readonly speedMps: number;
  /** Half width of the peak at half its height [s]. */
  readonly halfWidthS: number;
  readonly extensionS: number;
}

/** Time to extension of a folded tether, energy form, in √(L/g): Calkin & March, Am. J. Phys. 57 (1989) 154. */
const extensionTimeReduced = 1.19814;

/** Peak of a linked tether [m/s²], within 20 % (linked-tether integrations without loss, separation 0.02 to 0.7 of the length). */
export function expectedPeakMps2(links: number, separationShare: number, gMps2: number): number {
  const epsilonSquared = (2.9 / links) ** 2 + (0.67 * separationShare ** 2.36) ** 2;
  return gMps2 / (2 * epsilonSquared);
}

/**
 * The end of the fall of a tether whose law is a = (g/2)(1 + 1/((1 - u)² + ε²)): ε from the peak, then speed √(π g L/(2ε)) and
 * half width ε^1.5 √(2L/(π g)).
 *
 * @throws RangeError unless the peak is greater than g
 */
export function tetherPeak(lengthM: number, peakMps2: number, gMps2: number): TetherPeak {
  if (!(peakMps2 > gMps2)) throw new RangeError(`tetherPeak: a peak of ${peakMps2} m/s² is no more than g`);
  const epsilon = Math.sqrt(gMps2 / (2 * peakMps2));
  return {
    peakMps2,
    speedMps: Math.sqrt((Math.PI * gMps2 * lengthM) / (2 * epsilon)),
    halfWidthS: epsilon ** 1.5 * Math.sqrt((2 * lengthM) / (Math.PI * gMps2)),
    extensionS: extensionTimeReduced * Math.sqrt(lengthM / gMps2),
  };
}

import type { Piece, Smoothed } from '../method.ts';
import { inflation } from '../residuals.ts';

/** Where a point's own value makes up nearly all of the pilot, its residual says nothing. */
const mostLeverage = 0.9;

/**
 * Factor on stated uncertainties for scatter and correlation as the pilot's residuals show them. The residuals of the prescribed
 * method would not do: where it smooths too much they hold its bias, where it smooths hardly at all they hold nothing.
 */
export function widening({ valueM, uM }: Piece, pilot: Smoothed): number {
  const standardised = valueM.map((value, i) => {
    const leverage = Math.min(mostLeverage, (pilot.position.u[i] / uM[i]) ** 2);
    return (value - pilot.position.value[i]) / (uM[i] * Math.sqrt(1 - leverage));
  });
  return inflation(standardised, 0, standardised.length);
}

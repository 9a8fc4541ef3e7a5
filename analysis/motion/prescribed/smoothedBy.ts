import type { Curve, Piece, Smoothed } from '../method.ts';
import type { LinearSmoother } from './linearSmoother.ts';
import { widening } from './widening.ts';

/**
 * Values of a prescribed method with their uncertainty: noise of the positions through the method's weights, widened by scatter
 * and correlation of the residuals, and the bias of smoothing.
 *
 * The bias is what the method's weights make of the pilot's curve, less that curve's own derivative: with fixed weights alone, 95 %
 * intervals cover 25 % beside a sharp peak (shared limits, section B). The pilot is known only to its own uncertainty, and so is the
 * bias.
 */
export function smoothedBy(piece: Piece, smoother: LinearSmoother, pilot: Smoothed): Smoothed {
  const wider = widening(piece, pilot);
  const values = smoother.apply(piece.valueM);
  const ofPilot = smoother.apply(pilot.position.value);
  const { uNoise } = smoother;
  const curve = (
    value: Float64Array,
    noise: Float64Array,
    smoothedPilot: Float64Array,
    exact: Curve,
  ): Curve => {
    const u = value.map((_, i) => Math.hypot(wider * noise[i], smoothedPilot[i] - exact.value[i]));
    // A value whose uncertainty is not known is none.
    return { value: value.map((v, i) => (Number.isNaN(u[i]) ? Number.NaN : v)), u };
  };
  const jerk =
    values.jerk && uNoise.jerk && ofPilot.jerk && pilot.jerk
      ? curve(values.jerk, uNoise.jerk, ofPilot.jerk, pilot.jerk)
      : null;
  return {
    position: curve(values.position, uNoise.position, ofPilot.position, pilot.position),
    velocity: curve(values.velocity, uNoise.velocity, ofPilot.velocity, pilot.velocity),
    acceleration: curve(values.acceleration, uNoise.acceleration, ofPilot.acceleration, pilot.acceleration),
    jerk,
    bandwidthHz: smoother.bandwidthHz,
    settings: smoother.settings,
  };
}

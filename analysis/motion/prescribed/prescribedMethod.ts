import type { MotionSettings } from '../../sheet/motionSettings.ts';
import type { Piece, Smoothed } from '../method.ts';
import type { LinearSmoother } from './linearSmoother.ts';

/** A method that a technician's procedure may prescribe. A new one is one file of this shape and one line in the list. */
export interface PrescribedMethod {
  readonly name: MotionSettings['method'];
  /** The method with the settings of a sheet; null when these are another method's. */
  with(settings: MotionSettings): MethodWithSettings | null;
}

export interface MethodWithSettings {
  /** In words, for the record. */
  readonly description: string;
  /** Why it cannot be used at this frame rate, and what would do; null when it can. Asked before footage is read. */
  rateProblem(frameRateHz: number): string | null;
  /** Whether it needs frames at even times without gaps. */
  readonly needsEvenTimes: boolean;
  /**
   * @param pilot  the piece by the adaptive method, from which bias is judged and what is not stated is chosen
   * @returns null when the piece has too few points
   */
  smoother(piece: Piece, pilot: Smoothed): LinearSmoother | null;
}

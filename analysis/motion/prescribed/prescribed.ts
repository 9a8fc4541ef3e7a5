import { butterworth } from './butterworth.ts';
import { centralDifference } from './centralDifference.ts';
import { channelClass } from './channelClass.ts';
import { localPolynomial } from './localPolynomial.ts';
import type { PrescribedMethod } from './prescribedMethod.ts';
import { quinticSpline } from './quinticSpline.ts';

/** Every method that can be prescribed. */
export const prescribedMethods: readonly PrescribedMethod[] = [
  localPolynomial,
  quinticSpline,
  butterworth,
  channelClass,
  centralDifference,
];

/** A quantity that a reduction can give, and on which a limit can be put. */
export interface Quantity {
  readonly quantity: string;
  readonly unit: string;
  readonly meaning: string;
}

/** Every key value, with the one unit in which it is given and in which a limit on it must be stated. */
export const quantities: readonly Quantity[] = [
  {
    quantity: 'ball.g',
    unit: 'm/s2',
    meaning: 'acceleration of free fall from the reference body, drag and buoyancy corrected',
  },
  {
    quantity: 'tip.releaseTime',
    unit: 's',
    meaning: 'instant at which the tip was let go, on the clock of the frames',
  },
  { quantity: 'tip.extensionTime', unit: 's', meaning: 'time from release to extension' },
  {
    quantity: 'tip.extensionTimeReduced',
    unit: '1',
    meaning: 'time from release to extension, divided by √(L/g)',
  },
  {
    quantity: 'tip.peakAcceleration',
    unit: 'm/s2',
    meaning: 'largest acceleration of the tip between release and extension',
  },
  {
    quantity: 'tip.peakSpeed',
    unit: 'm/s',
    meaning: 'largest speed of the tip between release and extension',
  },
  { quantity: 'tip.lead', unit: 'm', meaning: 'how far the tip is ahead of the reference body at extension' },
  { quantity: 'ball.dropAtExtension', unit: 'm', meaning: 'fall of the reference body until extension' },
  {
    quantity: 'ball.dropAtExtensionReduced',
    unit: '1',
    meaning: 'fall of the reference body until extension, divided by L',
  },
  {
    quantity: 'ball.releaseTime',
    unit: 's',
    meaning: 'instant at which the reference body was let go, on the clock of the frames',
  },
  {
    quantity: 'tip.peakJerk',
    unit: 'm/s3',
    meaning: 'largest rate of change of the acceleration along the plumb line between release and extension',
  },
  {
    quantity: 'tip.leadTime',
    unit: 's',
    meaning: 'time from release until the tip is significantly ahead of the reference body',
  },
];

/** Quantities of which a sheet may ask for several: its motion section numbers them from 1 (`tip.meanAcceleration.1`). */
const numberedQuantities: readonly Quantity[] = (['tip', 'ball'] as const).flatMap((body) => [
  {
    quantity: `${body}.meanAcceleration`,
    unit: 'm/s2',
    meaning:
      'magnitude of the change of velocity over an interval of the motion section, divided by its length',
  },
  {
    quantity: `${body}.maxAcceleration`,
    unit: 'm/s2',
    meaning: 'largest acceleration in an interval of the motion section',
  },
  {
    quantity: `${body}.speedAtHeight`,
    unit: 'm/s',
    meaning: 'speed at a height of the motion section, first passed after release',
  },
]);

/** The unit in which a quantity is given; null if there is no such quantity. */
export function unitOfQuantity(quantity: string): string | null {
  const stem = /^(.+)\.[1-9]\d*$/.exec(quantity)?.[1];
  const found =
    quantities.find((q) => q.quantity === quantity) ?? numberedQuantities.find((q) => q.quantity === stem);
  return found?.unit ?? null;
}

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
];

/** The unit in which a quantity is given; null if there is no such quantity. */
export function unitOfQuantity(quantity: string): string | null {
  return quantities.find((q) => q.quantity === quantity)?.unit ?? null;
}

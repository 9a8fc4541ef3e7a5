/** Key values that a limit can be set on, with the unit that they come in and what they are. */
export const quantities: Readonly<Record<string, { readonly unit: string; readonly text: string }>> = {
  'tip.peakAcceleration': { unit: 'm/s2', text: 'Highest acceleration of the tip' },
  'tip.peakSpeed': { unit: 'm/s', text: 'Highest speed of the tip' },
  'tip.extensionTime': { unit: 's', text: 'Time from release to extension' },
  'tip.extensionTimeReduced': { unit: '1', text: 'The same, divided by √(L/g)' },
  'tip.lead': { unit: 'm', text: 'How far the tip is ahead of the ball at extension' },
  'tip.releaseTime': { unit: 's', text: 'Release, on the clock' },
  'ball.g': { unit: 'm/s2', text: 'Acceleration of the reference body (gravity check)' },
  'ball.dropAtExtension': { unit: 'm', text: 'How far the ball has fallen at extension' },
  'ball.dropAtExtensionReduced': { unit: '1', text: 'The same, divided by L' },
};

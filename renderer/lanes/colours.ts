/** Okabe & Ito 2008; a body is told by its line style and letter as well. */
export const bodyLooks: Readonly<
  Record<
    string,
    {
      readonly colour: string;
      readonly band: string;
      readonly points: string;
      readonly dash: readonly number[];
    }
  >
> = {
  tip: { colour: '#d55e00', band: 'rgba(213, 94, 0, 0.22)', points: 'rgba(213, 94, 0, 0.45)', dash: [] },
  reference: {
    colour: '#0072b2',
    band: 'rgba(0, 114, 178, 0.22)',
    points: 'rgba(0, 114, 178, 0.45)',
    dash: [7, 3],
  },
};
export const otherLook = {
  colour: '#009e73',
  band: 'rgba(0, 158, 115, 0.22)',
  points: 'rgba(0, 158, 115, 0.45)',
  dash: [2, 2],
};
export const theoryColour = '#333333';

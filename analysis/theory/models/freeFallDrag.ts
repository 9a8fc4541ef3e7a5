import { freeFallDrag } from '../freeFallDrag.ts';
import { uSphereDragRel } from '../sphereDrag.ts';
import { gravityParameter } from './gravityParameter.ts';
import type { Model, Stated, Values } from './model.ts';
import { slopesByDifferences } from './slopesByDifferences.ts';

/** Fall in still air with drag, buoyancy and added mass. */
export const withDrag: Model = {
  name: 'freeFallDrag',
  title: 'free fall with drag',
  expensive: false,
  specialCaseOf: [],
  concerns: ({ body }) => body.role !== 'tip',
  refusal({ body }) {
    const missing = (['diameterM', 'massKg'] as const).filter((field) => body[field] === undefined);
    return missing.length === 0 ? null : `drag needs ${missing.join(' and ')} of body "${body.id}"`;
  },
  parameters({ gravity, body, air }) {
    const drag = body.dragCoefficient;
    return [
      gravityParameter(gravity),
      {
        name: 'dragShare',
        unit: '',
        meaning:
          drag === undefined
            ? "the drag's share of the standard curve for spheres"
            : "the drag's share of the stated coefficient",
        start: 1,
        bounds: [0, 10],
        prior: {
          value: 1,
          u: drag === undefined ? uSphereDragRel : (body.uDragCoefficient ?? uSphereDragRel * drag) / drag,
        },
      },
      {
        name: 'airDensityKgpm3',
        unit: 'kg/m³',
        meaning: 'the density of the air',
        start: air.densityKgpm3,
        bounds: [0, 10],
        prior: { value: air.densityKgpm3, u: air.densityKgpm3 * air.uDensityRel },
      },
    ];
  },
  fall,
  slopes(sinceReleaseS, values, stated) {
    return slopesByDifferences(
      (t, v) => fall(t, v, stated),
      sinceReleaseS,
      values,
      withDrag.parameters(stated),
    );
  },
};

function fall(sinceReleaseS: Float64Array, values: Values, { body, air }: Stated) {
  const { diameterM = 0, massKg = 0, dragCoefficient } = body;
  const curve = freeFallDrag(
    sinceReleaseS,
    0,
    values.gMps2,
    { diameterM, massKg, dragCoefficient },
    { ...air, densityKgpm3: values.airDensityKgpm3 },
    values.dragShare,
  );
  return { ...curve, untilS: Number.POSITIVE_INFINITY };
}

import { type Layer, makeLayer, makeSampler, REACH, sampledFor } from './layer.ts';
import type { BodyModel } from './match.ts';

/** Blur shorter than this changes a body's look by less than its noise: not worth modelling. */
const leastBlurPx = 0.35;

/**
 * A layer averaged along the way the body goes while the shutter is open: the mean of the layer at evenly spread instants
 * about mid-exposure, so that the place that is found belongs to mid-exposure.
 */
function blurLayer(layer: Layer, alongXPx: number, alongYPx: number): Layer {
  const lengthPx = Math.hypot(alongXPx, alongYPx);
  const instants = Math.max(3, Math.ceil(2 * lengthPx) + 1);
  const outer = layer.half + REACH;
  const side = 2 * outer + 1;
  const reach = REACH + Math.ceil(lengthPx / 2) + 1;
  // The layer's own samples are wanted on its whole side, so it is evaluated through a larger one padded with its edge.
  const padded = padCoefficients(layer, reach);
  const sampler = makeSampler(outer + reach - REACH);
  const at = sampledFor(outer + reach - REACH);
  const wide = 2 * (outer + reach - REACH) + 1;
  const sum = new Float64Array(side * side);
  for (let k = 0; k < instants; k++) {
    const part = (k + 0.5) / instants - 0.5;
    const dx = alongXPx * part;
    const dy = alongYPx * part;
    const wholeX = Math.round(dx);
    const wholeY = Math.round(dy);
    sampler.sample(padded, dx - wholeX, dy - wholeY, at);
    const margin = reach - REACH;
    for (let row = 0; row < side; row++) {
      const from = (row + margin - wholeY) * wide + margin - wholeX;
      for (let column = 0; column < side; column++) sum[row * side + column] += at.value[from + column];
    }
  }
  for (let i = 0; i < sum.length; i++) sum[i] /= instants;
  return makeLayer(sum, layer.half);
}

function padCoefficients(layer: Layer, by: number): Layer {
  const side = 2 * (layer.half + REACH) + 1;
  const wide = side + 2 * by;
  const coefficients = new Float64Array(wide * wide);
  for (let row = 0; row < wide; row++) {
    const y = Math.min(side - 1, Math.max(0, row - by));
    for (let column = 0; column < wide; column++) {
      const x = Math.min(side - 1, Math.max(0, column - by));
      coefficients[row * wide + column] = layer.coefficients[y * side + x];
    }
  }
  return { half: layer.half + by, coefficients };
}

/**
 * The model as it looks when the body moves by (alongXPx, alongYPx) during the exposure. The plate does not move, so coverage
 * and appearance blur alike and the composite stays exact.
 */
export function blurModel(model: BodyModel, alongXPx: number, alongYPx: number): BodyModel {
  if (Math.hypot(alongXPx, alongYPx) < leastBlurPx) return model;
  return {
    ...model,
    appearance: blurLayer(model.appearance, alongXPx, alongYPx),
    coverage: model.coverage && blurLayer(model.coverage, alongXPx, alongYPx),
  };
}

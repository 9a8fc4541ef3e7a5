import type { Sheet } from '../sheet/sheet.ts';
import type { InputQuantity } from '../uncertainty/measurement.ts';
import { propagate } from '../uncertainty/propagate.ts';

export interface Air {
  readonly densityKgpm3: number;
  /** Relative standard uncertainty of the density. */
  readonly uDensityRel: number;
  readonly viscosityPas: number;
  /** What the sheet did not state and was taken instead, in words. */
  readonly assumed: readonly string[];
}

/**
 * Density of moist air, CIPM-2007: A. Picard, R. S. Davis, M. Gläser, K. Fujii, Metrologia 45 (2008) 149, with 400 ppm CO2.
 *
 * @param relativeHumidity  0 to 1
 */
export function airDensity(temperatureC: number, pressurePa: number, relativeHumidity: number): number {
  const tC = temperatureC;
  const tK = tC + 273.15;
  const saturationPa = Math.exp(1.2378847e-5 * tK * tK - 1.9121316e-2 * tK + 33.93711047 - 6.3431645e3 / tK);
  const enhancement = 1.00062 + 3.14e-8 * pressurePa + 5.6e-7 * tC * tC;
  const xv = (relativeHumidity * enhancement * saturationPa) / pressurePa;
  const perK = pressurePa / tK;
  const compressibility =
    1 -
    perK *
      (1.58123e-6 -
        2.9331e-8 * tC +
        1.1043e-10 * tC * tC +
        (5.707e-6 - 2.051e-8 * tC) * xv +
        (1.9898e-4 - 2.376e-6 * tC) * xv * xv) +
    perK * perK * (1.83e-11 - 0.765e-8 * xv * xv);
  const dryKgpmol = 28.96546e-3;
  const vapourKgpmol = 18.01528e-3;
  const gasConstant = 8.314472;
  return (
    ((pressurePa * dryKgpmol) / (compressibility * gasConstant * tK)) *
    (1 - xv * (1 - vapourKgpmol / dryKgpmol))
  );
}

/** Viscosity of air, Sutherland's law with the constants of the US Standard Atmosphere 1976, equation 51. */
export function airViscosity(temperatureC: number): number {
  const tK = temperatureC + 273.15;
  return (1.458e-6 * tK ** 1.5) / (tK + 110.4);
}

// Rooms: 20 °C ± 5 °C; pressure from weather and heights up to about 500 m; humidity hardly matters. Where a reading is stated
// without an uncertainty, that of an ordinary instrument is taken: it is far below what the drag of a ball is known to.
const unstated = {
  temperatureC: { value: 20, u: 5 },
  pressurePa: { value: 101_325, u: 3000 },
  relativeHumidity: { value: 0.5, u: 0.3 },
} as const;
const uOfInstrument = { temperatureC: 0.5, pressurePa: 100, relativeHumidity: 0.05 } as const;
/** Of the equation itself: Picard et al. 2008, section 3. */
const uEquationRel = 2.2e-5;

/** Air at the rig; what is not stated is taken as an ordinary room's and made uncertain accordingly. */
export function airOf(ambient: Sheet['ambient']): Air {
  const input = (name: keyof typeof unstated, source: string, stated?: number, u?: number): InputQuantity =>
    stated === undefined
      ? { source, ...unstated[name] }
      : { source, value: stated, u: u ?? uOfInstrument[name] };
  const { temperatureC, pressurePa, relativeHumidity } = ambient ?? {};
  const inputs = {
    t: input('temperatureC', 'temperature', temperatureC, ambient?.uTemperatureC),
    p: input('pressurePa', 'pressure', pressurePa, ambient?.uPressurePa),
    h: input('relativeHumidity', 'humidity', relativeHumidity, ambient?.uRelativeHumidity),
    equation: { source: 'equation of the density', value: 1, u: uEquationRel },
  };
  const [t, p, h] = [inputs.t.value, inputs.p.value, inputs.h.value];
  const density = airDensity(t, p, h);
  const { u } = propagate({
    inputs,
    outputs: (m, x) => {
      // The equation is for plain numbers: changes by each of its three arguments are added.
      const byEach = m.add(
        m.through((c) => airDensity(c, p, h), x.t),
        m.through((c) => airDensity(t, c, h), x.p),
        m.through((c) => airDensity(t, p, c), x.h),
        -2 * density,
      );
      return { density: m.multiply(byEach, x.equation) };
    },
  }).outputs.density;
  const assumed = [
    ...(temperatureC === undefined ? ['20 °C (ambient.temperatureC)'] : []),
    ...(pressurePa === undefined ? ['101 325 Pa (ambient.pressurePa)'] : []),
    ...(relativeHumidity === undefined ? ['half saturated (ambient.relativeHumidity)'] : []),
  ];
  return { densityKgpm3: density, uDensityRel: u / density, viscosityPas: airViscosity(t), assumed };
}

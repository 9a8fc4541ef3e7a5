import type { Sheet } from '../sheet/sheet.ts';

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

/** Air at the rig; what is not stated is taken as an ordinary room's and made uncertain accordingly. */
export function airOf(ambient: Sheet['ambient']): Air {
  const assumed: string[] = [];
  // Rooms: 20 °C ± 5 °C; pressure from weather and heights up to about 500 m; humidity hardly matters.
  let variance = 0.001 ** 2;
  if (ambient?.temperatureC === undefined) {
    assumed.push('20 °C (ambient.temperatureC)');
    variance += (5 / 293.15) ** 2;
  }
  if (ambient?.pressurePa === undefined) {
    assumed.push('101 325 Pa (ambient.pressurePa)');
    variance += 0.03 ** 2;
  }
  if (ambient?.relativeHumidity === undefined) {
    assumed.push('half saturated (ambient.relativeHumidity)');
    variance += 0.003 ** 2;
  }
  const temperatureC = ambient?.temperatureC ?? 20;
  return {
    densityKgpm3: airDensity(temperatureC, ambient?.pressurePa ?? 101_325, ambient?.relativeHumidity ?? 0.5),
    uDensityRel: Math.sqrt(variance),
    viscosityPas: airViscosity(temperatureC),
    assumed,
  };
}

import type { Sheet } from '../sheet/sheet.ts';

/** Air as it bears on a falling body. */
export interface Air {
  readonly densityKgpm3: number;
  readonly viscosityPaS: number;
}

const gasConstant = 8.314472;
const molarMassDryAir = 28.96546e-3; // at 400 µmol/mol of carbon dioxide
const molarMassWaterRatio = 0.378;

/**
 * Density of moist air, CIPM-2007: Picard, Davis, Gläser & Fujii, Metrologia 45 (2008) 149, eq. (1) and A1.1 to A1.4.
 *
 * @param relativeHumidity  0 … 1
 */
export function airDensity(temperatureC: number, pressurePa: number, relativeHumidity: number): number {
  const t = temperatureC;
  const kelvin = t + 273.15;
  const saturation = Math.exp(1.2378847e-5 * kelvin * kelvin - 1.9121316e-2 * kelvin + 33.93711047 - 6.3431645e3 / kelvin);
  const enhancement = 1.00062 + 3.14e-8 * pressurePa + 5.6e-7 * t * t;
  const x = (relativeHumidity * enhancement * saturation) / pressurePa;
  const pt = pressurePa / kelvin;
  const compressibility =
    1 -
    pt *
      (1.58123e-6 - 2.9331e-8 * t + 1.1043e-10 * t * t + (5.707e-6 - 2.051e-8 * t) * x + (1.9898e-4 - 2.376e-6 * t) * x * x) +
    pt * pt * (1.83e-11 - 0.765e-8 * x * x);
  return ((pressurePa * molarMassDryAir) / (compressibility * gasConstant * kelvin)) * (1 - molarMassWaterRatio * x);
}

/** Viscosity of air by Sutherland's formula, US Standard Atmosphere 1976, eq. 51 [Pa s]. */
export function airViscosity(temperatureC: number): number {
  const kelvin = temperatureC + 273.15;
  return (1.458e-6 * kelvin ** 1.5) / (kelvin + 110.4);
}

/** The air of the drop: as stated, else that of a laboratory (20 °C, 101 325 Pa, 50 %). */
export function airOf(ambient: Sheet['ambient']): Air {
  const temperatureC = ambient?.temperatureC ?? 20;
  return {
    densityKgpm3: airDensity(temperatureC, ambient?.pressurePa ?? 101325, ambient?.relativeHumidity ?? 0.5),
    viscosityPaS: airViscosity(temperatureC),
  };
}

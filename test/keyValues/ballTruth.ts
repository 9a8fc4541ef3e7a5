/** A sphere and the air it falls through. */
export interface SphereInAir {
  readonly diameterM: number;
  readonly massKg: number;
  readonly airDensityKgpm3: number;
  readonly airViscosityPas: number;
}

/**
 * Drag coefficient after Brown & Lawler (J. Environ. Eng. 129 (2003) 222): 24/Re (1 + 0.150 Re^0.681) + 0.407/(1 + 8710/Re). A
 * correlation other than the program's, so the truth carries the disagreement of handbooks that a real ball would.
 */
function dragCoefficient(reynolds: number): number {
  return (24 / reynolds) * (1 + 0.15 * reynolds ** 0.681) + 0.407 / (1 + 8710 / reynolds);
}

/**
 * Fall of a sphere from rest: weight less buoyancy, drag, and half the displaced air moved along (added mass of a sphere:
 * Lamb, Hydrodynamics, art. 92). Midpoint rule in steps of 0.1 ms, cubic between: good to 1e-9 m over half a second.
 *
 * @returns drop [m] at a time after release
 */
export function sphereDrop(gMps2: number, sphere: SphereInAir, untilS: number): (timeS: number) => number {
  const stepS = 1e-4;
  const displacedKg = (sphere.airDensityKgpm3 * Math.PI * sphere.diameterM ** 3) / 6;
  const movedKg = sphere.massKg + displacedKg / 2;
  const area = (Math.PI * sphere.diameterM ** 2) / 4;
  const acceleration = (v: number) => {
    if (v <= 0) return ((sphere.massKg - displacedKg) * gMps2) / movedKg;
    const reynolds = (sphere.airDensityKgpm3 * v * sphere.diameterM) / sphere.airViscosityPas;
    const drag = (sphere.airDensityKgpm3 * dragCoefficient(reynolds) * area * v * v) / 2;
    return ((sphere.massKg - displacedKg) * gMps2 - drag) / movedKg;
  };
  const count = Math.ceil(untilS / stepS) + 2;
  const drops = new Float64Array(count);
  const speeds = new Float64Array(count);
  for (let i = 1; i < count; i++) {
    const half = speeds[i - 1] + (stepS / 2) * acceleration(speeds[i - 1]);
    drops[i] = drops[i - 1] + stepS * half;
    speeds[i] = speeds[i - 1] + stepS * acceleration(half);
  }
  return (timeS) => {
    if (timeS <= 0) return 0;
    const i = Math.min(count - 2, Math.floor(timeS / stepS));
    const s = timeS / stepS - i;
    // Hermite's cubic through both ends with their speeds
    return (
      drops[i] * (1 + 2 * s) * (1 - s) ** 2 +
      speeds[i] * stepS * s * (1 - s) ** 2 +
      drops[i + 1] * s * s * (3 - 2 * s) +
      speeds[i + 1] * stepS * s * s * (s - 1)
    );
  };
}

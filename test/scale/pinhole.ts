/** A camera for truths: pinhole with a turned plane of motion and a radial lens, built forwards and apart from the code under test. */
export interface TrueRig {
  /** From the camera to where its axis meets the plane [m]; pixels per metre there. */
  readonly distanceM: number;
  readonly pxPerM: number;
  /** The upper end of the plane is nearer (+), its left side is nearer (+), the picture is turned clockwise (+) [deg]. */
  readonly pitchDeg: number;
  readonly yawDeg: number;
  readonly rollDeg: number;
  readonly centre: { readonly x: number; readonly y: number };
  readonly radiusPx: number;
  readonly k1: number;
  readonly k2: number;
}

export const squareRig: TrueRig = {
  distanceM: 2,
  pxPerM: 800,
  pitchDeg: 0,
  yawDeg: 0,
  rollDeg: 0,
  centre: { x: 319.5, y: 511.5 },
  radiusPx: Math.hypot(320, 512),
  k1: 0,
  k2: 0,
};

export const rigPicture = { widthPx: 640, heightPx: 1024 };

/** Pixel of a place (x right, y up, z towards the camera) [m] from the point where the axis meets the plane. */
export function seenBy(rig: TrueRig, x: number, y: number, z = 0): { x: number; y: number } {
  const rad = Math.PI / 180;
  const [p, w, r] = [rig.pitchDeg * rad, rig.yawDeg * rad, rig.rollDeg * rad];
  // Place in the camera's frame (right, down, away): turned about the vertical first, then about the horizontal.
  const [x1, z1] = [x * Math.cos(w) + z * Math.sin(w), x * Math.sin(w) - z * Math.cos(w)];
  const down = -y * Math.cos(p) - z1 * Math.sin(p);
  const away = rig.distanceM - y * Math.sin(p) + z1 * Math.cos(p);
  const f = rig.pxPerM * rig.distanceM;
  const [u, v] = [(f * x1) / away, (f * down) / away];
  const [a, b] = [u * Math.cos(r) - v * Math.sin(r), u * Math.sin(r) + v * Math.cos(r)];
  // Bisection for the distorted radius: slow and sure.
  const flat = Math.hypot(a, b) / rig.radiusPx;
  let [low, high] = [0, 2 * flat];
  for (let i = 0; i < 80; i++) {
    const middle = (low + high) / 2;
    const s = middle * middle;
    if (middle * (1 + rig.k1 * s + rig.k2 * s * s) < flat) low = middle;
    else high = middle;
  }
  const shrink = flat === 0 ? 1 : low / flat;
  return { x: rig.centre.x + a * shrink, y: rig.centre.y + b * shrink };
}

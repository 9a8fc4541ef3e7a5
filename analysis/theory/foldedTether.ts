/**
 * The folded tether of zero separation, one end fixed, in units of its length, mass and g. One family:
 *
 * With s = x/L fallen the falling arm has the mass A = (1 - s)/2 and hands (ds/dt)/2 of it a second over to the fold. The fold pulls
 * the arm down with γ/4·v² (momentum balance of the arm: A a = A + γ v²/4); γ = 1 gives back all of the kinetic energy that
 * arrives at the fold (energy form: Hamel 1949; Calkin & March, Am. J. Phys. 57 (1989) 154), γ = 0 none of it (momentum form: the tip
 * falls freely; after Cayley 1857). So γ is the share of the fold's energy that is kept. With α = 1 - s:
 *
 *   v² = 2(α^-γ - α)/(1 + γ)     a = 1 + γ v²/(2α)     t = √(2κ) ∫ cos^κ φ dφ from 0 to φ,  α = cos^2κ φ,  κ = 1/(1 + γ)
 *
 * An end weight μ (share of the tether's mass) is the same family: A = μ + (1 - s)/2 is the arm of a tether that is longer by 2μ,
 * followed only until it has fallen by 1.
 */
export interface FoldedFamily {
  /** Share of the fold's energy that is kept. */
  readonly gamma: number;
  /** What has been fallen and how, at a time in units of √(L/g). */
  at(time: number): FoldedState;
  /** Time at which the share s of the length has been fallen. */
  timeOf(share: number): number;
}

interface FoldedState {
  readonly share: number;
  readonly speed: number;
  readonly acceleration: number;
  /** ∂share/∂γ at this time. */
  readonly perGamma: number;
}

/** Less of the arm than this is a single link, not a tether: speed and acceleration stay what they are there. */
const leastArm = 1e-3;

const panels = 256;
/** Nodes and weights of Gauss-Legendre on (0, 1), three points. */
const nodes = [0.5 - Math.sqrt(0.15), 0.5, 0.5 + Math.sqrt(0.15)] as const;
const weights = [5 / 18, 8 / 18, 5 / 18] as const;

/** φ runs to π/2 as a parabola, so that the root of cos φ at the end becomes smooth. */
const angle = (x: number) => (Math.PI / 2) * x * (2 - x);
const anglePer = (x: number) => Math.PI * (1 - x);

/** @throws RangeError if γ is not above -1: the tether would never straighten */
export function foldedFamily(gamma: number): FoldedFamily {
  if (!(gamma > -1))
    throw new RangeError(`foldedFamily: the share of energy kept must be above -1, not ${gamma}`);
  const kappa = 1 / (1 + gamma);
  const unit = Math.sqrt(2 * kappa);

  /** ∫cos^κ and ∫cos^κ ln cos from x = a to b (one panel or a part of it). */
  const part = (a: number, b: number): readonly [number, number] => {
    let plain = 0;
    let withLog = 0;
    for (let k = 0; k < 3; k++) {
      const x = a + (b - a) * nodes[k];
      const log = logCos(angle(x));
      const f = weights[k] * Math.exp(kappa * log) * anglePer(x);
      plain += f;
      withLog += f * log;
    }
    return [(b - a) * plain, (b - a) * withLog];
  };
  const plainTo = new Float64Array(panels + 1);
  const withLogTo = new Float64Array(panels + 1);
  for (let i = 0; i < panels; i++) {
    const [plain, withLog] = part(i / panels, (i + 1) / panels);
    plainTo[i + 1] = plainTo[i] + plain;
    withLogTo[i + 1] = withLogTo[i] + withLog;
  }
  const whole = plainTo[panels];

  /** x at which the integral has a value, by Newton steps within its panel. */
  const place = (integral: number): number => {
    let low = 0;
    let high = panels;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (plainTo[middle] <= integral) low = middle;
      else high = middle;
    }
    const from = low / panels;
    let x = from + (integral - plainTo[low]) / (plainTo[low + 1] - plainTo[low]) / panels;
    // The integrand changes little within a panel: three steps reach rounding, the last panel's square root needs a few more.
    for (let k = 0; k < 8; k++) {
      const slope = Math.exp(kappa * logCos(angle(x))) * anglePer(x);
      if (slope < 1e-12) break;
      const step = (integral - plainTo[low] - part(from, x)[0]) / slope;
      x = Math.min((low + 1) / panels, Math.max(from, x + step));
      if (Math.abs(step) < 1e-15) break;
    }
    return x;
  };

  return {
    gamma,
    at(time) {
      if (time <= 0) return { share: 0, speed: 0, acceleration: 1, perGamma: 0 };
      const integral = time / unit;
      const ended = integral >= whole;
      const x = ended ? 1 : place(integral);
      const log = ended ? Number.NEGATIVE_INFINITY : logCos(angle(x));
      const arm = Math.exp(2 * kappa * log);
      const shown = Math.max(arm, leastArm);
      const speedSquared = 2 * kappa * (shown ** -gamma - shown);
      const state = {
        share: ended ? 1 : -Math.expm1(2 * kappa * log),
        speed: Math.sqrt(speedSquared),
        acceleration: 1 + (gamma * speedSquared) / (2 * shown),
      };
      if (ended) return { ...state, perGamma: 0 };
      // At a fixed time: ds/dκ = ∂s/∂κ|φ - v ∂t/∂κ|φ
      const low = Math.min(panels - 1, Math.floor(x * panels));
      const withLog = withLogTo[low] + part(low / panels, x)[1];
      const timePerKappa = time / (2 * kappa) + unit * withLog;
      const perKappa = -2 * arm * log - state.speed * timePerKappa;
      return { ...state, perGamma: -kappa * kappa * perKappa };
    },
    timeOf(share) {
      if (share <= 0) return 0;
      if (share >= 1) return unit * whole;
      // cos^2κ φ = 1 - s
      const cosine = (1 - share) ** (1 / (2 * kappa));
      const phi = Math.acos(cosine);
      // inverse of φ = π/2·x(2 - x)
      const x = 1 - Math.sqrt(Math.max(0, 1 - (2 * phi) / Math.PI));
      const low = Math.min(panels - 1, Math.floor(x * panels));
      return unit * (plainTo[low] + part(low / panels, x)[0]);
    },
  };
}

/** ln cos φ without loss near 0. */
function logCos(phi: number): number {
  const sine = Math.sin(phi);
  return sine < 0.7 ? 0.5 * Math.log1p(-sine * sine) : Math.log(Math.cos(phi));
}

/** Speed and acceleration after the share s of the length, in units of L and g; closed form. */
export function foldedLaw(
  gamma: number,
  share: number,
): { readonly speed: number; readonly acceleration: number } {
  const arm = 1 - share;
  const speedSquared = (2 * (arm ** -gamma - arm)) / (1 + gamma);
  return { speed: Math.sqrt(speedSquared), acceleration: 1 + (gamma * speedSquared) / (2 * arm) };
}

/** What the tether pulls with, in units of its weight m g, for the tip's speed in √(gL) and the share fallen. */
export interface FoldedForces {
  /** On the anchor: (1 + s)/2 + (2 - γ) v²/4, from the momentum balance of the whole. */
  readonly anchor: number;
  /** On the falling arm at the fold: γ v²/4. */
  readonly fold: number;
}

export function foldedForces(gamma: number, share: number, speed: number): FoldedForces {
  return { anchor: (1 + share) / 2 + ((2 - gamma) * speed * speed) / 4, fold: (gamma * speed * speed) / 4 };
}

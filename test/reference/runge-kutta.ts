/** Writes the time derivatives of `states` into `out`. */
export type Rates = (states: Float64Array, out: Float64Array) => void;

/** Advances `from` by `dtS` seconds into `to`. */
export type Stepper = (from: Float64Array, dtS: number, to: Float64Array) => void;

/**
 * The classical Runge-Kutta step of fourth order:
 *
 *   x(t + dt) = x + dt/6 (k1 + 2 k2 + 2 k3 + k4)
 */
export function rungeKuttaStep(length: number, rates: Rates): Stepper {
  const slopes = [0, 1, 2, 3].map(() => new Float64Array(length));
  const stage = new Float64Array(length);
  const fractions = [0, 0.5, 0.5, 1];
  return (from, dtS, to) => {
    for (let s = 0; s < 4; s++) {
      for (let i = 0; i < length; i++) stage[i] = from[i] + (s === 0 ? 0 : fractions[s] * dtS * slopes[s - 1][i]);
      rates(stage, slopes[s]);
    }
    for (let i = 0; i < length; i++) {
      to[i] = from[i] + (dtS / 6) * (slopes[0][i] + 2 * slopes[1][i] + 2 * slopes[2][i] + slopes[3][i]);
    }
  };
}

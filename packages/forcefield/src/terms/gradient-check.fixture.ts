/** Compares an analytic gradient with central differences. */

/** Energy at x; adds the gradient to `gradient`. */
export type EnergyAndGradient = (x: Float64Array, gradient: Float64Array) => number;

export interface GradientError {
  /** The largest deviation of a component as a multiple of what it may deviate. */
  readonly worst: number;
  readonly finite: boolean;
}

/**
 * Richardson-extrapolated central differences with steps h and 2h, kcal/mol/angstrom. A component passes (`worst` <= 1) when it agrees
 * within 1e-5 absolute or 1e-6 relative.
 */
export function gradientError(evaluate: EnergyAndGradient, x: Float64Array, h = 1e-4): GradientError {
  const analytic = new Float64Array(x.length);
  const scratch = new Float64Array(x.length);
  let finite = Number.isFinite(evaluate(x, analytic));
  const moved = x.slice();
  const at = (component: number, step: number): number => {
    moved[component] = x[component] + step;
    const energy = evaluate(moved, scratch);
    moved[component] = x[component];
    return energy;
  };
  let worst = 0;
  for (let n = 0; n < x.length; n++) {
    const near = (at(n, h) - at(n, -h)) / (2 * h), far = (at(n, 2 * h) - at(n, -2 * h)) / (4 * h);
    const numeric = (4 * near - far) / 3;
    const difference = Math.abs(numeric - analytic[n]);
    finite &&= Number.isFinite(analytic[n]);
    worst = Math.max(worst, difference / Math.max(1e-5, 1e-6 * Math.abs(numeric)));
  }
  return { worst, finite };
}

/** A seeded generator of numbers in [-1, 1): the multiplicative congruential generator of Park and Miller (1988). */
export function uniform(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48271) % 2147483647;
    return (2 * state) / 2147483647 - 1;
  };
}

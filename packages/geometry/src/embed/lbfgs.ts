/**
 * Limited-memory BFGS with a backtracking line search, for the cheap error functions of the embedding.
 *
 * Source: J. Nocedal, Math. Comput. 35, 773 (1980); sufficient decrease after L. Armijo, Pac. J. Math. 16, 1 (1966).
 */

const MEMORY = 6;

/** Value at x; writes the gradient. */
export type ErrorFunction = (x: Float64Array, gradient: Float64Array) => number;

/** When a descent stops, and how far one step may go. */
export interface DescentSettings {
  readonly iterations: number;
  /** Stops when no component of the gradient is larger. */
  readonly gradient: number;
  /** Stops when ten iterations lower the value by less than this. */
  readonly decrease: number;
  /** Largest move of one coordinate in one step, angstrom. */
  readonly stride: number;
}

/** Lowers `error` from x, in place; returns the value reached. */
export function descend(error: ErrorFunction, x: Float64Array, settings: DescentSettings): number {
  const size = x.length;
  const gradient = new Float64Array(size);
  const next = new Float64Array(size);
  const nextGradient = new Float64Array(size);
  const direction = new Float64Array(size);
  const steps = Array.from({ length: MEMORY }, () => new Float64Array(size));
  const changes = Array.from({ length: MEMORY }, () => new Float64Array(size));
  const inverse = new Float64Array(MEMORY);
  const alpha = new Float64Array(MEMORY);
  let stored = 0;
  let value = error(x, gradient);
  let earlier = value;
  for (let iteration = 0; iteration < settings.iterations; iteration++) {
    if (largest(gradient) < settings.gradient) break;
    if (iteration % 10 === 9) {
      if (earlier - value < settings.decrease) break;
      earlier = value;
    }
    for (let i = 0; i < size; i++) direction[i] = -gradient[i];
    const first = Math.max(0, stored - MEMORY);
    for (let m = stored - 1; m >= first; m--) {
      const at = m % MEMORY;
      alpha[at] = inverse[at] * dot(steps[at], direction);
      addScaled(direction, changes[at], -alpha[at]);
    }
    if (stored > 0) {
      const last = (stored - 1) % MEMORY;
      const scale = 1 / (inverse[last] * dot(changes[last], changes[last]));
      for (let i = 0; i < size; i++) direction[i] *= scale;
    }
    for (let m = first; m < stored; m++) {
      const at = m % MEMORY;
      addScaled(direction, steps[at], alpha[at] - inverse[at] * dot(changes[at], direction));
    }
    const slope = dot(direction, gradient);
    if (!(slope < 0)) {
      if (stored === 0) break;
      stored = 0;
      continue;
    }
    const reach = largest(direction);
    let length = Math.min(stored === 0 ? 0.1 / reach : 1, settings.stride / reach);
    let accepted = false;
    for (let trial = 0; trial < 12; trial++) {
      for (let i = 0; i < size; i++) next[i] = x[i] + length * direction[i];
      const nextValue = error(next, nextGradient);
      if (nextValue <= value + 1e-4 * length * slope) {
        const at = stored % MEMORY;
        const s = steps[at];
        const y = changes[at];
        let curvature = 0;
        for (let i = 0; i < size; i++) {
          s[i] = next[i] - x[i];
          y[i] = nextGradient[i] - gradient[i];
          curvature += s[i] * y[i];
        }
        if (curvature > 1e-12) {
          inverse[at] = 1 / curvature;
          stored++;
        }
        x.set(next);
        gradient.set(nextGradient);
        value = nextValue;
        accepted = true;
        break;
      }
      const parabola = (-slope * length * length) / (2 * (nextValue - value - slope * length));
      length = Math.min(0.5 * length, Math.max(0.1 * length, parabola));
      if (!(length > 1e-10)) break;
    }
    if (!accepted) {
      if (stored === 0) break;
      stored = 0;
    }
  }
  return value;
}

function dot(p: Float64Array, q: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < p.length; i++) sum += p[i] * q[i];
  return sum;
}

function addScaled(p: Float64Array, q: Float64Array, factor: number): void {
  for (let i = 0; i < p.length; i++) p[i] += factor * q[i];
}

function largest(p: Float64Array): number {
  let most = 0;
  for (let i = 0; i < p.length; i++) most = Math.max(most, Math.abs(p[i]));
  return most;
}

/**
 * A function of the torsion angle as a finite Fourier series:
 *
 *   f(phi) = c_0 + sum_k (c_k cos k phi + s_k sin k phi)
 */
import { TordialError } from '@tordial/geometry';

/** Coefficients by harmonic; both arrays have the same length, `sine[0]` is 0. */
export interface PeriodicSeries {
  readonly cosine: Float64Array;
  readonly sine: Float64Array;
}

/** The torsion potential sum_n V_n/2 (1 - cos n phi) of V_1, V_2, ... (any unit, which the series keeps). */
export function seriesOfBarriers(v: ArrayLike<number>): PeriodicSeries {
  const cosine = new Float64Array(v.length + 1);
  for (let n = 1; n <= v.length; n++) {
    cosine[0] += v[n - 1] / 2;
    cosine[n] = -v[n - 1] / 2;
  }
  return { cosine, sine: new Float64Array(cosine.length) };
}

/** The constant function. */
export function constantSeries(value: number): PeriodicSeries {
  return { cosine: Float64Array.of(value), sine: new Float64Array(1) };
}

/**
 * Interpolates `values` given at phi = start + 2 pi j / N (radians), j = 0 .. N - 1, by the discrete Fourier transform; the series passes
 * through every value. `harmonics` cuts it off earlier. Throws `series/samples` for none or non-finite values.
 */
export function seriesOfSamples(values: ArrayLike<number>, start = 0, harmonics = Math.floor(values.length / 2)): PeriodicSeries {
  const count = values.length;
  if (count === 0) throw new TordialError('series/samples', 'no values to interpolate');
  const top = Math.min(harmonics, Math.floor(count / 2));
  const cosine = new Float64Array(top + 1);
  const sine = new Float64Array(top + 1);
  for (let j = 0; j < count; j++) {
    if (!Number.isFinite(values[j])) throw new TordialError('series/samples', `value ${j} is ${values[j]}, not a number`);
    for (let k = 0; k <= top; k++) {
      const angle = (2 * Math.PI * ((j * k) % count)) / count;
      cosine[k] += values[j] * Math.cos(angle);
      sine[k] += values[j] * Math.sin(angle);
    }
  }
  for (let k = 0; k <= top; k++) {
    // the mean, and the alternating harmonic of an even number of samples, stand once and not with their mirror image
    const factor = k === 0 || 2 * k === count ? 1 / count : 2 / count;
    const c = cosine[k] * factor;
    const s = k === 0 || 2 * k === count ? 0 : sine[k] * factor;
    cosine[k] = c * Math.cos(k * start) - s * Math.sin(k * start);
    sine[k] = k === 0 ? 0 : s * Math.cos(k * start) + c * Math.sin(k * start);
  }
  return { cosine, sine };
}

/** The series of a periodic function (period 2 pi, radians) from `samples` equidistant values of it, up to `harmonics`, a quarter as many. */
export function seriesOfFunction(f: (phi: number) => number, samples = 512, harmonics = samples / 4): PeriodicSeries {
  const values = Float64Array.from({ length: samples }, (_, j) => f((2 * Math.PI * j) / samples));
  return seriesOfSamples(values, 0, harmonics);
}

/** Harmonics below `share` of the largest coefficient, the mean included, set to zero and the tail cut off, so that exact symmetries show. */
export function withoutNoise({ cosine, sine }: PeriodicSeries, share = 1e-12): PeriodicSeries {
  let largest = 0;
  for (let k = 0; k < cosine.length; k++) largest = Math.max(largest, Math.abs(cosine[k]), Math.abs(sine[k]));
  const keep = (value: number, k: number): number => (k === 0 || Math.abs(value) > share * largest ? value : 0);
  const c = cosine.map(keep);
  const s = sine.map(keep);
  let length = c.length;
  while (length > 1 && c[length - 1] === 0 && s[length - 1] === 0) length--;
  return { cosine: c.slice(0, length), sine: s.slice(0, length) };
}

/** The series times a number. */
export function scaledSeries({ cosine, sine }: PeriodicSeries, factor: number): PeriodicSeries {
  return { cosine: cosine.map((c) => c * factor), sine: sine.map((s) => s * factor) };
}

/** Value at phi (radians), or that of the derivative of the given order. */
export function seriesValue({ cosine, sine }: PeriodicSeries, phi: number, derivative = 0): number {
  let sum = derivative === 0 ? cosine[0] : 0;
  // each derivative turns the phase by a quarter and multiplies by k
  const quarter = (Math.PI / 2) * derivative;
  for (let k = 1; k < cosine.length; k++) {
    const angle = k * phi + quarter;
    sum += k ** derivative * (cosine[k] * Math.cos(angle) + sine[k] * Math.sin(angle));
  }
  return sum;
}

/** A minimum or maximum of a series. */
export interface SeriesExtremum {
  readonly kind: 'minimum' | 'maximum';
  /** Radians in [-pi, pi). */
  readonly angle: number;
  readonly value: number;
}

/** All extrema of a series, ascending by angle in [-pi, pi): bracketed on a grid of 16 points a harmonic, refined by bisection of the slope. */
export function extremaOfSeries(series: PeriodicSeries): SeriesExtremum[] {
  const grid = 16 * Math.max(8, series.cosine.length - 1);
  const slope = (phi: number): number => seriesValue(series, phi, 1);
  // the grid is shifted by an irrational part of its spacing, for symmetric extrema to fall between its points
  const at = (j: number): number => -Math.PI + (2 * Math.PI * (j - 0.381966)) / grid;
  const found: SeriesExtremum[] = [];
  for (let j = 0; j < grid; j++) {
    let a = at(j);
    let b = at(j + 1);
    const rising = slope(a) < 0;
    if (slope(a) === 0 || rising === slope(b) < 0) continue;
    for (let step = 0; step < 60; step++) {
      const middle = (a + b) / 2;
      if (slope(middle) < 0 === rising) a = middle;
      else b = middle;
    }
    const angle = (a + b) / 2;
    found.push({
      kind: rising ? 'minimum' : 'maximum',
      angle: angle < -Math.PI + 1e-12 ? angle + 2 * Math.PI : angle,
      value: seriesValue(series, angle),
    });
  }
  // -180 and 180 are one angle; rounding decides on which side it fell, and it is written as -180
  return found.map((e) => (e.angle > Math.PI - 1e-9 ? { ...e, angle: -Math.PI } : e)).sort((a, b) => a.angle - b.angle);
}

/** Share of a potential's height that a well must be deep to count: kinks of an envelope leave ripples in its series. */
const RIPPLE = 0.01;

/**
 * The extrema of a potential without its ripples: neighbouring extrema that differ by less than a hundredth of the potential's height are taken out in pairs,
 * the shallowest first. At least one well and one maximum stay.
 */
export function mainExtrema(series: PeriodicSeries): SeriesExtremum[] {
  const kept = extremaOfSeries(series);
  const values = kept.map(({ value }) => value);
  const least = RIPPLE * (Math.max(...values) - Math.min(...values));
  const step = (n: number): number => Math.abs(kept[(n + 1) % kept.length].value - kept[n].value);
  while (kept.length > 2) {
    const n = kept.reduce((best, _, at) => (step(at) < step(best) ? at : best), 0);
    if (step(n) >= least) break;
    // the pair may lie across the end of the turn
    kept.splice(n, 1);
    kept.splice(n === kept.length ? 0 : n, 1);
  }
  return kept;
}

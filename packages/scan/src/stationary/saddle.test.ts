import { TordialError } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { drive } from '../drive.js';
import { numericalHessian } from './hessian.js';
import { projectedModes, rigidMotions } from './projected-modes.js';
import { type SaddleOptions, stationaryPoint } from './saddle.js';

/** K. Muller and L. D. Brown, Theor. Chim. Acta 53, 75 (1979): four Gaussians in the plane, here embedded in three coordinates of one point. */
const MULLER_BROWN = {
  A: [-200, -100, -170, 15],
  a: [-1, -1, -6.5, 0.7],
  b: [0, 0, 11, 0.6],
  c: [-10, -10, -6.5, 0.7],
  x: [1, 0, -0.5, -1],
  y: [0, 0.5, 1.5, 1],
};

const surface = {
  atomCount: 1,
  evaluate(x: Float64Array, gradient?: Float64Array): number {
    let energy = (x[2] * x[2]) / 2;
    gradient?.fill(0);
    for (let k = 0; k < 4; k++) {
      const dx = x[0] - MULLER_BROWN.x[k];
      const dy = x[1] - MULLER_BROWN.y[k];
      const value = MULLER_BROWN.A[k] * Math.exp(MULLER_BROWN.a[k] * dx * dx + MULLER_BROWN.b[k] * dx * dy + MULLER_BROWN.c[k] * dy * dy);
      energy += value;
      if (!gradient) continue;
      gradient[0] += value * (2 * MULLER_BROWN.a[k] * dx + MULLER_BROWN.b[k] * dy);
      gradient[1] += value * (MULLER_BROWN.b[k] * dx + 2 * MULLER_BROWN.c[k] * dy);
    }
    if (gradient) gradient[2] = x[2];
    return energy;
  },
};

const find = (x: number, y: number, options: SaddleOptions = {}) =>
  drive(stationaryPoint(Float64Array.of(x, y, 0.1), { taken: () => [], maxStep: 0.1, tolerance: 1e-6, ...options }), surface);

describe('the surface of Muller and Brown', () => {
  // minima and saddle points as tabulated in the paper, to the three decimals printed there
  test.each([
    [-0.7, 0.5, -0.822, 0.624, -40.665],
    [0.3, 0.2, 0.212, 0.293, -72.249],
    [-0.9, 0.7, -0.822, 0.624, -40.665],
  ])('has a saddle near %f, %f', (x, y, xs, ys, energy) => {
    const found = find(x, y);
    expect(found.converged).toBe(true);
    expect(found.order).toBe(1);
    expect(found.coordinates[0]).toBeCloseTo(xs, 3);
    expect(found.coordinates[1]).toBeCloseTo(ys, 3);
    expect(found.energy).toBeCloseTo(energy, 3);
    expect(found.coordinates[2]).toBeCloseTo(0, 6);
  });

  test.each([
    [-0.5, 1.3, -0.558, 1.4417, -146.7],
    [0.5, 0.1, 0.623, 0.028, -108.167],
    [0, 0.4, -0.05, 0.467, -80.768],
  ])('has a minimum near %f, %f', (x, y, xs, ys, energy) => {
    const found = find(x, y, { order: 0 });
    expect(found.order).toBe(0);
    expect(found.coordinates[0]).toBeCloseTo(xs, 3);
    expect(found.coordinates[1]).toBeCloseTo(ys, 3);
    expect(Math.abs(found.energy - energy)).toBeLessThan(1e-3);
  });

  test('is climbed out of a minimum along the direction asked for, with one Hessian or one a step', () => {
    // from the second minimum up its soft mode
    for (const renewal of [1, 10, 1000]) {
      const found = find(0.5, 0.1, { follow: [Float64Array.of(-1, 0.6, 0)], renewal });
      expect(found.order).toBe(1);
      expect(found.energy).toBeCloseTo(-72.249, 3);
    }
  });
});

test('finds points of every order of a product of cosines', () => {
  // E = sum cos x_k: minima at pi, maxima at 0
  const cosines = {
    atomCount: 1,
    evaluate(x: Float64Array, gradient?: Float64Array) {
      for (let k = 0; k < 3; k++) if (gradient) gradient[k] = -Math.sin(x[k]);
      return Math.cos(x[0]) + Math.cos(x[1]) + Math.cos(x[2]);
    },
  };
  for (let order = 0; order < 3; order++) {
    const start = Float64Array.from({ length: 3 }, (_, k) => (k < order ? 0.4 : Math.PI - 0.5));
    const found = drive(stationaryPoint(start, { order, taken: () => [], tolerance: 1e-8 }), cosines);
    expect(found.order).toBe(order);
    found.coordinates.forEach((value, k) => {
      expect(value).toBeCloseTo(k < order ? 0 : Math.PI, 7);
    });
    expect(found.energy).toBeCloseTo(2 * order - 3, 12);
  }
});

describe('the Hessian by differences', () => {
  test('agrees with the analytic one of the surface', () => {
    const hessian = drive(numericalHessian(Float64Array.of(-0.822, 0.624, 0)), surface);
    const h = 1e-4;
    const at = (dx: number, dy: number) => surface.evaluate(Float64Array.of(-0.822 + dx, 0.624 + dy, 0));
    expect(hessian[0]).toBeCloseTo((at(h, 0) - 2 * at(0, 0) + at(-h, 0)) / h ** 2, 1);
    expect(hessian[1]).toBeCloseTo((at(h, h) - at(h, -h) - at(-h, h) + at(-h, -h)) / (4 * h * h), 1);
    expect(hessian[1]).toBe(hessian[3]);
    expect(hessian[8]).toBeCloseTo(1, 8);
  });

  test('says where a gradient is not finite', () => {
    const broken = { atomCount: 1, evaluate: (_: Float64Array, gradient?: Float64Array) => gradient?.fill(Number.NaN)[0] ?? 0 };
    expect(() => drive(numericalHessian(new Float64Array(3)), broken)).toThrow(TordialError);
  });
});

describe('projection', () => {
  test('counts 6 rigid motions, 5 of a line, 3 of an atom, orthonormal', () => {
    const bent = Float64Array.of(0, 0.7, -0.5, 0, 0, 0, 0, -0.7, -0.5);
    const line = Float64Array.of(1, 2, 3, 1.5, 3, 4.5, 2, 4, 6);
    const masses = [1.008, 15.999, 1.008];
    for (const weights of [undefined, masses]) {
      expect(rigidMotions(bent, weights)).toHaveLength(6);
      expect(rigidMotions(line, weights)).toHaveLength(5);
      const motions = rigidMotions(bent, weights);
      motions.forEach((p, i) => {
        motions.forEach((q, j) => {
          expect(p.reduce((sum, value, n) => sum + value * q[n], 0)).toBeCloseTo(i === j ? 1 : 0, 12);
        });
      });
    }
    expect(rigidMotions(Float64Array.of(1, 2, 3))).toHaveLength(3);
  });

  test('gives a diatomic its one frequency, k (1/m1 + 1/m2)', () => {
    const k = 500;
    const line = Float64Array.of(0, 0, 0, 0, 0, 1.1);
    const hessian = new Float64Array(36);
    for (const [i, j, sign] of [
      [2, 2, 1],
      [5, 5, 1],
      [2, 5, -1],
      [5, 2, -1],
    ])
      hessian[6 * i + j] = sign * k;
    const masses = [12, 16];
    const { eigenvalues } = projectedModes(hessian, rigidMotions(line, masses), masses);
    expect(eigenvalues).toHaveLength(1);
    expect(eigenvalues[0]).toBeCloseTo(k * (1 / 12 + 1 / 16), 9);
  });
});

test('refuses orders that are none', () => {
  expect(() => find(0, 0, { order: -1 })).toThrow(/order/);
  expect(() => find(0, 0, { order: 0, follow: [new Float64Array(3)] })).toThrow(/follow/);
});

import { TordialError } from '@tordial/geometry';
import { expect, test } from 'vitest';
import { alkane, modelPotential, tetrahedral } from './chain.fixture.js';
import { drive, driveAsync } from './drive.js';
import { minimise, relax } from './minimise.js';
import { modelHessian } from './model-hessian.js';

const skeletons = [
  [0, 1, 2],
  [0, 1, 2, 3, 4],
  [0, 0, 1, 3, 3, 4, 6],
  [0, 1, 2, 3, 4, 5, 6, 7, 8, 9],
];

test('relaxes alkanes of several sizes to a stationary point of lower energy', () => {
  for (const skeleton of skeletons) {
    const molecule = alkane(skeleton);
    const potential = modelPotential(molecule);
    const x = tetrahedral(molecule, Math.PI);
    const relaxed = relax(molecule, potential, x);
    const gradient = new Float64Array(x.length);
    expect(relaxed.energy).toBe(potential.evaluate(relaxed.coordinates, gradient));
    expect(relaxed.energy).toBeLessThan(potential.evaluate(x));
    expect(relaxed.converged).toBe(true);
    expect(Math.max(...gradient.map(Math.abs))).toBeLessThanOrEqual(1e-3);
    expect(relaxed.evaluations).toBeLessThan(200);
  }
});

test('survives a start with atoms far from where they belong', () => {
  const molecule = alkane([0, 1, 2, 3]);
  const potential = modelPotential(molecule);
  // every coordinate off by up to 0.6 angstrom, from a linear congruential generator (Park and Miller 1988)
  let state = 11;
  const x = tetrahedral(molecule, Math.PI).map((value) => {
    state = (state * 48271) % 2147483647;
    return value + 1.2 * (state / 2147483647 - 0.5);
  });
  const relaxed = relax(molecule, potential, x);
  expect(relaxed.converged).toBe(true);
  expect(relaxed.energy).toBeLessThan(20);
});

// a quadratic function has its minimum where linear algebra puts it: diag(k) (x - c) = 0
test('finds the minimum of a quadratic function without a preconditioner', () => {
  const molecule = alkane([0, 1, 2]);
  const length = 3 * molecule.atomCount;
  const stiffness = Float64Array.from({ length }, (_, k) => 10 ** ((2 * k) / length));
  const centre = Float64Array.from({ length }, (_, k) => Math.sin(k));
  const quadratic = {
    atomCount: molecule.atomCount,
    evaluate: (x: Float64Array, gradient?: Float64Array) => {
      let energy = 0;
      for (let k = 0; k < length; k++) {
        const off = x[k] - centre[k];
        energy += 0.5 * stiffness[k] * off * off;
        if (gradient) gradient[k] = stiffness[k] * off;
      }
      return energy;
    },
  };
  const none = { solve: (v: Float64Array, out: Float64Array) => out.set(v) };
  const relaxed = drive(minimise(tetrahedral(molecule, Math.PI), none, { tolerance: 1e-6 }), quadratic);
  expect(relaxed.evaluations).toBeLessThan(300);
  expect(relaxed.converged).toBe(true);
  relaxed.coordinates.forEach((value, k) => {
    expect(Math.abs(value - centre[k])).toBeLessThanOrEqual(1e-6 / stiffness[k] + 1e-12);
  });
});

test('a potential that answers later gives the same bytes', async () => {
  const molecule = alkane([0, 1, 2, 3]);
  const potential = modelPotential(molecule);
  const x = tetrahedral(molecule, 3);
  const later = {
    atomCount: molecule.atomCount,
    evaluate: (at: Float64Array) => {
      const gradient = new Float64Array(at.length);
      return Promise.resolve({ energy: potential.evaluate(at, gradient), gradient });
    },
  };
  const now = relax(molecule, potential, x);
  const then = await driveAsync(minimise(x, modelHessian(molecule)), later);
  expect(then.energy).toBe(now.energy);
  expect(then.coordinates).toEqual(now.coordinates);
});

test('says so when the energy is not finite, when sizes differ and when evaluations run out', () => {
  const molecule = alkane([0, 1, 2]);
  const potential = modelPotential(molecule);
  const x = tetrahedral(molecule, Math.PI);
  const broken = { atomCount: molecule.atomCount, evaluate: () => Number.NaN };
  expect(codeOf(() => relax(molecule, broken, x))).toBe('scan/energy');
  expect(codeOf(() => relax(molecule, potential, x.subarray(3)))).toBe('potential/atoms');
  expect(relax(molecule, potential, x, { maxEvaluations: 3 })).toMatchObject({ converged: false, evaluations: 3 });
});

function codeOf(run: () => unknown): string {
  try {
    run();
  } catch (error) {
    if (error instanceof TordialError) return error.code;
    throw error;
  }
  return 'nothing thrown';
}

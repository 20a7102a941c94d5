import { mmff94 } from '@tordial/forcefield';
import { embed, moleculeFromSmiles, torsion } from '@tordial/geometry';
import { CholeskyDecomposition, EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { drivenRotor, heldAt } from './driven-rotor.js';
import { type Constraint, relax } from './minimise.js';
import { modelHessian } from './model-hessian.js';
import { relaxAt } from './relax-at.js';
import type { Torsion } from './rotors/defining-torsion.js';

/** P^-1 as a dense matrix. */
function inverseModel(model: ReturnType<typeof modelHessian>, length: number): Matrix {
  const inverse = Matrix.zeros(length, length);
  const unit = new Float64Array(length);
  const column = new Float64Array(length);
  for (let k = 0; k < length; k++) {
    unit.fill(0);
    unit[k] = 1;
    model.solve(unit, column);
    for (let m = 0; m < length; m++) inverse.set(m, k, column[m]);
  }
  return inverse;
}

/** Curvatures of the energy in units of the model's, ascending: the eigenvalues of P^-1 H, H by central differences. */
function spectrum(smiles: string, held?: { torsion: Torsion; angle: number }): { values: number[]; inverse: Matrix } {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule);
  const free = relax(molecule, potential, embed(molecule), { tolerance: 1e-5 }).coordinates;
  const x = held ? relaxAt(molecule, potential, held.torsion, held.angle, free, { tolerance: 1e-5 }).coordinates : free;
  const constraint: Constraint | null = held ? heldAt(drivenRotor(molecule, held.torsion), torsion(x, ...held.torsion)) : null;
  const length = x.length;
  const gradientAt = (k: number, shift: number): Float64Array => {
    const moved = x.slice();
    moved[k] += shift;
    constraint?.retract(moved);
    const gradient = new Float64Array(length);
    potential.evaluate(moved, gradient);
    constraint?.reduce(moved, gradient);
    return gradient;
  };
  const hessian = Matrix.zeros(length, length);
  for (let k = 0; k < length; k++) {
    const up = gradientAt(k, 1e-4);
    const down = gradientAt(k, -1e-4);
    for (let m = 0; m < length; m++) {
      hessian.set(m, k, hessian.get(m, k) + (up[m] - down[m]) / 4e-4);
      hessian.set(k, m, hessian.get(k, m) + (up[m] - down[m]) / 4e-4);
    }
  }
  const model = modelHessian(molecule, held?.torsion ?? null);
  model.follow(x);
  const inverse = inverseModel(model, length);
  const symmetric = Matrix.add(inverse, inverse.transpose()).mul(0.5);
  const root = new CholeskyDecomposition(symmetric).lowerTriangularMatrix;
  const product = root.transpose().mmul(hessian).mmul(root);
  const { realEigenvalues } = new EigenvalueDecomposition(Matrix.add(product, product.transpose()).mul(0.5), { assumeSymmetric: true });
  return { values: realEigenvalues.sort((p, q) => p - q), inverse };
}

describe('the model Hessian', () => {
  test.each(['CCCC', 'c1ccccc1C', 'CC(=O)OC', 'CC#CC', 'CNC(C)=O'])('is near the real one at a minimum of %s', (smiles) => {
    const { values, inverse } = spectrum(smiles);
    // translations and rotations cost nothing; about a straight chain a turn costs next to nothing
    const inner = values.filter((value) => Math.abs(value) > 0.01);
    expect(values.length - inner.length).toBeGreaterThanOrEqual(6);
    expect(values.length - inner.length).toBeLessThanOrEqual(7);
    expect(inner[0]).toBeGreaterThan(0.05);
    expect(inner[inner.length - 1]).toBeLessThan(6);
    expect(Matrix.sub(inverse, inverse.transpose()).abs().max()).toBeLessThan(1e-8 * inverse.max());
  });

  test('is near that of the energy with a torsion held', () => {
    const { values } = spectrum('CC(=O)OC', { torsion: [0, 1, 3, 4], angle: 70 });
    // the turn of the held rotor is the seventh motion without resistance
    const inner = values.filter((value) => Math.abs(value) > 0.01);
    expect(values.length - inner.length).toBe(7);
    expect(inner[0]).toBeGreaterThan(0.05);
    expect(inner[inner.length - 1]).toBeLessThan(6);
  });

  test('is made anew when bonds turn, and not when all moves along', () => {
    const molecule = moleculeFromSmiles('CCO');
    const x = embed(molecule);
    const model = modelHessian(molecule);
    expect(model.follow(x)).toBe(true);
    expect(model.follow(x)).toBe(false);
    expect(model.follow(x.map((value) => value + 5))).toBe(false);
    const moved = x.slice();
    moved[0] += 0.1;
    expect(model.follow(moved)).toBe(true);
  });

  test('serves molecules of separate fragments', () => {
    for (const smiles of ['O.CO', '[Na+].[Cl-]']) {
      const molecule = moleculeFromSmiles(smiles);
      const model = modelHessian(molecule);
      model.follow(embed(molecule));
      const inverse = inverseModel(model, 3 * molecule.atomCount);
      const { realEigenvalues } = new EigenvalueDecomposition(inverse, { assumeSymmetric: true });
      expect(Math.min(...realEigenvalues)).toBeGreaterThan(0);
      expect(Math.max(...realEigenvalues)).toBeLessThanOrEqual(1.001);
    }
  });
});

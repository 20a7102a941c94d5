import { mmff94 } from '@tordial/forcefield';
import { degrees, embed, moleculeFromSmiles, radians, torsion } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { alkane, modelPotential, tetrahedral } from './chain.fixture.js';
import { relax } from './minimise.js';
import { relaxAt } from './relax-at.js';

const molecule = alkane([0, 1, 2, 3, 2]);
const potential = modelPotential(molecule);
const atoms = [0, 1, 2, 3] as const;
const start = relax(molecule, potential, tetrahedral(molecule, Math.PI)).coordinates;

describe('a relaxation with the torsion held', () => {
  test('keeps the angle within 1e-6 degree and leaves no tangent gradient', () => {
    for (const angle of [-180, -77.7, -0.001, 0, 45, 135, 179.9999]) {
      const held = relaxAt(molecule, potential, atoms, angle, start);
      const off = degrees(torsion(held.coordinates, ...atoms)) - angle;
      expect(Math.abs(off - 360 * Math.round(off / 360))).toBeLessThan(1e-6);
      expect(held.converged).toBe(true);
      // what is left of the gradient is along dphi/dx, here by central differences of the angle itself
      const x = held.coordinates.slice();
      const slope = x.map((value, k) => {
        x[k] = value + 1e-5;
        const up = torsion(x, ...atoms);
        x[k] = value - 1e-5;
        const down = torsion(x, ...atoms);
        x[k] = value;
        const rise = up - down;
        return (rise - 2 * Math.PI * Math.round(rise / (2 * Math.PI))) / 2e-5;
      });
      const gradient = new Float64Array(x.length);
      potential.evaluate(x, gradient);
      const square = slope.reduce((sum, value) => sum + value * value, 0);
      const along = slope.reduce((sum, value, k) => sum + value * gradient[k], 0) / square;
      const tangent = gradient.map((value, k) => Math.abs(value - along * slope[k]));
      expect(Math.max(...tangent)).toBeLessThan(1.01e-3);
      expect(Math.abs(Math.max(...tangent) - held.gradientMax)).toBeLessThan(1e-5);
    }
  });

  test('gives a driving torque that is the slope of the relaxed energy', () => {
    const step = 0.2;
    for (const angle of [-150, -95, -20, 33, 100]) {
      const at = (shift: number, from = start) => relaxAt(molecule, potential, atoms, angle + shift, from, { tolerance: 1e-7 });
      const held = at(0);
      const [back2, back, ahead, ahead2] = [-2, -1, 1, 2].map((n) => at(n * step, held.coordinates).energy);
      // fourth-order central difference
      const slope = (8 * (ahead - back) - (ahead2 - back2)) / (12 * radians(step));
      expect(Math.abs(held.torque - slope)).toBeLessThan(1e-5);
      // at the tolerance of a scan the torque is as good as a scan needs
      const loose = relaxAt(molecule, potential, atoms, angle, start);
      expect(Math.abs(loose.torque - slope)).toBeLessThan(0.02);
    }
  });

  test('gives the same energy whichever end the torsion is written from', () => {
    const forwards = relaxAt(molecule, potential, [0, 1, 2, 3], 40, start, { tolerance: 1e-6 });
    const backwards = relaxAt(molecule, potential, [3, 2, 1, 0], 40, start, { tolerance: 1e-6 });
    expect(backwards.energy).toBeCloseTo(forwards.energy, 8);
    expect(backwards.torque).toBeCloseTo(forwards.torque, 5);
  });

  // an ion beside the molecule feels whether one side turns or the other: the constraint must return by the turn that its gradient means
  test.each([[[6, 0, 1, 2]], [[2, 1, 0, 6]]] as const)('converges beside a separate fragment, driven as %j', (asked) => {
    const salt = moleculeFromSmiles('NCC(=O)[O-].[Na+]');
    const field = mmff94(salt);
    const from = relax(salt, field, embed(salt)).coordinates;
    for (const angle of [-180, -120, -60, 0, 60]) {
      const held = relaxAt(salt, field, asked, angle, from);
      expect(held.converged).toBe(true);
      expect(held.evaluations).toBeLessThan(400);
    }
  });
});

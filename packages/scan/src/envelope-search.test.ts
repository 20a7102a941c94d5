import { mmff94 } from '@tordial/forcefield';
import { type Coordinates, embedMany, moleculeFromSmiles } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { alkane, modelPotential, tetrahedral } from './chain.fixture.js';
import { relax } from './minimise.js';
import { energyAt, profileCurve } from './profile-curve.js';
import { relaxAt } from './relax-at.js';
import type { Torsion } from './rotors/defining-torsion.js';
import { scanRotor } from './scan-rotor.js';

function prepared(smiles: string, conformers: number, seed = 1) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule);
  const starts = embedMany(molecule, conformers, { seed }).map((x) => relax(molecule, potential, x).coordinates);
  return { molecule, potential, starts };
}

describe('the envelope', () => {
  test.each([
    ['OCCO', [0, 1, 2, 3]],
    ['CCSCC', [0, 1, 2, 3]],
    ['CNC(C)=O', [0, 1, 2, 4]],
    ['CC(=O)Nc1ccc(O)cc1', [1, 3, 4, 5]],
  ] as [string, Torsion][])('of %s does not depend on the starts', (smiles, torsion) => {
    const one = prepared(smiles, 1, 5);
    const several = prepared(smiles, 6);
    const first = scanRotor(one.molecule, one.potential, torsion, { starts: one.starts, step: 15 });
    const second = scanRotor(several.molecule, several.potential, torsion, { starts: several.starts, step: 15 });
    first.points.forEach(({ energy }, n) => {
      expect(Math.abs(energy - second.points[n].energy)).toBeLessThan(2e-3);
    });
  });

  test('of an amide lies up to several kcal/mol below a single sweep, which keeps to the branch it is on', () => {
    const { molecule, potential, starts } = prepared('CNC(C)=O', 1);
    const sweep = scanRotor(molecule, potential, [0, 1, 2, 4], { starts, search: 'sweep' });
    const envelope = scanRotor(molecule, potential, [0, 1, 2, 4], { starts });
    const gains = sweep.points.map(({ energy }, n) => energy - envelope.points[n].energy);
    expect(Math.min(...gains)).toBeGreaterThan(-1e-3);
    expect(Math.max(...gains)).toBeGreaterThan(1);
  });

  test('has crossings where both branches hold the same energy, and barriers with no torque', () => {
    const { molecule, potential, starts } = prepared('CCSCC', 3);
    const profile = scanRotor(molecule, potential, [0, 1, 2, 3], { starts });
    const curve = profileCurve(profile.points);
    const kinds = profile.stationaryPoints.map(({ kind }) => kind === 'well');
    kinds.forEach((isWell, n) => {
      expect(isWell).not.toBe(kinds[(n + 1) % kinds.length]);
    });
    expect(profile.stationaryPoints.some(({ kind }) => kind === 'crossing')).toBe(true);
    for (const { kind, angle, energy, torque, coordinates } of profile.stationaryPoints) {
      expect(Math.abs(energy - energyAt(curve, angle))).toBeLessThan(2e-3);
      if (kind !== 'crossing') expect(Math.abs(torque)).toBeLessThanOrEqual(2e-3);
      if (kind === 'well') expect(relax(molecule, potential, coordinates).energy).toBeGreaterThan(energy - 1e-4);
    }
  });
});

describe('mirror images', () => {
  test('serve a grid that holds no opposite angles as well', () => {
    const { molecule, potential, starts } = prepared('OCCO', 1);
    const shifted = scanRotor(molecule, potential, [0, 1, 2, 3], { starts, step: 15, startAngle: -172 });
    for (const { angle, coordinates, energy } of shifted.points) {
      // the mirror image of each point, turned on to the nearest grid angle, leads no lower
      const image = coordinates.map((value, k) => (k % 3 === 1 ? -value : value));
      const nearest = shifted.points.reduce((best, point) => (Math.abs(point.angle + angle) < Math.abs(best.angle + angle) ? point : best));
      const { energy: other } = relaxAt(molecule, potential, [0, 1, 2, 3], nearest.angle, image);
      expect(nearest.energy).toBeLessThan(other + 2e-3);
      expect(Number.isFinite(energy)).toBe(true);
    }
  });

  test('are not used where a stereocentre is fixed', () => {
    const { molecule, potential, starts } = prepared('C[C@H](F)CO', 2);
    const { points } = scanRotor(molecule, potential, [0, 1, 3, 4], { starts, step: 15 });
    const apart = points.map(({ angle, energy }) => {
      const opposite = points.find((point) => point.angle === (angle === -180 ? -180 : -angle + 0));
      return Math.abs(energy - (opposite?.energy ?? energy));
    });
    expect(Math.max(...apart)).toBeGreaterThan(0.5);
  });

  test('are not used when the potential tells them apart, and the result says so', () => {
    const molecule = alkane([0, 1, 2]);
    const plain = modelPotential(molecule);
    // a field that favours one sense of the torsion 0-1-2-3 by its triple product
    const handed = {
      atomCount: plain.atomCount,
      evaluate: (x: Coordinates, gradient?: Float64Array) => {
        const at = (i: number) => [0, 1, 2].map((k) => x[3 * i + k] - x[3 + k]);
        const [u, v, w] = [at(0), at(2), at(3)];
        const cross = (p: number[], q: number[]) => [p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]];
        const energy = plain.evaluate(x, gradient);
        const parts = [cross(v, w), cross(w, u), cross(u, v)];
        if (gradient)
          [0, 2, 3].forEach((i, n) => {
            for (let k = 0; k < 3; k++) {
              gradient[3 * i + k] += 0.3 * parts[n][k];
              gradient[3 + k] -= 0.3 * parts[n][k];
            }
          });
        return energy + 0.3 * (u[0] * parts[0][0] + u[1] * parts[0][1] + u[2] * parts[0][2]);
      },
    };
    const starts = [relax(molecule, handed, tetrahedral(molecule, 2)).coordinates];
    const profile = scanRotor(molecule, handed, [0, 1, 2, 3], { starts, step: 15 });
    expect(profile.notes.map(({ code }) => code)).toContain('scan/handed-potential');
    const [minus, plus] = [-60, 60].map((angle) => profile.points.find((point) => point.angle === angle)?.energy ?? Number.NaN);
    expect(Math.abs(plus - minus)).toBeGreaterThan(0.5);
  });
});

test('a potential that fails beyond an angle ends the branch there, and the scan says which angle it missed', () => {
  const molecule = alkane([0, 1, 2]);
  const plain = modelPotential(molecule);
  const starts = [relax(molecule, plain, tetrahedral(molecule, Math.PI)).coordinates];
  const walled = {
    atomCount: plain.atomCount,
    evaluate: (x: Coordinates, gradient?: Float64Array) => {
      const energy = plain.evaluate(x, gradient);
      // no energy where the ends of the chain come near: about the eclipsed arrangement
      return Math.hypot(x[0] - x[9], x[1] - x[10], x[2] - x[11]) < 3 ? Number.NaN : energy;
    },
  };
  expect(() => scanRotor(molecule, walled, [0, 1, 2, 3], { starts })).toThrow(expect.objectContaining({ code: 'scan/unreached' }));
  const broken = { atomCount: plain.atomCount, evaluate: () => Number.NaN };
  expect(() => scanRotor(molecule, broken, [0, 1, 2, 3], { starts })).toThrow(expect.objectContaining({ code: 'scan/energy' }));
});

test('a point that does not converge is kept, marked and noted', () => {
  const molecule = alkane([0, 1, 2, 3]);
  const potential = modelPotential(molecule);
  const starts = [relax(molecule, potential, tetrahedral(molecule, Math.PI)).coordinates];
  const { points, notes } = scanRotor(molecule, potential, [0, 1, 2, 3], { starts, step: 30, maxEvaluations: 3 });
  const loose = points.filter(({ converged }) => !converged);
  expect(loose.length).toBeGreaterThan(0);
  expect(notes.filter(({ code }) => code === 'scan/not-converged')).toHaveLength(loose.length);
});

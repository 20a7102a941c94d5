import { mmff94 } from '@tordial/forcefield';
import { degrees, moleculeFromSmiles, torsion, wrapDegrees } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { conformers } from './conformers.js';
import { energyAt, profileCurve, torqueAt } from './profile-curve.js';
import { relaxAt } from './relax-at.js';
import type { Torsion } from './rotors/defining-torsion.js';
import { scanRotor } from './scan-rotor.js';
import type { ScanOptions } from './scan-task.js';

function ringScan(smiles: string, atoms: Torsion, options: Omit<ScanOptions, 'starts'>, count = 3) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule);
  const starts = conformers(molecule, potential, { count, seed: 1 }).conformers.map(({ coordinates }) => coordinates);
  return { molecule, potential, starts, profile: scanRotor(molecule, potential, atoms, { starts, ...options }) };
}

describe('a ring torsion driven over a range', () => {
  const atoms: Torsion = [0, 1, 2, 3];
  const { molecule, potential, profile } = ringScan('C1CCCCC1C', atoms, { range: [-60, 60], step: 10 });

  test('is held within 1e-6 degree of each grid angle and relaxed within tolerance', () => {
    expect(profile.points.map(({ angle }) => angle)).toEqual(Array.from({ length: 13 }, (_, n) => 10 * n - 60));
    for (const { angle, coordinates, converged, residual, energy } of profile.points) {
      expect(Math.abs(wrapDegrees(degrees(torsion(coordinates, 0, 1, 2, 3)) - angle))).toBeLessThan(1e-6);
      expect(converged).toBe(true);
      expect(residual).toBeLessThanOrEqual(1e-3);
      expect(potential.evaluate(coordinates)).toBeCloseTo(energy, 8);
    }
  });

  test('has the slope of its branch as driving torque', () => {
    const h = 0.05;
    for (const { angle, torque, coordinates } of profile.points) {
      const [up, down] = [h, -h].map(
        (by) => relaxAt(molecule, potential, atoms, angle + by, coordinates, { tolerance: 1e-5, maxEvaluations: 3000 }).energy,
      );
      expect(Math.abs((up - down) / ((2 * h * Math.PI) / 180) - torque)).toBeLessThan(0.02);
    }
  });

  test('flips an achiral ring symmetrically, the chair at either end', () => {
    const first = profile.points[0];
    profile.points.forEach(({ energy }, n) => {
      expect(profile.points[12 - n].energy).toBe(energy);
    });
    const wells = profile.stationaryPoints.filter(({ kind }) => kind === 'well');
    const lowest = Math.min(...wells.map(({ energy }) => energy));
    expect(wells.filter(({ energy }) => energy - lowest < 1e-3).map(({ angle }) => Math.round(Math.abs(angle) / 5) * 5)).toEqual([55, 55]);
    expect(first.energy - lowest).toBeLessThan(1);
  });

  test('is an open curve', () => {
    const curve = profileCurve(profile.points, { open: true });
    expect(energyAt(curve, 60)).toBeCloseTo(profile.points[12].energy, 10);
    expect(torqueAt(curve, -60)).toBeCloseTo(profile.points[0].torque, 10);
    expect(() => energyAt(curve, 61)).toThrow(/covers -60 to 60/);
    expect(curve.pieces.every(({ point }) => point < 12)).toBe(true);
  });
});

test('a ring that would break keeps what was reached and says where it stops', () => {
  const { profile } = ringScan('C1CCCCC1', [0, 1, 2, 3], { range: [0, 170], step: 10 });
  const last = profile.points[profile.points.length - 1];
  expect(last.angle).toBeGreaterThanOrEqual(80);
  expect(last.angle).toBeLessThan(170);
  const note = profile.notes.find(({ code }) => code === 'scan/ring-broken');
  expect(note?.message).toMatch(/would break/);
});

test('a range out of reach is an error that says why', () => {
  expect(() => ringScan('C1CCCC1', [0, 1, 2, 3], { range: [0, 45] })).toThrow(/do not divide the range/);
  expect(() => ringScan('C1CCCC1', [0, 1, 2, 3], { range: [120, 170] })).toThrow(/would break/);
});

test('starts from mirror images where those lie within the range: both chairs of cyclohexanol are found', () => {
  const { profile } = ringScan('OC1CCCCC1', [0, 1, 2, 3], { range: [-180, -40], step: 20 }, 8);
  const wells = profile.stationaryPoints.filter(({ kind }) => kind === 'well');
  const [equatorial, axial] = [-175, -70].map((angle) => wells.find((well) => Math.abs(well.angle - angle) < 15)?.energy ?? Number.NaN);
  // the A value of OH is 0.6 to 1.0 kcal/mol (E. L. Eliel, Stereochemistry of Organic Compounds; from memory), in a vacuum less
  expect(Math.abs(axial - equatorial)).toBeLessThan(1);
});

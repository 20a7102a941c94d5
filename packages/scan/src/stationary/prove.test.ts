import { mmff94 } from '@tordial/forcefield';
import { moleculeFromSmiles } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { conformers } from '../conformers.js';
import { drive } from '../drive.js';
import { scanRotor } from '../scan-rotor.js';
import { proof } from './prove.js';

function proved(smiles: string, torsion: readonly [number, number, number, number], step = 15) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule, { variant: 'MMFF94s' });
  const starts = conformers(molecule, potential, { count: 4 }).conformers.map(({ coordinates }) => coordinates);
  const profile = scanRotor(molecule, potential, torsion, { starts, step });
  const { points, notes } = drive(proof(molecule, profile), potential);
  return { molecule, profile, points, notes, lowest: Math.min(...points.map(({ energy }) => energy)) };
}

describe('MMFF94s wells and saddles', () => {
  test.each([
    ['ethane', 'CC', [2, 0, 1, 5], 6],
    ['butane', 'CCCC', [0, 1, 2, 3], 6],
    ['biphenyl', 'c1ccccc1-c1ccccc1', [0, 5, 6, 7], 8],
  ] as const)('of %s are proved to be that, each saddle by its one negative mode and both paths down', (_, smiles, torsion, count) => {
    const { profile, points, notes } = proved(smiles, torsion);
    expect(points).toHaveLength(count);
    expect(notes).toEqual([]);
    points.forEach((point, n) => {
      const { kind, energy } = profile.stationaryPoints[n];
      expect(point.of).toBe(n);
      expect(point.converged).toBe(true);
      expect(point.gradientMax).toBeLessThanOrEqual(1e-4);
      expect(Math.abs(point.energy - energy)).toBeLessThan(1e-3);
      expect(point.order).toBe(kind === 'well' ? 0 : 1);
      expect(point.verdict).toBe(kind === 'well' ? 'minimum' : 'saddle');
      if (kind === 'well') return;
      expect(point.overlap).toBeGreaterThan(0.95);
      expect(point.motion?.kind).toBe('rotor');
      expect(point.links).toBe(1);
      expect(point.ends?.map(({ well }) => well).sort()).toEqual([(n + count - 1) % count, (n + 1) % count].sort());
    });
  });

  test('of ethane are one minimum with its hydrogens exchanged; the gauche wells of butane are two mirror images', () => {
    const wells = ({ points }: ReturnType<typeof proved>) => points.filter(({ kind }) => kind === 'well').map(({ sameAs }) => sameAs);
    expect(new Set(wells(proved('CC', [2, 0, 1, 5])))).toHaveProperty('size', 1);
    expect(new Set(wells(proved('CCCC', [0, 1, 2, 3])))).toHaveProperty('size', 3);
  });
});

test('behind a crossing of branches stands a saddle that may lie well above it: two methyls pass each other', () => {
  const { profile, points, lowest } = proved('Cc1ccccc1-c1ccccc1C', [1, 6, 7, 12]);
  const crossings = points.filter(({ kind }) => kind === 'crossing');
  expect(crossings.length).toBe(2);
  for (const point of crossings) {
    expect(point.verdict).toBe('saddle');
    expect(point.order).toBe(1);
    expect(point.overlap).toBeGreaterThan(0.9);
    expect(point.energy).toBeGreaterThan(profile.stationaryPoints[point.of].energy + 1);
    // the saddle stands where the crossing does, not on the other way round the turn
    expect(Math.cos(((point.angle - profile.stationaryPoints[point.of].angle) * Math.PI) / 180)).toBeGreaterThan(0.8);
  }
  expect(Math.min(...crossings.map(({ energy }) => energy)) - lowest).toBeGreaterThan(20);
});

test('a way that inverts nitrogen is told from one that only rotates', () => {
  const { points } = proved('NC', [2, 0, 1, 4]);
  expect(
    points.filter(({ kind }) => kind === 'barrier').every(({ motion, inverts }) => motion?.kind === 'rotor' && inverts.length === 0),
  ).toBe(true);
  const amine = proved('OCCN', [0, 1, 2, 3]);
  const inverted = amine.points.filter(({ motion }) => motion?.kind === 'inversion');
  expect(inverted.length).toBeGreaterThan(0);
  for (const { inverts, overlap, links } of inverted) {
    expect(overlap).toBeLessThan(0.3);
    expect(inverts.length === 1 || links > 1).toBe(true);
  }
});

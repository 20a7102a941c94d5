import { createMolecule, degrees, radians, TordialError, torsion } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { alkane, modelPotential, tetrahedral } from './chain.fixture.js';
import { relax } from './minimise.js';
import { energyAt, profileCurve, torqueAt } from './profile-curve.js';
import { relaxAt } from './relax-at.js';
import { scanRotor, scanRotorAsync } from './scan-rotor.js';

function scanned(skeleton: number[], atoms: readonly [number, number, number, number], options = {}) {
  const molecule = alkane(skeleton);
  const potential = modelPotential(molecule);
  const starts = [relax(molecule, potential, tetrahedral(molecule, Math.PI)).coordinates];
  return { molecule, potential, starts, profile: scanRotor(molecule, potential, atoms, { starts, ...options }) };
}

describe('a relaxed scan of a potential written here', () => {
  const { molecule, potential, starts, profile } = scanned([0, 1, 2], [0, 1, 2, 3]);

  test('covers the grid, converged, at the exact angles', () => {
    expect(profile.points.map(({ angle }) => angle)).toEqual(Array.from({ length: 36 }, (_, n) => 10 * n - 180));
    for (const { angle, converged, residual, coordinates, energy } of profile.points) {
      expect(converged).toBe(true);
      expect(residual).toBeLessThanOrEqual(1e-3);
      const off = degrees(torsion(coordinates, 0, 1, 2, 3)) - angle;
      expect(Math.abs(off - 360 * Math.round(off / 360))).toBeLessThan(1e-6);
      expect(potential.evaluate(coordinates)).toBeCloseTo(energy, 8);
    }
  });

  test('is exactly symmetric for a molecule without handedness', () => {
    for (const { angle, energy, torque } of profile.points) {
      const opposite = profile.points.find((point) => point.angle === (angle === -180 ? -180 : -angle + 0));
      expect(opposite?.energy).toBe(energy);
      expect(opposite?.torque).toBeCloseTo(-torque, 12);
    }
  });

  test('finds the three wells and three barriers of butane, with torques that vanish there', () => {
    expect(profile.stationaryPoints.map(({ kind }) => kind)).toEqual(['well', 'barrier', 'well', 'barrier', 'well', 'barrier']);
    expect(profile.stationaryPoints.every(({ torque, converged }) => converged && Math.abs(torque) <= 2e-3)).toBe(true);
    const free = relax(molecule, potential, profile.stationaryPoints[0].coordinates, { tolerance: 1e-6 });
    expect(free.energy).toBeCloseTo(profile.stationaryPoints[0].energy, 4);
  });

  test('has a curve that predicts relaxed energies between the points', () => {
    const curve = profileCurve(profile.points);
    for (const angle of [-175, -123.4, -44, 5, 77, 165]) {
      const point = relaxAt(molecule, potential, [0, 1, 2, 3], angle, profile.points[Math.round((angle + 180) / 10) % 36].coordinates);
      expect(Math.abs(energyAt(curve, angle) - point.energy)).toBeLessThan(0.005);
      expect(Math.abs(torqueAt(curve, angle) - point.torque)).toBeLessThan(0.15);
    }
  });

  test('takes few evaluations a point', () => {
    const sweep = scanRotor(molecule, potential, [0, 1, 2, 3], { starts, search: 'sweep' });
    expect(sweep.evaluations / 36).toBeLessThan(12);
    sweep.points.forEach(({ energy }, n) => {
      expect(energy).toBeCloseTo(profile.points[n].energy, 4);
    });
  });

  test('gives the same bytes again, and with a potential that answers later', async () => {
    const again = scanRotor(molecule, potential, [0, 1, 2, 3], { starts });
    expect(again).toEqual(profile);
    const later = {
      atomCount: molecule.atomCount,
      evaluate: (x: Float64Array) => {
        const gradient = new Float64Array(x.length);
        return Promise.resolve({ energy: potential.evaluate(x, gradient), gradient });
      },
    };
    expect(await scanRotorAsync(molecule, later, [0, 1, 2, 3], { starts })).toEqual(profile);
  });

  test('reports its progress and stops when told to', () => {
    const seen: number[] = [];
    scanRotor(molecule, potential, [0, 1, 2, 3], { starts, onProgress: ({ done, total }) => seen.push(done / total) });
    expect(seen.length).toBeGreaterThan(18);
    expect(seen.every((part) => part > 0 && part <= 1)).toBe(true);
    const stopped = new AbortController();
    const stop = () => scanRotor(molecule, potential, [0, 1, 2, 3], { starts, signal: stopped.signal, onProgress: () => stopped.abort() });
    expect(stop).toThrow(/abort/i);
  });
});

describe('the lower envelope', () => {
  // a crowded chain: another rotor flips on the way, a single sweep carries hysteresis
  const { molecule, potential, starts, profile } = scanned([0, 1, 1, 3, 3, 4, 5], [0, 1, 3, 4]);

  test('lies at or below every sweep, whatever its start and direction', () => {
    const from = (angle: number) => relaxAt(molecule, potential, [0, 1, 3, 4], angle, starts[0]).coordinates;
    for (const start of [starts[0], from(-120), from(20), from(90)]) {
      const sweep = scanRotor(molecule, potential, [0, 1, 3, 4], { starts: [start], search: 'sweep' });
      sweep.points.forEach(({ energy, converged }, n) => {
        expect(converged).toBe(true);
        expect(profile.points[n].energy).toBeLessThanOrEqual(energy + 1e-3);
      });
    }
  });

  test('does not fall when a neighbour is turned to a point', () => {
    profile.points.forEach(({ angle, energy }, n) => {
      for (const neighbour of [profile.points[(n + 1) % 36], profile.points[(n + 35) % 36]]) {
        const turned = relaxAt(molecule, potential, [0, 1, 3, 4], angle, neighbour.coordinates);
        expect(turned.energy).toBeGreaterThan(energy - 2e-3);
      }
    });
  });

  test('marks its kinks, and the torque is the slope everywhere else', () => {
    expect(profile.points.some(({ breakAfter }) => breakAfter)).toBe(true);
    profile.points.forEach((point, n) => {
      const after = profile.points[(n + 1) % 36];
      const mismatch = Math.abs(after.energy - point.energy - (radians(10) * (point.torque + after.torque)) / 2);
      if (!point.breakAfter) expect(mismatch).toBeLessThan(0.1);
    });
    for (const { kind, angle, energy } of profile.stationaryPoints) {
      if (kind !== 'crossing') continue;
      const curve = profileCurve(profile.points);
      expect(torqueAt(curve, angle - 0.5)).toBeGreaterThan(0);
      expect(torqueAt(curve, angle + 0.5)).toBeLessThan(0);
      expect(Math.abs(energyAt(curve, angle) - energy)).toBeLessThan(0.05);
    }
  });
});

describe('a rigid scan', () => {
  const { molecule, potential, starts, profile } = scanned([0, 1, 2], [0, 1, 2, 3], { kind: 'rigid', step: 15, startAngle: -172.5 });

  test('keeps everything but the turn, and its torque is the slope', () => {
    expect(profile.points.map(({ angle }) => angle)).toEqual(Array.from({ length: 24 }, (_, n) => 15 * n - 172.5));
    for (const { energy, torque, coordinates, residual } of profile.points) {
      expect(residual).toBeNull();
      expect(potential.evaluate(coordinates)).toBe(energy);
      const turned = (by: number) => {
        const angle = degrees(torsion(coordinates, 0, 1, 2, 3)) + by;
        return scanRotor(molecule, potential, [0, 1, 2, 3], { starts, kind: 'rigid', step: 120, startAngle: angle }).points;
      };
      const nearest = (by: number) => {
        const target = degrees(torsion(coordinates, 0, 1, 2, 3)) + by;
        const off = (angle: number) => Math.abs(angle - target - 360 * Math.round((angle - target) / 360));
        return turned(by).reduce((best, point) => (off(point.angle) < off(best.angle) ? point : best)).energy;
      };
      expect(Math.abs((nearest(0.01) - nearest(-0.01)) / radians(0.02) - torque)).toBeLessThan(1e-4 * (1 + Math.abs(torque)));
    }
  });

  test('lies above the relaxed profile', () => {
    const relaxed = scanRotor(molecule, potential, [0, 1, 2, 3], { starts, step: 15, startAngle: -172.5 });
    profile.points.forEach(({ energy }, n) => {
      expect(energy).toBeGreaterThanOrEqual(relaxed.points[n].energy - 1e-4);
    });
  });
});

test('refuses what cannot be scanned, and says where', () => {
  const molecule = alkane([0, 1, 2]);
  const potential = modelPotential(molecule);
  const starts = [tetrahedral(molecule, Math.PI)];
  const code = (atoms: readonly [number, number, number, number], options = {}) => {
    try {
      scanRotor(molecule, potential, atoms, { starts, ...options });
    } catch (error) {
      return error instanceof TordialError ? error.code : String(error);
    }
    return 'nothing thrown';
  };
  expect(code([0, 1, 3, 2])).toBe('torsion/chain');
  expect(code([0, 1, 2, 40])).toBe('torsion/index');
  expect(code([0, 1, 2, 3], { step: 7 })).toBe('scan/grid');
  expect(code([0, 1, 2, 3], { step: 0 })).toBe('scan/grid');
  expect(code([0, 1, 2, 3], { startAngle: Number.NaN })).toBe('scan/grid');
  expect(code([0, 1, 2, 3], { tolerance: -1 })).toBe('scan/grid');
  expect(code([0, 1, 2, 3], { starts: [] })).toBe('scan/start');

  const straight = starts[0].slice();
  for (let k = 0; k < 3; k++) straight[k] = 2 * straight[3 + k] - straight[6 + k];
  expect(code([0, 1, 2, 3], { starts: [straight] })).toBe('scan/linear');

  const ring = createMolecule({
    atomicNumbers: [6, 6, 6, 6],
    bonds: [
      [0, 1, 1],
      [1, 2, 1],
      [2, 3, 1],
      [3, 0, 1],
    ],
  });
  const flat = { atomCount: 4, evaluate: () => 0 };
  expect(() => scanRotor(ring, flat, [0, 1, 2, 3], { starts: [new Float64Array(12)] })).toThrow(TordialError);
});

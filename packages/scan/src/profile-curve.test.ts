import { radians, TordialError } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { type CurvePoint, energyAt, profileCurve, torqueAt } from './profile-curve.js';

/** Points of a smooth function of the angle (radian) and its derivative. */
function pointsOf(energy: (phi: number) => number, torque: (phi: number) => number, step = 10, start = -180): CurvePoint[] {
  return Array.from({ length: 360 / step }, (_, n) => {
    const angle = start + n * step;
    return { angle, energy: energy(radians(angle)), torque: torque(radians(angle)), breakAfter: false, beyond: null, before: null };
  });
}

// butane-like series with its closed-form derivative
const energy = (phi: number) => 1.2 * (1 + Math.cos(phi)) + 1.6 * (1 + Math.cos(3 * phi));
const torque = (phi: number) => -1.2 * Math.sin(phi) - 4.8 * Math.sin(3 * phi);

describe('a curve through smooth points', () => {
  const curve = profileCurve(pointsOf(energy, torque));

  test('follows the function and its slope between the points, to fourth order in the step', () => {
    const worst = (step: number) => {
      const coarse = profileCurve(pointsOf(energy, torque, step));
      let most = 0;
      for (let angle = -360; angle < 360; angle += 1.7) most = Math.max(most, Math.abs(energyAt(coarse, angle) - energy(radians(angle))));
      return most;
    };
    // the error of a cubic Hermite piece is h^4 / 384 times the fourth derivative, here at most 1.2 + 81 * 1.6
    expect(worst(10)).toBeLessThanOrEqual((radians(10) ** 4 / 384) * 130.8);
    expect(worst(20) / worst(10)).toBeGreaterThan(10);
    for (const angle of [-171, -33.3, 12, 140]) expect(Math.abs(torqueAt(curve, angle) - torque(radians(angle)))).toBeLessThan(0.03);
  });

  test('is periodic', () => {
    for (const angle of [-180, -91.5, 3, 179.99]) {
      expect(energyAt(curve, angle + 360)).toBeCloseTo(energyAt(curve, angle), 12);
      expect(torqueAt(curve, angle - 720)).toBeCloseTo(torqueAt(curve, angle), 10);
    }
  });

  test('finds wells and barriers where the derivative vanishes', () => {
    // sin phi (1.2 + 4.8 (3 - 4 sin^2 phi)) = 0: sin^2 phi = 13 / 16 beside 0 and pi
    const inner = (180 / Math.PI) * Math.asin(Math.sqrt(13 / 16));
    const expected = [
      ['well', -180],
      ['barrier', inner - 180],
      ['well', -inner],
      ['barrier', 0],
      ['well', inner],
      ['barrier', 180 - inner],
    ];
    expect(curve.extrema).toHaveLength(6);
    curve.extrema.forEach(({ kind, angle, energy: height, curvature }, n) => {
      expect(kind).toBe(expected[n][0]);
      expect(Math.abs(angle - Number(expected[n][1]))).toBeLessThan(0.1);
      expect(Math.abs(height - energy(radians(angle)))).toBeLessThan(1e-3);
      expect(curvature > 0).toBe(kind === 'well');
    });
  });

  test('does not depend on where the grid begins', () => {
    const shifted = profileCurve(pointsOf(energy, torque, 10, -177));
    expect(shifted.extrema.map(({ kind }) => kind).sort()).toEqual(curve.extrema.map(({ kind }) => kind).sort());
  });
});

describe('a curve over a change of branch', () => {
  // two parabolas that cross at 0: E = (phi -+ 1)^2, the lower one at each angle; they meet again at 180
  const branch = (centre: number) => ({
    energy: (phi: number) => (phi - centre) ** 2,
    torque: (phi: number) => 2 * (phi - centre),
  });
  const left = branch(-1);
  const right = branch(1);
  const points = pointsOf(
    (phi) => Math.min(left.energy(phi), right.energy(phi)),
    (phi) => (phi < 0 ? left.torque(phi) : right.torque(phi)),
    15,
    -172.5,
  ).map((point) => {
    const phi = radians(point.angle);
    if (point.angle === -7.5) {
      const next = phi + radians(15);
      return { ...point, breakAfter: true, beyond: { energy: left.energy(next), torque: left.torque(next) } };
    }
    if (point.angle === 7.5) {
      const previous = phi - radians(15);
      return { ...point, before: { energy: right.energy(previous), torque: right.torque(previous) } };
    }
    return point.angle === 172.5 ? { ...point, breakAfter: true } : point;
  });

  test('draws no smooth piece across it and finds the crossing', () => {
    const curve = profileCurve(points);
    for (const angle of [-7, -3, -0.1, 0.1, 4, 7]) {
      const phi = radians(angle);
      expect(energyAt(curve, angle)).toBeCloseTo(Math.min(left.energy(phi), right.energy(phi)), 10);
    }
    const crossing = curve.extrema.find(({ angle }) => Math.abs(angle) < 10);
    expect(crossing?.kind).toBe('crossing');
    expect(crossing?.angle).toBeCloseTo(0, 8);
    expect(crossing?.energy).toBeCloseTo(1, 10);
    expect(torqueAt(curve, -0.01)).toBeCloseTo(2, 2);
    expect(torqueAt(curve, 0.01)).toBeCloseTo(-2, 2);
  });

  test('continues branches whose other ends are not known with the curvature they have', () => {
    const curve = profileCurve(points.map((point) => ({ ...point, beyond: null, before: null })));
    // parabolas are continued exactly
    expect(energyAt(curve, -3)).toBeCloseTo(left.energy(radians(-3)), 8);
    expect(curve.extrema.filter(({ kind }) => kind === 'crossing').map(({ angle }) => Math.round(angle) + 0)).toEqual([-180, 0]);
  });
});

describe('two branches that meet at a point', () => {
  // wells of depth V at +-a about 0, the lower one at each angle, and a cosine far from there
  const meeting = (a: number) => {
    const branch = (centre: number) => ({
      energy: (phi: number) => 2 * (1 - Math.cos(phi - centre)),
      torque: (phi: number) => 2 * Math.sin(phi - centre),
    });
    const [low, high] = [branch(-a), branch(a)];
    const points = pointsOf(
      (phi) => (phi <= 0 ? low : high).energy(phi),
      (phi) => (phi <= 0 ? low : high).torque(phi),
      15,
    ).map((point) => (point.angle === 0 ? { ...point, breakAfter: true, torqueAfter: high.torque(0), beyond: ends(high, 15) } : point));
    return profileCurve(points);
  };
  const ends = (branch: { energy: (phi: number) => number; torque: (phi: number) => number }, angle: number) => ({
    energy: branch.energy(radians(angle)),
    torque: branch.torque(radians(angle)),
  });

  test('have a crossing there when it stands above both wells', () => {
    const near = meeting(0.5).extrema.filter(({ angle }) => Math.abs(angle) < 60);
    expect(near.map(({ kind }) => kind)).toEqual(['well', 'crossing', 'well']);
    expect(near[1].angle).toBeCloseTo(0, 10);
    expect(near[1].energy).toBeCloseTo(2 * (1 - Math.cos(0.5)), 10);
    expect(near[2].angle).toBeCloseTo((0.5 * 180) / Math.PI, 0);
  });

  test('are one well when next to nothing separates them', () => {
    const near = meeting(0.02).extrema.filter(({ angle }) => Math.abs(angle) < 60);
    expect(near.map(({ kind }) => kind)).toEqual(['well']);
    expect(Math.abs(near[0].angle)).toBeLessThan(1.5);
  });
});

test('leaves out ripples that are rounding', () => {
  const rippled = pointsOf(
    (phi) => energy(phi) + 1e-4 * Math.sin(40 * phi),
    (phi) => torque(phi) + 4e-3 * Math.cos(40 * phi),
    5,
  );
  expect(profileCurve(rippled).extrema).toHaveLength(6);
});

test('refuses points that make no profile', () => {
  const points = pointsOf(energy, torque);
  expect(() => profileCurve(points.slice(0, 2))).toThrow(TordialError);
  expect(() => profileCurve([...points].reverse())).toThrow(TordialError);
  expect(() => profileCurve([...points, { ...points[0], angle: 180 }])).toThrow(TordialError);
  expect(() => energyAt(profileCurve(points), Number.NaN)).toThrow(TordialError);
});

describe('an open curve', () => {
  const points = pointsOf(energy, torque, 10, -180).filter(({ angle }) => angle >= -60 && angle <= 120);
  const curve = profileCurve(points, { open: true });

  test('follows the function between its ends and has nothing beyond them', () => {
    for (let angle = -60; angle <= 120; angle += 1.5) expect(Math.abs(energyAt(curve, angle) - energy(radians(angle)))).toBeLessThan(3e-4);
    expect(energyAt(curve, 120)).toBe(points[points.length - 1].energy);
    for (const beyond of [-60.1, 120.1, 299])
      expect(() => energyAt(curve, beyond)).toThrow(expect.objectContaining({ code: 'profile/angle' }));
  });

  test('has the extrema of its range, ends and the gap between them left out', () => {
    const within = profileCurve(pointsOf(energy, torque)).extrema.filter(({ angle }) => angle > -60 && angle < 120);
    expect(curve.extrema.map(({ kind }) => kind)).toEqual(within.map(({ kind }) => kind));
    curve.extrema.forEach(({ angle }, n) => {
      expect(angle).toBeCloseTo(within[n].angle, 9);
    });
  });

  test('counts its angles as its points do', () => {
    const beyond = points.map((point) => ({ ...point, angle: point.angle + 180 }));
    const shifted = profileCurve(beyond, { open: true });
    expect(shifted.extrema.map(({ angle }) => angle)).toEqual(curve.extrema.map(({ angle }) => expect.closeTo(angle + 180, 9)));
  });
});

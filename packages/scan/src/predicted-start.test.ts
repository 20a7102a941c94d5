import { radians } from '@tordial/geometry';
import { expect, test } from 'vitest';
import type { HeldMinimum } from './branches.js';
import { alkane, tetrahedral } from './chain.fixture.js';
import { drivenRotor, intoRotorFrame, rotorAngle, turnSide, turnTo } from './driven-rotor.js';
import { predictedStart } from './predicted-start.js';

const rotor = drivenRotor(alkane([0, 1, 2, 3]), [0, 1, 2, 3]);
const base = tetrahedral(alkane([0, 1, 2, 3]), 2.5);

/** Minima every 10 degrees whose geometry, the turn taken back, changes as a polynomial of the angle. */
function chain(count: number, degree: number): HeldMinimum[] {
  const points = Array.from({ length: count }, (_, place): HeldMinimum => {
    const coordinates = base.slice();
    turnTo(rotor, coordinates, 0);
    intoRotorFrame(rotor, coordinates);
    // bond a-b stays on the axis and the reference atoms in their plane: only other atoms move
    for (let k = 12; k < coordinates.length; k++) coordinates[k] += 0.02 * Math.sin(k) * (place / 4) ** degree;
    turnSide(rotor, coordinates, radians(10 * place));
    return {
      place,
      energy: 0,
      torque: 0,
      coordinates,
      gradientMax: 0,
      converged: true,
      spread: [0, 0],
      ahead: undefined,
      behind: undefined,
      twin: null,
    };
  });
  points.forEach((point, n) => {
    point.ahead = points[n + 1];
    point.behind = points[n - 1];
  });
  return points;
}

test('continues a branch exactly when it is a polynomial of up to third degree', () => {
  for (const degree of [0, 1, 2, 3]) {
    const points = chain(7, degree);
    const start = predictedStart(rotor, points[5], 1, radians(60));
    start.forEach((value, k) => {
      expect(value).toBeCloseTo(points[6].coordinates[k], 10);
    });
    const back = predictedStart(rotor, points[1], -1, radians(0));
    back.forEach((value, k) => {
      expect(value).toBeCloseTo(points[0].coordinates[k], 10);
    });
  }
});

test('turns a single point rigidly, and does not extrapolate over a jump', () => {
  const [point] = chain(1, 0);
  const start = predictedStart(rotor, point, 1, radians(10));
  expect(rotorAngle(rotor, start)).toBeCloseTo(radians(10), 10);

  const [first, second] = chain(2, 0);
  first.coordinates[15] += 2;
  const turned = predictedStart(rotor, second, 1, radians(20));
  turnSide(rotor, turned, radians(-10));
  turned.forEach((value, k) => {
    expect(value).toBeCloseTo(second.coordinates[k], 10);
  });
});

import { describe, expect, it } from 'vitest';
import { curveErrors, extremaOf } from './curve-errors.js';

// butane-like curve: wells at 180 and near 66 degrees, barriers at 0 and near 120
const energy = (angle: number): number => {
  const phi = (angle * Math.PI) / 180;
  return 0.8 * (1 + Math.cos(phi)) + 1.6 * (1 + Math.cos(3 * phi));
};
const round = Array.from({ length: 36 }, (_, n) => -180 + 10 * n);
const half = Array.from({ length: 19 }, (_, n) => 10 * n);
const curve = (angles: readonly number[], change = (_angle: number) => 0) =>
  angles.map((angle) => ({ angle, energy: energy(angle) + change(angle) }));

describe('wells and barriers of samples', () => {
  it('are found on the whole turn and on half of a symmetric one', () => {
    const whole = extremaOf(curve(round));
    expect(whole.map(({ kind }) => kind)).toEqual(['well', 'barrier', 'well', 'barrier', 'well', 'barrier']);
    expect(extremaOf(curve(half))).toEqual(whole);
    const cis = whole.find(({ angle }) => Math.abs(angle) < 1);
    expect(cis?.energy).toBeCloseTo(4.8, 6);
  });
  it('lie between the samples where the curve has them', () => {
    // slope -0.8 sin - 4.8 sin 3 phi = 0, solved by bisection
    let [low, high] = [50, 80];
    for (let n = 0; n < 60; n++) {
      const middle = (low + high) / 2;
      if (energy(middle + 1e-5) < energy(middle - 1e-5)) low = middle;
      else high = middle;
    }
    const gauche = extremaOf(curve(round)).find(({ kind, angle }) => kind === 'well' && angle > 0);
    expect(Math.abs((gauche?.angle ?? 0) - low)).toBeLessThan(0.5);
    expect(Math.abs((gauche?.energy ?? 0) - energy(low))).toBeLessThan(0.02);
  });
});

it('differences are taken after a common shift, at barriers above the own lowest well', () => {
  const errors = curveErrors(
    curve(round),
    curve(round, (angle) => 7 + (1 + Math.cos((angle * Math.PI) / 180)) / 2),
  );
  // cos/2 about its mean: root mean square 1/(2 sqrt 2), largest 1/2
  expect(errors.rmsd).toBeCloseTo(0.5 / Math.SQRT2, 9);
  expect(errors.largest).toBeCloseTo(0.5, 9);
  const cis = errors.extrema.find(({ kind, angle }) => kind === 'barrier' && Math.abs(angle) < 1);
  expect((cis?.found?.energy ?? 0) - (cis?.energy ?? 0)).toBeCloseTo(1, 6);
  expect(errors.meanWellError).toBeGreaterThan(0);
});

it('a barrier that the curve lacks is told as missing', () => {
  const flat = round.map((angle) => ({ angle, energy: -Math.cos((angle * Math.PI) / 180) }));
  expect(curveErrors(curve(round), flat).extrema.filter(({ found }) => found === null).length).toBeGreaterThan(2);
});

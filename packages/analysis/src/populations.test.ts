import { describe, expect, it } from 'vitest';
import { GAS_CONSTANT_KCAL } from './constants.js';
import { basinPopulations, boltzmannPopulations } from './populations.js';

const T = 298.15;
const RT = GAS_CONSTANT_KCAL * T;

describe('Boltzmann populations', () => {
  it('follow the closed form for two states with degeneracy', () => {
    const [anti, gauche] = boltzmannPopulations([0, 0.9], T, [1, 2]);
    const ratio = 2 * Math.exp(-0.9 / RT);
    expect(gauche / anti).toBeCloseTo(ratio, 12);
    expect(anti + gauche).toBeCloseTo(1, 14);
  });

  it('are the same whether two gauche wells are listed or counted', () => {
    const listed = boltzmannPopulations([0, 0.9, 0.9], T);
    const counted = boltzmannPopulations([0, 0.9], T, [1, 2]);
    expect(listed[1] + listed[2]).toBeCloseTo(counted[1], 14);
  });

  it('do not depend on the zero of energy, even far from it', () => {
    expect([...boltzmannPopulations([-1e5, -1e5 + 1], T)]).toEqual([...boltzmannPopulations([0, 1], T)].map((p) => expect.closeTo(p, 9)));
  });

  it('are refused at 0 K and below, and for energies that are none', () => {
    expect(() => boltzmannPopulations([0], 0)).toThrow(/above 0 K/);
    expect(() => boltzmannPopulations([0], -5)).toThrow(/above 0 K/);
    expect(() => boltzmannPopulations([0, Number.NaN], T)).toThrow(/not a number/);
    expect(() => boltzmannPopulations([0, 1], T, [1])).toThrow(/one for each/);
  });
});

describe('basin populations', () => {
  const wells = [-Math.PI / 2, Math.PI / 2];

  it('share a free turn by width and by weight', () => {
    expect([...basinPopulations(() => 0, [-1, 1], T)]).toEqual([expect.closeTo(1 / Math.PI, 12), expect.closeTo(1 - 1 / Math.PI, 12)]);
    // weight 1 + cos(phi)/2 over [-pi/2, pi/2]: (pi + 1) / (2 pi)
    expect(
      basinPopulations(
        () => 0,
        wells,
        T,
        (phi) => 1 + Math.cos(phi) / 2,
      )[0],
    ).toBeCloseTo((Math.PI + 1) / (2 * Math.PI), 12);
  });

  it('become the harmonic ratio of wells when the barriers are high: p = exp(-dE/RT) sqrt(k1/k2)', () => {
    // V = a (1 - cos 2 phi)/2 + b (1 - cos phi)/2: wells at 0 (curvature 2a + b/2) and pi (2a - b/2), b apart
    const a = 400;
    const b = 1;
    const p = basinPopulations((phi) => (a * (1 - Math.cos(2 * phi))) / 2 + (b * (1 - Math.cos(phi))) / 2, wells, T);
    const harmonic = Math.exp(-b / RT) * Math.sqrt((2 * a + b / 2) / (2 * a - b / 2));
    expect(p[1] / p[0] / harmonic).toBeCloseTo(1, 4);
  });

  it('integrate to the Bessel function I0 over the whole turn in parts', () => {
    // two halves of exp(-c cos phi): (1/pi) integral_0^pi exp(c cos t) = I0(c); Abramowitz and Stegun table 9.8: I0(1) = 1.2660658778
    const p = basinPopulations((phi) => RT * Math.cos(phi), [0, Math.PI], T);
    expect(p[0]).toBeCloseTo(0.5, 13);
    // I0(1) and L0(1) (modified Struve, A&S table 12.1: 0.7102431859): half-turn share (I0 + L0) / (2 I0)
    const q = basinPopulations((phi) => RT * Math.cos(phi), wells, T);
    expect(q[1]).toBeCloseTo((1.2660658778 + 0.7102431859) / (2 * 1.2660658778), 8);
  });
});

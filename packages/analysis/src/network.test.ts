import { describe, expect, it } from 'vitest';
import { eyringRate } from './eyring.js';
import { barrierRates, relaxationModes, routesBetween } from './network.js';

const T = 298.15;

describe('relaxation of a turn', () => {
  it('adds two mirror-image routes: lambda = 2k with k twice the rate over one barrier (closed form of two wells)', () => {
    const one = eyringRate(24, T);
    const [mode] = relaxationModes({ wells: [0, 0], barriers: [24, 24] }, T);
    expect(mode.rate / (4 * one)).toBeCloseTo(1, 12);
    expect(mode.shape[0]).toBeCloseTo(-mode.shape[1], 12);
  });

  it('is k1 + k-1 summed over both barriers for two unequal wells', () => {
    const [mode] = relaxationModes({ wells: [0, 1.3], barriers: [15, 17] }, T);
    const expected = eyringRate(15, T) + eyringRate(15 - 1.3, T) + eyringRate(17, T) + eyringRate(17 - 1.3, T);
    expect(mode.rate / expected).toBeCloseTo(1, 12);
  });

  it('is 3k, twice, for three equal wells (eigenvalues of the three-cycle)', () => {
    const modes = relaxationModes({ wells: [0, 0, 0], barriers: [3, 3, 3] }, T);
    expect(modes.map((mode) => mode.rate / eyringRate(3, T))).toEqual([expect.closeTo(3, 10), expect.closeTo(3, 10)]);
  });

  it('is 2k(1 - cos(2 pi j / n)) for n equal wells (eigenvalues of the cycle)', () => {
    const n = 7;
    const modes = relaxationModes({ wells: Array(n).fill(0), barriers: Array(n).fill(9) }, T);
    const expected = Array.from({ length: n - 1 }, (_, j) => 2 * (1 - Math.cos((2 * Math.PI * (j + 1)) / n))).sort((a, b) => a - b);
    modes.forEach((mode, j) => {
      expect(mode.rate / eyringRate(9, T)).toBeCloseTo(expected[j], 10);
    });
  });

  it('keeps a slow rate exact beside rates 30 powers of ten faster', () => {
    // two hands of two wells each: within a hand a barrier of 2, between hands 45 both ways round; fast wells equilibrate, so that
    // k = (rate over 45 on one side + the same on the other) / 2 wells, and lambda = 2k
    const modes = relaxationModes({ wells: [0, 0, 0, 0], barriers: [2, 45, 2, 45] }, T);
    const k = (2 * eyringRate(45, T)) / 2;
    expect(modes[0].rate / (2 * k)).toBeCloseTo(1, 10);
    expect(modes[2].rate / eyringRate(2, T)).toBeGreaterThan(1.9);
    expect(modes[0].rate).toBeLessThan(1e-19);
    const [a, b, c, d] = modes[0].shape;
    expect([a / b, c / d, a / c]).toEqual([expect.closeTo(1, 10), expect.closeTo(1, 10), expect.closeTo(-1, 10)]);
  });

  it('gives the rates over each barrier both ways, and refuses an unknown one', () => {
    const network = { wells: [0, 2], barriers: [10, null] };
    expect(barrierRates(network, T)).toEqual([{ forward: eyringRate(10, T), backward: eyringRate(8, T) }, null]);
    expect(() => relaxationModes(network, T)).toThrow(/no saddle is known between wells 1 and 0/);
    expect(() => barrierRates({ wells: [0, 2], barriers: [1, 9] }, T)).toThrow(/below a well/);
    expect(() => barrierRates({ wells: [0], barriers: [] }, T)).toThrow(/as many barriers/);
  });
});

describe('routes', () => {
  it('finds both ways round and their highest barriers', () => {
    const network = { wells: [0, 1, 0, 1], barriers: [20, 25, 31, 30] };
    const routes = routesBetween(network, [0], [2]);
    expect(routes.map(({ wells, barriers, highest }) => ({ wells, barriers, highest }))).toEqual([
      { wells: [0, 1, 2], barriers: [0, 1], highest: 25 },
      { wells: [0, 3, 2], barriers: [3, 2], highest: 31 },
    ]);
  });

  it('does not walk through the set it starts from, and keeps two mirror-image routes apart', () => {
    const network = { wells: [0, 0, 0, 0], barriers: [2, 24, 2, 24] };
    expect(routesBetween(network, [0, 1], [2, 3]).map((route) => route.barriers)).toEqual([[3], [1]]);
    expect(routesBetween({ wells: [0, 0], barriers: [24, null] }, [0], [1]).map((route) => route.highest)).toEqual([24, null]);
  });
});

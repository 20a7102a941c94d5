import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { spread } from './spread.js';

describe('spread', () => {
  it('leaves alone what is far enough apart', () => {
    expect(spread([10, 40, 90], [20, 20], 0, 100)).toEqual([10, 40, 90]);
  });

  it('moves a crowd apart about its middle', () => {
    expect(spread([50, 50, 50], [10, 10], 0, 100)).toEqual([40, 50, 60]);
  });

  it('keeps order, distances and limits, and stays put where nothing forces a move', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 0, max: 300, noNaN: true }), { minLength: 1, maxLength: 9 }),
        fc.integer({ min: 1, max: 30 }),
        (places, distance) => {
          const wanted = [...places].sort((p, q) => p - q);
          const distances = new Array<number>(wanted.length - 1).fill(distance);
          const found = spread(wanted, distances, 0, 300);
          found.forEach((place, n) => {
            expect(place).toBeGreaterThanOrEqual(-1e-9);
            expect(place).toBeLessThanOrEqual(300 + 1e-9);
            if (n > 0) expect(place - found[n - 1]).toBeGreaterThanOrEqual(distance - 1e-9);
          });
          // optimal: no single free neighbourhood can be shifted towards its wishes, so that the total displacement of each tight run is zero
          const tight = (n: number): boolean => n > 0 && found[n] - found[n - 1] < distance + 1e-9;
          let sum = 0;
          let start = 0;
          for (let n = 0; n <= found.length; n++) {
            if (n === found.length || !tight(n)) {
              const limited = found[start] < 1e-9 || found[n - 1] > 300 - 1e-9;
              if (n > 0 && !limited) expect(Math.abs(sum)).toBeLessThan(1e-6);
              sum = 0;
              start = n;
            }
            if (n < found.length) sum += found[n] - wanted[n];
          }
        },
      ),
      { seed: 7, numRuns: 300 },
    );
  });
});

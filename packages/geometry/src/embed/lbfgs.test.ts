import { describe, expect, it } from 'vitest';
import { descend } from './lbfgs.js';

describe('descent', () => {
  // H. H. Rosenbrock, Comput. J. 3, 175 (1960), extended to pairs: minimum 0 at (1, 1, ...)
  it('reaches the minimum of the Rosenbrock valley', () => {
    const x = Float64Array.from({ length: 10 }, (_, n) => (n % 2 === 0 ? -1.2 : 1));
    const value = descend(
      (p, gradient) => {
        let sum = 0;
        for (let n = 0; n < p.length; n += 2) {
          const [a, b] = [1 - p[n], p[n + 1] - p[n] ** 2];
          sum += a * a + 100 * b * b;
          gradient[n] = -2 * a - 400 * p[n] * b;
          gradient[n + 1] = 200 * b;
        }
        return sum;
      },
      x,
      { iterations: 300, gradient: 1e-8, decrease: 0, stride: 1 },
    );
    expect(value).toBeLessThan(1e-12);
    for (const p of x) expect(p).toBeCloseTo(1, 6);
  });
  it('stops where it is when nothing descends', () => {
    const x = new Float64Array([0.5, 0.25]);
    expect(
      descend(
        (_, gradient) => {
          gradient.fill(0);
          return 3;
        },
        x,
        { iterations: 10, gradient: 1e-6, decrease: 0, stride: 1 },
      ),
    ).toBe(3);
    expect([...x]).toEqual([0.5, 0.25]);
  });
});

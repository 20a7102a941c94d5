import { describe, expect, it } from 'vitest';
import { seededRandom } from '../random.js';
import { embedDistances } from './metric-matrix.js';

describe('metric-matrix embedding', () => {
  // exact distances of points in space give these points back (T. F. Havel, I. D. Kuntz, G. M. Crippen, Bull. Math. Biol. 45, 665 (1983))
  it('recovers points from their exact distances', () => {
    const random = seededRandom(2);
    const size = 15;
    const points = Array.from({ length: size }, () => [9 * random.normal(), 4 * random.normal(), random.normal()]);
    const exact = Float64Array.from({ length: size * size }, (_, n) => {
      const [p, q] = [points[Math.floor(n / size)], points[n % size]];
      return Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
    });
    const x = embedDistances({ size, lower: exact, upper: exact }, random);
    for (let i = 0; i < size; i++)
      for (let j = 0; j < i; j++) {
        const [p, q] = [x.subarray(4 * i, 4 * i + 4), x.subarray(4 * j, 4 * j + 4)];
        expect(Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2], p[3] - q[3])).toBeCloseTo(exact[i * size + j], 0);
      }
  });
});

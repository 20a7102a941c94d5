import { describe, expect, it } from 'vitest';
import { smoothTriangles } from './triangle-smoothing.js';

const matrix = (size: number, rows: readonly [number, number, number][], rest: number) => {
  const m = new Float64Array(size * size).fill(rest);
  for (let i = 0; i < size; i++) m[i * size + i] = 0;
  for (const [i, j, value] of rows) m[i * size + j] = m[j * size + i] = value;
  return m;
};

describe('triangle smoothing', () => {
  it('makes upper bounds shortest paths and lower bounds what the others leave', () => {
    // a chain 0-1-2-3 with bonds of 1.5 and a far lower bound of 4 between its ends
    const bonds: [number, number, number][] = [
      [0, 1, 1.5],
      [1, 2, 1.5],
      [2, 3, 1.5],
    ];
    const bounds = { size: 4, upper: matrix(4, bonds, 100), lower: matrix(4, [...bonds, [0, 3, 4]], 0) };
    expect(smoothTriangles(bounds)).toBe(0);
    expect(bounds.upper[3]).toBe(4.5);
    expect(bounds.upper[2]).toBe(3);
    // |0-2| >= |0-3| - |2-3|
    expect(bounds.lower[2]).toBe(2.5);
    expect(bounds.lower[1 * 4 + 3]).toBe(2.5);
  });
  it('leaves no triangle that contradicts itself', () => {
    const size = 12;
    let state = 1;
    const next = () => {
      state = (state * 16807) % 2147483647;
      return state / 2147483647;
    };
    const points = Array.from({ length: size }, () => [6 * next(), 6 * next(), 6 * next()]);
    const distance = (i: number, j: number) => Math.hypot(...points[i].map((v, c) => v - points[j][c]));
    const rows = (stretch: number): [number, number, number][] =>
      points.flatMap((_, i) =>
        points.slice(0, i).map((__, j): [number, number, number] => [i, j, distance(i, j) * (1 + stretch * next())]),
      );
    const bounds = { size, upper: matrix(size, rows(0.8), 0), lower: matrix(size, rows(-0.8), 0) };
    expect(smoothTriangles(bounds)).toBe(0);
    const { upper, lower } = bounds;
    for (let i = 0; i < size; i++)
      for (let j = 0; j < size; j++) {
        // the real distances still fit
        expect(lower[i * size + j]).toBeLessThanOrEqual(distance(i, j) + 1e-9);
        expect(upper[i * size + j]).toBeGreaterThanOrEqual(distance(i, j) - 1e-9);
        for (let k = 0; k < size; k++) {
          expect(upper[i * size + j]).toBeLessThanOrEqual(upper[i * size + k] + upper[k * size + j] + 1e-9);
          expect(lower[i * size + j]).toBeGreaterThanOrEqual(lower[i * size + k] - upper[k * size + j] - 1e-9);
        }
      }
  });
  it('reports a contradiction and puts a single distance in its place', () => {
    const bounds = { size: 3, upper: matrix(3, [], 1), lower: matrix(3, [[0, 2, 3]], 0) };
    expect(smoothTriangles(bounds)).toBeGreaterThan(0.9);
    expect(bounds.lower[2]).toBe(bounds.upper[2]);
  });
});

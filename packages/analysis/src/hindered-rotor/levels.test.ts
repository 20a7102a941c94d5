import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { occupancy, torsionalLevels } from './levels.js';
import { constantSeries, type PeriodicSeries, seriesOfBarriers, seriesOfFunction } from './periodic-series.js';

/** Mathieu's y'' + (a - 2q cos 2v) y = 0 as a rotor: phi = v, B = 1, V = 2q cos 2 phi. */
function mathieu(q: number): Float64Array {
  const potential: PeriodicSeries = { cosine: Float64Array.of(0, 0, 2 * q), sine: new Float64Array(3) };
  return torsionalLevels(potential, constantSeries(1), { upTo: 150 }).energies;
}

describe("Mathieu's equation", () => {
  // Abramowitz and Stegun, table 20.1 (8 decimals; NIST DLMF 28 gives the same numbers), q = 5 and 10: a0 b1 a1 b2 a2 b3, then b5 a5 b10 a10.
  // The table was quoted from memory and each value confirmed with scipy 1.10's mathieu_a and mathieu_b.
  it.each([
    [5, [-5.80004602, -5.7900806, 1.85818754, 2.09946045, 7.44910974, 9.23632771], [25.51081605, 25.54997175, 100.12636922, 100.12636922]],
    [
      10,
      [-13.93697996, -13.93655248, -2.3991424, -2.38215824, 7.71736985, 7.98606914],
      [26.76642636, 27.70376873, 100.50676946, 100.50677002],
    ],
  ])('q = %s: characteristic values as levels, within 1e-8', (q, low, high) => {
    const levels = mathieu(q);
    low.forEach((value, n) => {
      expect(Math.abs(levels[n] - value)).toBeLessThan(1e-8);
    });
    [9, 10, 19, 20].forEach((n, at) => {
      expect(Math.abs(levels[n] - high[at])).toBeLessThan(1e-8);
    });
  });
});

describe('limits', () => {
  it('a free rotor has 0 and B m^2 twice', () => {
    const { energies } = torsionalLevels(constantSeries(0), constantSeries(5.3), { upTo: 600 });
    expect(energies.length).toBe(21);
    energies.forEach((energy, n) => {
      expect(energy).toBeCloseTo(5.3 * Math.ceil(n / 2) ** 2, 10);
    });
  });

  it('a high barrier gives harmonic levels with the first anharmonic term, n-fold degenerate', () => {
    // V3/2 (1 - cos 3 phi) near the bottom: quantum 3 sqrt(V3 B), first-order x^4 term lowers level v by (9 B/16) (2 v^2 + 2 v + 1)
    const V3 = 1e5;
    const B = 1;
    const { energies } = torsionalLevels(seriesOfBarriers([0, 0, V3]), constantSeries(B), { upTo: 6000 });
    const quantum = 3 * Math.sqrt(V3 * B);
    for (let v = 0; v < 5; v++)
      for (let copy = 0; copy < 3; copy++) {
        const expected = quantum * (v + 0.5) - (9 * B * (2 * v * v + 2 * v + 1)) / 16;
        expect(Math.abs(energies[3 * v + copy] - expected)).toBeLessThan(0.03 * (v + 1) ** 2);
      }
  });

  it('does not depend on where zero of the angle lies', () => {
    const V = (phi: number): number => 200 * Math.cos(phi) + 350 * Math.cos(3 * phi + 0.4) - 80 * Math.sin(2 * phi);
    const B = (phi: number): number => 6 + Math.cos(phi - 0.3);
    const straight = torsionalLevels(seriesOfFunction(V), seriesOfFunction(B));
    const turned = torsionalLevels(
      seriesOfFunction((phi) => V(phi + 1.1)),
      seriesOfFunction((phi) => B(phi + 1.1)),
    );
    expect(straight.energies.length).toBe(turned.energies.length);
    straight.energies.forEach((energy, n) => {
      expect(turned.energies[n]).toBeCloseTo(energy, 7);
    });
  });

  it('an angle-dependent B agrees with a finite-difference matrix of the same operator', () => {
    // the finite-difference error falls with the square of the spacing and is removed by extrapolation
    const V = (phi: number): number => 100 * (1 - Math.cos(3 * phi)) + 40 * Math.sin(phi);
    const B = (phi: number): number => 5 + 1.5 * Math.cos(phi) + 0.5 * Math.sin(2 * phi);
    const { energies } = torsionalLevels(seriesOfFunction(V), seriesOfFunction(B), { upTo: 400 });
    const coarse = finiteDifference(V, B, 120);
    const fine = finiteDifference(V, B, 240);
    for (let n = 0; n < 6; n++) expect(energies[n]).toBeCloseTo(fine[n] + (fine[n] - coarse[n]) / 3, 3);
  });

  it('states in a deep well stay in it', () => {
    const levels = torsionalLevels(seriesOfBarriers([300, 0, 2000]), constantSeries(5));
    expect(occupancy(levels, -Math.PI / 3, Math.PI / 3, 1)[0]).toBeGreaterThan(0.999);
    expect([...occupancy(levels, -Math.PI, Math.PI, 3)]).toEqual([1, 1, 1].map((one) => expect.closeTo(one, 10)));
  });

  it('refuses a constant that is not positive and a basis that cannot hold the levels', () => {
    expect(() =>
      torsionalLevels(
        constantSeries(0),
        seriesOfFunction((phi) => Math.cos(phi)),
      ),
    ).toThrow(/positive all the way/);
    expect(() => torsionalLevels(seriesOfBarriers([0, 0, 1000]), constantSeries(1), { largestBasis: 20 })).toThrow(/not converged/);
  });
});

/** Lowest eigenvalues of -d/dphi B d/dphi + V on a ring of N points, B taken at the midpoints. */
function finiteDifference(V: (phi: number) => number, B: (phi: number) => number, N: number): number[] {
  const h = (2 * Math.PI) / N;
  const A = Matrix.zeros(N, N);
  for (let i = 0; i < N; i++) {
    const left = B((i - 0.5) * h) / h ** 2;
    const right = B((i + 0.5) * h) / h ** 2;
    A.set(i, i, V(i * h) + left + right);
    A.set(i, (i + 1) % N, -right);
    A.set(i, (i + N - 1) % N, -left);
  }
  return new EigenvalueDecomposition(A, { assumeSymmetric: true }).realEigenvalues.sort((a, b) => a - b);
}

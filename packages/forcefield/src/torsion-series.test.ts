import { createMolecule } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { type Mmff94Options, mmff94 } from './mmff94.js';
import type { TorsionSeriesTerm } from './parameters/torsion-series-parameters.js';
import { gradientError, uniform } from './terms/gradient-check.fixture.js';
import { torsionTermsOn } from './torsion-terms.js';

// hydrogen peroxide and ethane, built by hand; H-O-O-H at 111 degrees
const peroxide = createMolecule({
  atomicNumbers: [1, 8, 8, 1],
  bonds: [
    [0, 1, 1],
    [1, 2, 1],
    [2, 3, 1],
  ],
});
const at = (phi: number): Float64Array => {
  const [c, s] = [Math.cos((phi * Math.PI) / 180), Math.sin((phi * Math.PI) / 180)];
  return Float64Array.of(-0.15, 0.95, 0, 0, 0, 0, 1.45, 0, 0, 1.6, 0.95 * c, 0.95 * s);
};
const override = (terms: readonly TorsionSeriesTerm[]): Mmff94Options => ({ torsionOverrides: [{ torsions: [[0, 1, 2, 3]], terms }] });

describe('torsion series in place of MMFF94 terms', () => {
  const own = mmff94(peroxide);
  const [{ v }] = torsionTermsOn(own.parameters, 1, 2);

  it('with MMFF94 constants and phases are MMFF94', () => {
    const terms = v.map((value, n) => ({ n: n + 1, v: value, phase: n % 2 === 0 ? 0 : 180 }));
    const same = mmff94(peroxide, override(terms));
    for (const phi of [0, 40, 111, 180, -75]) {
      const [g, h] = [new Float64Array(12), new Float64Array(12)];
      expect(same.evaluate(at(phi), g)).toBeCloseTo(own.evaluate(at(phi), h), 10);
      g.forEach((value, n) => {
        expect(value).toBeCloseTo(h[n], 8);
      });
    }
    expect(torsionTermsOn(same.parameters, 1, 2)[0].v.map((value) => Math.round(value * 1e9) / 1e9)).toEqual(v);
  });

  it('without a term are the energy without the torsion, the other terms as they were', () => {
    const off = mmff94(peroxide, override([]));
    const [before, after] = [own.terms(at(70)), off.terms(at(70))];
    expect(after).toEqual({ ...before, torsion: 0 });
  });

  it('have six terms with any phases, energy and gradient', () => {
    const random = uniform(3);
    const terms = [1, 2, 3, 4, 5, 6].map((n) => ({ n, v: 2 * random(), phase: 180 * random() }));
    const field = mmff94(peroxide, override(terms));
    const off = mmff94(peroxide, override([]));
    for (const phi of [-179, -60, 0, 33, 120, 180]) {
      const angle = (phi * Math.PI) / 180;
      const expected = terms.reduce((sum, term) => sum + (term.v / 2) * (1 + Math.cos(term.n * angle - (term.phase * Math.PI) / 180)), 0);
      expect(field.evaluate(at(phi)) - off.evaluate(at(phi))).toBeCloseTo(expected, 9);
      expect(gradientError((x, g) => field.evaluate(x, g), at(phi)).worst).toBeLessThan(1);
    }
    const [described] = torsionTermsOn(field.parameters, 2, 1);
    expect(described).toMatchObject({ source: 'series', atoms: [3, 2, 1, 0] });
    described.v.forEach((value, n) => {
      expect(value).toBeCloseTo(Math.abs(terms[n].v), 9);
    });
    expect(described.phases).toHaveLength(6);
  });

  it('say so in the label', () => {
    expect(own.label).toBe('MMFF94s');
    expect(mmff94(peroxide, { ...override([]), variant: 'MMFF94' }).label).toBe('MMFF94 + series');
  });

  it.each([
    ['atoms that are no torsion', [{ torsions: [[1, 0, 2, 3]], terms: [] }], 'no torsion'],
    [
      'a torsion named twice',
      [
        {
          torsions: [
            [0, 1, 2, 3],
            [3, 2, 1, 0],
          ],
          terms: [],
        },
      ],
      'two series',
    ],
    ['a periodicity beyond six', [{ torsions: [[0, 1, 2, 3]], terms: [{ n: 7, v: 1, phase: 0 }] }], 'periodicity 7'],
    ['an amplitude that is no number', [{ torsions: [[0, 1, 2, 3]], terms: [{ n: 1, v: Number.NaN, phase: 0 }] }], 'finite'],
  ] as const)('refuse %s', (_, torsionOverrides, words) => {
    expect(() => mmff94(peroxide, { torsionOverrides })).toThrow(expect.objectContaining({ code: 'mmff94/torsion-series' }));
    expect(() => mmff94(peroxide, { torsionOverrides })).toThrow(words);
  });
});

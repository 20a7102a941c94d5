import { radians } from '@tordial/geometry';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cosinePowers, seriesForms, termsOfCosinePowers } from './series-forms.js';
import { seriesEnergy, usualTerms } from './series-term.js';

const close = (actual: readonly number[], expected: readonly number[], digits = 9): void => {
  expect(actual).toHaveLength(expected.length);
  actual.forEach((value, k) => {
    expect(value).toBeCloseTo(expected[k], digits);
  });
};

describe('the cosine-power form', () => {
  // W. L. Jorgensen, D. S. Maxwell, J. Tirado-Rives, J. Am. Chem. Soc. 118, 11225 (1996) writes F1 .. F4 with alternating signs; the identities between
  // these and the Ryckaert-Bellemans coefficients are textbook algebra, from memory: C0 = F2 + (F1 + F3)/2, C1 = (-F1 + 3 F3)/2, C2 = -F2 + 4 F4,
  // C3 = -2 F3, C4 = -4 F4, C5 = 0
  it('obeys the published identities with four Fourier coefficients', () => {
    const [f1, f2, f3, f4] = [1.411, -0.271, 3.145, 0.63];
    close(cosinePowers(usualTerms([f1, f2, f3, f4])), [f2 + (f1 + f3) / 2, (-f1 + 3 * f3) / 2, -f2 + 4 * f4, -2 * f3, -4 * f4, 0, 0]);
  });
  // Ryckaert and Bellemans (1975), butane in 10^3 K: 1.116, 1.462, -1.578, -0.368, 3.156, -3.788 (values from memory); with psi = 0 at trans
  it('of butane as first published has trans, gauche and cis where they belong', () => {
    const c = [1.116, 1.462, -1.578, -0.368, 3.156, -3.788];
    const { terms, constant } = termsOfCosinePowers(c);
    const energy = (phi: number): number => seriesEnergy(terms, radians(phi)) + constant;
    expect(energy(180)).toBeCloseTo(
      c.reduce((sum, value) => sum + value, 0),
      9,
    );
    expect(energy(0)).toBeCloseTo(
      c.reduce((sum, value, k) => sum + value * (-1) ** k, 0),
      9,
    );
    expect(energy(65)).toBeGreaterThan(energy(180));
    expect(energy(0)).toBeGreaterThan(energy(120));
    close(
      cosinePowers(terms).map((value, k) => value + (k === 0 ? constant : 0)),
      [...c, 0],
    );
  });
  it('refuses phases that powers of the cosine cannot express', () => {
    expect(() => cosinePowers([{ n: 2, v: 1, phase: 90 }])).toThrow(expect.objectContaining({ code: 'fit/phase' }));
  });
});

describe('all forms of a series', () => {
  const amplitude = fc.double({ min: -20, max: 20, noNaN: true });
  it('give one energy, in both units', () => {
    fc.assert(
      fc.property(fc.array(amplitude, { minLength: 6, maxLength: 6 }), fc.double({ min: -180, max: 180, noNaN: true }), (v, phi) => {
        const terms = usualTerms(v);
        const expected = seriesEnergy(terms, radians(phi));
        for (const [unit, factor] of [
          ['kcal/mol', 1],
          ['kJ/mol', 4.184],
        ] as const) {
          const { cosinePowers: powers, kNPhase } = seriesForms(terms, unit);
          const psi = Math.cos(radians(phi - 180));
          const byPowers = powers?.c.reduce((sum, c, k) => sum + c * psi ** k, 0);
          const byK = kNPhase.terms.reduce((sum, { k, n, phase }) => sum + k * (1 + Math.cos(radians(n * phi - phase))), kNPhase.constant);
          expect(byPowers).toBeCloseTo(expected * factor, 8);
          expect(byK).toBeCloseTo(expected * factor, 8);
          expect(kNPhase.terms.every(({ k }) => k >= 0)).toBe(true);
        }
      }),
      { seed: 7, numRuns: 200 },
    );
  });
  it('leave the cosine powers out for free phases', () => {
    expect(seriesForms([{ n: 1, v: 1, phase: 30 }], 'kcal/mol').cosinePowers).toBeNull();
  });
});

/**
 * A torsion series in the forms that programs read. phi is the IUPAC torsion angle: 0 for cis, 180 degrees for trans.
 *
 * Fourier form: 0.5 sum V_n (1 + cos(n phi - gamma_n)).
 * Cosine-power form: sum_{k=0..6} C_k cos^k(psi) with psi = phi - 180 degrees, so that psi = 0 is trans, the convention of
 * J.-P. Ryckaert and A. Bellemans, Chem. Phys. Lett. 30, 123 (1975); Faraday Discuss. Chem. Soc. 66, 95 (1978).
 * k / n / phase form: sum k_n (1 + cos(n phi - delta_n)) with k_n = V_n / 2 at least 0.
 */
import { TordialError } from '@tordial/geometry';
import { perKcal } from '@tordial/scan';
import { type SeriesTerm, usualTerms, withPositiveAmplitude } from './series-term.js';

/** Coefficients of cos^k in the Chebyshev polynomials T_0 ... T_6, where T_n(cos phi) = cos n phi. */
const CHEBYSHEV = [[1], [0, 1], [-1, 0, 2], [0, -3, 0, 4], [1, 0, -8, 0, 8], [0, 5, 0, -20, 0, 16], [-1, 0, 18, 0, -48, 0, 32]];

/**
 * C_0 ... C_6 of the cosine-power form, in the unit of the amplitudes; the constant is kept, energies are the same. Throws `fit/phase` for a phase
 * other than 0 and 180 degrees, which powers of the cosine cannot express.
 */
export function cosinePowers(terms: readonly SeriesTerm[]): number[] {
  const c = new Array<number>(7).fill(0);
  for (const { n, v, phase } of terms) {
    const turned = (((phase % 360) + 360) % 360) + 0;
    if (turned !== 0 && turned !== 180)
      throw new TordialError(
        'fit/phase',
        `the ${n}-fold term has the phase ${phase} degrees; the cosine-power form takes 0 and 180 only: fit with fixed phases`,
      );
    const sign = turned === 180 ? -1 : 1;
    c[0] += v / 2;
    // cos phi = -cos psi: odd powers change sign
    CHEBYSHEV[n].forEach((factor, k) => {
      c[k] += (v / 2) * sign * factor * (k % 2 === 0 ? 1 : -1);
    });
  }
  return c.map((value) => value + 0);
}

/** What `cosinePowers` turned round: terms of the usual phases, and the constant by which the energies of the two forms differ. */
export function termsOfCosinePowers(powers: readonly number[]): { terms: SeriesTerm[]; constant: number } {
  const rest = Array.from({ length: 7 }, (_, k) => (powers[k] ?? 0) * (k % 2 === 0 ? 1 : -1));
  const v = new Array<number>(6).fill(0);
  for (let n = 6; n >= 1; n--) {
    const amplitude = rest[n] / CHEBYSHEV[n][n];
    CHEBYSHEV[n].forEach((factor, k) => {
      rest[k] -= amplitude * factor;
    });
    v[n - 1] = 2 * amplitude * (n % 2 === 1 ? 1 : -1);
  }
  const constant = rest[0] - v.reduce((sum, value) => sum + value / 2, 0);
  return { terms: usualTerms(v.map((value) => value + 0)), constant: constant + 0 };
}

export interface SeriesForms {
  readonly unit: 'kcal/mol' | 'kJ/mol';
  readonly fourier: { readonly terms: readonly { readonly n: number; readonly v: number; readonly phase: number }[] };
  /** null for phases other than 0 and 180 degrees. */
  readonly cosinePowers: { readonly convention: string; readonly c: readonly number[] } | null;
  readonly kNPhase: {
    readonly terms: readonly { readonly k: number; readonly n: number; readonly phase: number }[];
    /** To add to this form for the energies of the others. */
    readonly constant: number;
  };
}

const CONVENTION = 'E = sum C_k cos^k(psi), psi = phi - 180 degrees (0 at trans), k = 0 ... 6';

/** All forms of a series (amplitudes in kcal/mol) in one unit. */
export function seriesForms(terms: readonly SeriesTerm[], unit: 'kcal/mol' | 'kJ/mol'): SeriesForms {
  const factor = perKcal(unit);
  const scaled = terms.map((term) => ({ ...term, v: term.v * factor }));
  const positive = scaled.map(withPositiveAmplitude);
  const usual = scaled.every(({ phase }) => phase === 0 || phase === 180);
  return {
    unit,
    fourier: { terms: scaled.map(({ n, v, phase }) => ({ n, v, phase })) },
    cosinePowers: usual ? { convention: CONVENTION, c: cosinePowers(scaled) } : null,
    kNPhase: {
      terms: positive.map(({ n, v, phase }) => ({ k: v / 2, n, phase })),
      constant: positive.reduce((sum, { constant }) => sum + constant, 0),
    },
  };
}

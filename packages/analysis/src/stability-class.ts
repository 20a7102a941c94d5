import { TordialError } from '@tordial/geometry';

/** Class of an axis by the height of its barrier: 1 turns freely, 2 in between (hours to months), 3 holds its configuration. */
export interface StabilityClass {
  readonly class: 1 | 2 | 3;
  readonly meaning: string;
}

/**
 * The three classes of a hindered axis: below 20, 20 to 30 and above 30 kcal/mol; both limits belong to class 2.
 *
 * `barrier`: to rotation from the stable well over the lowest route either way round, kcal/mol (dG at 37 C or room temperature in the
 * paper; an electronic barrier is an estimate of it).
 *
 * S. R. LaPlante, L. D. Fader, K. R. Fandrick, D. R. Fandrick, O. Hucke, R. Kemper, S. P. F. Miller, P. J. Edwards,
 * J. Med. Chem. 54, 7005 (2011).
 */
export function stabilityClass(barrier: number): StabilityClass {
  if (!Number.isFinite(barrier) || barrier < 0)
    throw new TordialError('analysis/barrier', `a barrier of ${barrier} kcal/mol has no stability class: give a number of 0 or more`);
  if (barrier < 20) return { class: 1, meaning: 'no axial chirality at room temperature: interconverts within seconds or faster' };
  if (barrier <= 30)
    return { class: 2, meaning: 'delayed interconversion, minutes to months at room temperature: the purity of one form drifts' };
  return { class: 3, meaning: 'stable axis at room temperature: interconverts over years' };
}

/**
 * Electrostatic interaction: Coulomb's law with a buffered distance.
 *
 *   E(ij) = 332.0716 q_i q_j / (D (r_ij + 0.05)^n)
 *
 * n is 1 for a constant dielectric D and 2 for a distance-dependent one; 1-4 pairs count 0.75. Charges in elementary charges,
 * distances in angstrom, E in kcal/mol.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), equation 13.
 */

const KCAL_ANGSTROM_PER_CHARGE_SQUARED = 332.0716;
const BUFFER = 0.05;

/** Weight of a pair three bonds apart. */
export const ONE_FOUR_SCALE = 0.75;

/** Dielectric model and constant D, a positive number; in the distance-dependent model the dielectric is D times the distance in angstrom. */
export interface Dielectric {
  readonly model: 'constant' | 'distance';
  readonly constant: number;
}

/** Strength of a pair: its energy times (r + 0.05)^n; kcal/mol angstrom^n. */
export function chargeProduct(charge_i: number, charge_j: number, dielectricConstant: number): number {
  return (KCAL_ANGSTROM_PER_CHARGE_SQUARED * charge_i * charge_j) / dielectricConstant;
}

/** Energy of one pair in kcal/mol at the distance r in angstrom, from its strength and the dielectric model. */
export function electrostatic(r: number, strength: number, model: Dielectric['model']): number {
  const buffered = r + BUFFER;
  return model === 'constant' ? strength / buffered : strength / (buffered * buffered);
}

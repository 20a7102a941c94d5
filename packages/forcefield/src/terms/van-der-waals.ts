/**
 * Van der Waals interaction: Halgren's buffered 14-7 potential.
 *
 *   E(ij) = eps (1.07 R* / (r + 0.07 R*))^7 (1.12 R*^7 / (r^7 + 0.12 R*^7) - 2)
 *
 *   R*_ii = A_i alpha_i^(1/4)
 *   R*_ij = 0.5 (R*_ii + R*_jj) (1 + 0.2 (1 - exp(-12 gamma^2))),   gamma = (R*_ii - R*_jj) / (R*_ii + R*_jj)
 *   eps   = 181.16 G_i G_j alpha_i alpha_j / (((alpha_i / N_i)^(1/2) + (alpha_j / N_j)^(1/2)) R*_ij^6)
 *
 * A polar hydrogen draws no electron cloud out: with a donor in the pair R*_ij is the plain mean. Between a donor and an acceptor
 * R*_ij is then scaled by 0.8 and eps by 0.5. Distances in angstrom, alpha in cubic angstrom, E and eps in kcal/mol.
 *
 * Source: T. A. Halgren, J. Am. Chem. Soc. 114, 7827 (1992) and J. Comput. Chem. 17, 490 and 520 (1996), equations 8 to 12 of the former.
 */

/** One row per atom: what the pair constants are combined from. All arrays have the same length. */
export interface VanDerWaalsAtoms {
  /** Atomic polarizability alpha, cubic angstrom. */
  readonly polarizability: Float64Array;
  /** Slater-Kirkwood effective number of valence electrons N. */
  readonly effectiveElectrons: Float64Array;
  /** Scale factor A of the minimum-energy distance, R*_ii = A alpha^(1/4). */
  readonly scaleA: Float64Array;
  /** Scale factor G of the well depth. */
  readonly scaleG: Float64Array;
  /** 0 neither, 1 hydrogen-bond donor, 2 hydrogen-bond acceptor. */
  readonly donorAcceptor: Uint8Array;
}

const DONOR = 1;
const ACCEPTOR = 2;

/** Minimum-energy distance R*_ij (angstrom) and well depth (kcal/mol) of a pair of atoms. */
export function vanDerWaalsPair(atoms: VanDerWaalsAtoms, i: number, j: number): { distance: number; depth: number } {
  const { polarizability, effectiveElectrons, scaleA, scaleG, donorAcceptor } = atoms;
  const alpha_i = polarizability[i], alpha_j = polarizability[j];
  const R_ii = scaleA[i] * alpha_i ** 0.25, R_jj = scaleA[j] * alpha_j ** 0.25;
  const hasDonor = donorAcceptor[i] === DONOR || donorAcceptor[j] === DONOR;
  const gamma = (R_ii - R_jj) / (R_ii + R_jj);
  const R_ij = 0.5 * (R_ii + R_jj) * (hasDonor ? 1 : 1 + 0.2 * (1 - Math.exp(-12 * gamma * gamma)));
  const dispersion = Math.sqrt(alpha_i / effectiveElectrons[i]) + Math.sqrt(alpha_j / effectiveElectrons[j]);
  const depth = (181.16 * scaleG[i] * scaleG[j] * alpha_i * alpha_j) / (dispersion * R_ij ** 6);
  const bonded = hasDonor && (donorAcceptor[i] === ACCEPTOR || donorAcceptor[j] === ACCEPTOR);
  return bonded ? { distance: 0.8 * R_ij, depth: 0.5 * depth } : { distance: R_ij, depth };
}

/** Energy of one pair in kcal/mol at the distance r, from R*_ij (both in angstrom) and the well depth in kcal/mol. */
export function vanDerWaals(r: number, distance: number, depth: number): number {
  const rho = r / distance;
  return depth * (1.07 / (rho + 0.07)) ** 7 * (1.12 / (rho ** 7 + 0.12) - 2);
}

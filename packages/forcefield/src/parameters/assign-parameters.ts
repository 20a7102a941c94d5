/** From a molecule to all the constants of its MMFF94 or MMFF94s energy. */
import type { Molecule } from '@tordial/geometry';
import type { VanDerWaalsAtoms } from '../terms/van-der-waals.js';
import { typeAtoms } from '../typing/atom-types.js';
import { formalCharges } from '../typing/formal-charges.js';
import type { SymbolicType } from '../typing/symbolic-types.js';
import { type AngleBendingParameters, assignAngleBending } from './angle-bending-parameters.js';
import { assignBondStretching, type BondStretchingParameters } from './bond-stretching-parameters.js';
import { bondClasses } from './interaction-classes.js';
import { assignOutOfPlane, type OutOfPlaneParameters } from './out-of-plane-parameters.js';
import { partialCharges } from './partial-charges.js';
import { assignStretchBend, type StretchBendParameters } from './stretch-bend-parameters.js';
import { assignTorsions, type TorsionParameters } from './torsion-parameters.js';
import { assignVanDerWaals } from './van-der-waals-parameters.js';
import type { Mmff94Variant } from './variant.js';

export type { Mmff94Variant } from './variant.js';

/** Types, charges and constants. Arrays of atoms have one entry an atom; each table has a class and a source for every row. */
export interface Mmff94Parameters {
  readonly variant: Mmff94Variant;
  /** Numeric types, 1 to 99. */
  readonly atomTypes: Uint8Array;
  readonly symbolicTypes: readonly SymbolicType[];
  /** Formal charges as the force field shares them, elementary charges. */
  readonly formalCharges: Float64Array;
  /** Elementary charges. */
  readonly partialCharges: Float64Array;
  /** 1 for an atom in an aromatic ring of five or six. */
  readonly aromatic: Uint8Array;
  readonly bondStretching: BondStretchingParameters;
  readonly angleBending: AngleBendingParameters;
  readonly stretchBend: StretchBendParameters;
  readonly outOfPlane: OutOfPlaneParameters;
  readonly torsion: TorsionParameters;
  readonly vanDerWaals: VanDerWaalsAtoms;
}

/**
 * Assigns types, charges and the constants of every interaction of a molecule. Both writings of a structure (dative or hypervalent) give
 * the same. Throws `mmff94/atom-type` for an atom that MMFF94 does not cover and `mmff94/parameter` for an interaction that has
 * neither constants nor a rule; both name the atoms.
 */
export function assignParameters(molecule: Molecule, variant: Mmff94Variant): Mmff94Parameters {
  const typing = typeAtoms(molecule);
  const classes = bondClasses(typing);
  const formal = formalCharges(typing);
  const bondStretching = assignBondStretching(typing, classes);
  const angleBending = assignAngleBending(typing, bondStretching);
  return {
    variant,
    atomTypes: typing.atomTypes,
    symbolicTypes: typing.symbolicTypes,
    formalCharges: formal,
    partialCharges: partialCharges(typing, formal, classes),
    aromatic: typing.aromaticity.atoms,
    bondStretching,
    angleBending,
    stretchBend: assignStretchBend(typing, bondStretching, angleBending),
    outOfPlane: assignOutOfPlane(typing, variant),
    torsion: assignTorsions(typing, classes, variant),
    vanDerWaals: assignVanDerWaals(typing.atomTypes),
  };
}

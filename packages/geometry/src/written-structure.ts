/** A structure as a line or file writes it, before hydrogens are added and alternating bonds are placed. */

/** Bond order of a bond written as aromatic; becomes 1 or 2 when alternating bonds are placed. */
export const AROMATIC_ORDER = 4;

/** In a ligand list: the first of the hydrogens that the atom's own symbol implies ([C@H]). */
export const OWN_HYDROGEN = -2;

export interface WrittenAtom {
  readonly atomicNumber: number;
  readonly isotope: number;
  readonly charge: number;
  /** Written in lower case, or at the end of a bond written as aromatic. */
  aromatic: boolean;
  /** Hydrogens stated with the atom, beyond those that are atoms of their own; -1: as many as the normal valence asks for. */
  readonly hydrogens: number;
  /** How the atom is named in messages: "atom 3 (N, character 7)". */
  readonly label: string;
}

export interface WrittenBond {
  readonly a: number;
  readonly b: number;
  /** 1, 2, 3 or AROMATIC_ORDER. */
  order: number;
}

/** Bond orders as the empirical rules read them. */
import type { AtomTyping } from '../typing/atom-types.js';
import { typeProperties } from './type-properties.js';

/** A bond of an aromatic ring between two atoms that have their types from such a ring. */
export const AROMATIC = 1.5;
/** A bond of an aromatic ring that the rules do not cover, neither single nor double: that of the oxygen in pyrylium. */
export const UNCOVERED = 0;

/** Types given in aromatic rings whose flag in MMFFPROP is 0 all the same; the rows of MMFFTOR made by rule treat them as aromatic. */
const UNFLAGGED = [76, 80];

/** 1, 2 or 3, AROMATIC or UNCOVERED; the same for every Kekule writing of an aromatic ring. */
export function ruleBondOrder({ form, atomTypes, aromaticity }: AtomTyping, bond: number): number {
  if (!aromaticity.bonds[bond]) return form.order[bond];
  const { a, b } = form.molecule.bonds;
  return isAromaticType(atomTypes[a[bond]]) && isAromaticType(atomTypes[b[bond]]) ? AROMATIC : UNCOVERED;
}

function isAromaticType(type: number): boolean {
  return typeProperties().arom[type] === 1 || UNFLAGGED.includes(type);
}

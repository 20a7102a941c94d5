/**
 * Bond stretching constants by rule, for pairs of types that MMFFBOND does not list.
 *
 * Reference length, after Schomaker and Stevenson as modified by Blom and Haaland:
 *
 *   r0 = r_i + r_j - c |chi_i - chi_j|^1.4
 *
 * with covalent radii r (angstrom), which shrink with bond order and between two unsaturated atoms, and Allred-Rochow electronegativities
 * chi; c = 0.05 with hydrogen, 0.085 (Blom and Haaland's) between atoms of the row Li to F, 0.08 with an atom beyond it.
 * The printed force constants of the validation suite tell r0 to 1e-5 angstrom: O-H 0.97781 (hydroxide ion), N-F 1.37861 (ERULE_06), P-Si 2.22378
 * (ERULE_03); a row of MMFFBOND made by the rule, N-H 1.01886. O-H and N-H confirm c = 0.05 and that nothing shrinks in bonds to hydrogen. P-Si alone
 * sets c = 0.08 beyond the first row, and fluorine's electronegativity, 4.123, is fitted to N-F alone (published: 4.10, in one copy 4.12). That
 * radii shrink in a single bond only between two unsaturated atoms is a choice; no published constant tests it.
 *
 * Force constant, by the inverse sixth power from a reference of the same elements:
 *
 *   k = k_ref (r_ref / r0)^6
 *
 * or, without a reference, by Badger's rule in the form of Herschbach and Laurie: k = 10^(-(r0 - a) / d).
 *
 * Sources: T. A. Halgren, J. Comput. Chem. 17, 616 (1996); R. Blom, A. Haaland, J. Mol. Struct. 128, 21 (1985);
 * D. R. Herschbach, V. W. Laurie, J. Chem. Phys. 35, 458 (1961).
 */
import { key3, keyedTable, lazily, numbers } from './keyed-table.js';
import { periodicRow } from './periodic-row.js';
import { AROMATIC, UNCOVERED } from './rule-bond-order.js';
import { BOND_RULE, COVALENT_RADII, HERSCHBACH_LAURIE } from './tables.generated.js';
import { typeProperties } from './type-properties.js';

const HYDROGEN = 1;
const EXPONENT = 1.4;
/** c with hydrogen, between two atoms of the row Li to F, and for all other pairs. */
const C_HYDROGEN = 0.05;
const C_FIRST_ROW = 0.085;
const C_BEYOND = 0.08;

/** Orders of partial double bonds, aromatic ones among them, beside single, double and triple. */
const STRONG_PARTIAL = 4;
const WEAK_PARTIAL = 5;

/** How much each radius shrinks, angstrom, by bond order. */
const SHRINK_BY_ORDER: Readonly<Record<number, number>> = {
  [UNCOVERED]: 0,
  2: 0.1,
  3: 0.17,
  [STRONG_PARTIAL]: 0.075,
  [WEAK_PARTIAL]: 0.04,
};
/** How much the radius of an atom in a single bond shrinks, angstrom, by its type's mltb (2 for sp2, 3 for sp). */
const SHRINK_BY_MULTIPLICITY = [0, 0, 0.03, 0.08];

const covalent = lazily(() => {
  const data = numbers(COVALENT_RADII);
  const radius = new Float64Array(128);
  const electronegativity = new Float64Array(128);
  for (let at = 0; at < data.length; at += 3) {
    radius[data[at]] = data[at + 1];
    electronegativity[data[at]] = data[at + 2];
  }
  return { radius, electronegativity };
});

const references = lazily(() => keyedTable(BOND_RULE, 2, 2, (data, at) => [key3(0, 0, data[at], data[at + 1])]));
const herschbachLaurie = lazily(() => keyedTable(HERSCHBACH_LAURIE, 2, 3, (data, at) => [key3(0, 0, data[at], data[at + 1])]));

/** The order that decides how much the radii shrink: partial double bonds by the types' pi electrons. */
function lengthOrder(order: number, type_i: number, type_j: number): number {
  const { mltb, pilp } = typeProperties();
  if (order === AROMATIC) return pilp[type_i] || pilp[type_j] ? WEAK_PARTIAL : STRONG_PARTIAL;
  if (order !== 1) return order;
  if (mltb[type_i] === 1 && mltb[type_j] === 1) return STRONG_PARTIAL;
  if (mltb[type_i] * mltb[type_j] === 2) return WEAK_PARTIAL;
  return 1;
}

/** Reference length (angstrom) of a bond of this order (`ruleBondOrder`) between atoms of these types; undefined for elements without a radius. */
export function empiricalLength(bondOrder: number, type_i: number, type_j: number): number | undefined {
  const { atomicNumber, mltb } = typeProperties();
  const { radius, electronegativity } = covalent();
  const element_i = atomicNumber[type_i];
  const element_j = atomicNumber[type_j];
  let r_i = radius[element_i];
  let r_j = radius[element_j];
  if (r_i === 0 || r_j === 0) return undefined;
  const order = lengthOrder(bondOrder, type_i, type_j);
  const hydrogen = element_i === HYDROGEN || element_j === HYDROGEN;
  if (order !== 1) {
    r_i -= SHRINK_BY_ORDER[order];
    r_j -= SHRINK_BY_ORDER[order];
  } else if (mltb[type_i] > 1 && mltb[type_j] > 1) {
    r_i -= SHRINK_BY_MULTIPLICITY[mltb[type_i]];
    r_j -= SHRINK_BY_MULTIPLICITY[mltb[type_j]];
  }
  const firstRow = periodicRow(element_i) === 1 && periodicRow(element_j) === 1;
  const c = hydrogen ? C_HYDROGEN : firstRow ? C_FIRST_ROW : C_BEYOND;
  return r_i + r_j - c * Math.abs(electronegativity[element_i] - electronegativity[element_j]) ** EXPONENT;
}

/** Force constant (md/angstrom) of a bond between two elements at its reference length (angstrom); undefined for elements without a rule. */
export function empiricalForce(element_i: number, element_j: number, length: number): number | undefined {
  const low = Math.min(element_i, element_j);
  const high = Math.max(element_i, element_j);
  const { rows, values } = references();
  const reference = rows.get(key3(0, 0, low, high));
  if (reference !== undefined) return values[2 * reference + 1] * (values[2 * reference] / length) ** 6;

  const row_i = periodicRow(low);
  const row_j = periodicRow(high);
  const badger = herschbachLaurie();
  const row = badger.rows.get(key3(0, 0, Math.min(row_i, row_j), Math.max(row_i, row_j)));
  if (row === undefined) return undefined;
  return 10 ** (-(length - badger.values[3 * row]) / badger.values[3 * row + 1]);
}

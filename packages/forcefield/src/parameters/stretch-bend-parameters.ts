/**
 * Constants of stretch-bend coupling for every angle but those at a linear centre: MMFFSTBN by types, else MMFFDFSB by the rows of the
 * periodic table.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 and 520 (1996).
 */
import type { StretchBendTable } from '../terms/stretch-bend.js';
import type { AtomTyping } from '../typing/atom-types.js';
import type { AngleBendingParameters } from './angle-bending-parameters.js';
import { type BondStretchingParameters, noParameter } from './bond-stretching-parameters.js';
import { stretchBendClass } from './interaction-classes.js';
import { key3, keyedTable, lazily } from './keyed-table.js';
import { periodicRow } from './periodic-row.js';
import { EMPIRICAL, SPECIFIC } from './source.js';
import { STRETCH_BEND_ROWS, STRETCH_BENDS } from './tables.generated.js';

/** One row a coupled angle, in the order of the angles. */
export interface StretchBendParameters extends StretchBendTable {
  readonly class: Uint8Array;
  /** Indices into PARAMETER_SOURCES; a default by rows of the periodic table counts as an empirical rule. */
  readonly source: Uint8Array;
}

/** Force constants i-j and k-j by class and types, as listed. */
const table = lazily(() => keyedTable(STRETCH_BENDS, 4, 2, (data, at) => [key3(data[at], data[at + 1], data[at + 2], data[at + 3])]));
const defaults = lazily(() => keyedTable(STRETCH_BEND_ROWS, 3, 2, (data, at) => [key3(0, data[at], data[at + 1], data[at + 2])]));

/** Throws `mmff94/parameter` for an angle whose elements have no default. */
export function assignStretchBend(
  { form, atomTypes }: AtomTyping,
  bonds: BondStretchingParameters,
  angles: AngleBendingParameters,
): StretchBendParameters {
  const { element } = form;
  let count = 0;
  for (let n = 0; n < angles.linear.length; n++) if (angles.linear[n] === 0) count++;
  const parameters = {
    i: new Int32Array(count),
    j: new Int32Array(count),
    k: new Int32Array(count),
    length_ij: new Float64Array(count),
    length_kj: new Float64Array(count),
    angle: new Float64Array(count),
    force_ij: new Float64Array(count),
    force_kj: new Float64Array(count),
    class: new Uint8Array(count),
    source: new Uint8Array(count),
  };

  let n = 0;
  for (let m = 0; m < angles.linear.length; m++) {
    if (angles.linear[m]) continue;
    const i = angles.i[m] / 3;
    const j = angles.j[m] / 3;
    const k = angles.k[m] / 3;
    const bond_ij = angles.bond_ij[m];
    const bond_jk = angles.bond_jk[m];
    const class_ij = bonds.class[bond_ij];
    const class_jk = bonds.class[bond_jk];
    const type_i = atomTypes[i];
    const type_k = atomTypes[k];

    // rows are listed from the lower type to the higher, between equal types from the class 1 bond
    let turned = type_i > type_k || (type_i === type_k && class_ij < class_jk);
    const class_ = turned ? stretchBendClass(class_jk, class_ij, angles.class[m]) : stretchBendClass(class_ij, class_jk, angles.class[m]);
    let { rows, values } = table();
    let source = SPECIFIC;
    let row = rows.get(key3(class_, turned ? type_k : type_i, atomTypes[j], turned ? type_i : type_k));
    if (row === undefined) {
      source = EMPIRICAL;
      ({ rows, values } = defaults());
      const row_i = periodicRow(element[i]);
      const row_k = periodicRow(element[k]);
      turned = row_i > row_k;
      row = rows.get(key3(0, Math.min(row_i, row_k), periodicRow(element[j]), Math.max(row_i, row_k)));
    }
    if (row === undefined) throw noParameter(`the stretch-bend coupling of atoms ${i}, ${j} and ${k}`, { atom: j });

    parameters.i[n] = angles.i[m];
    parameters.j[n] = angles.j[m];
    parameters.k[n] = angles.k[m];
    parameters.length_ij[n] = bonds.length[bond_ij];
    parameters.length_kj[n] = bonds.length[bond_jk];
    parameters.angle[n] = angles.angle[m];
    parameters.force_ij[n] = values[2 * row + (turned ? 1 : 0)];
    parameters.force_kj[n] = values[2 * row + (turned ? 0 : 1)];
    parameters.class[n] = class_;
    parameters.source[n] = source;
    n++;
  }
  return parameters;
}

/**
 * Constants of angle bending for every angle of a molecule: MMFFANG by types, by the equivalent types of the outer atoms, by the centre
 * alone (which gives the angle only), else the empirical rule.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 and 616 (1996), step-down protocol 1-1-1, 2-2-2, 3-2-3, 5-2-5; molecule
 * ERULE_07 of the validation suite takes its angle 8-1-22 from the row 8-1-1, level 4 of the equivalences, so 4-2-4 comes before 5-2-5.
 */
import type { AngleBendingTable } from '../terms/angle-bending.js';
import type { AtomTyping } from '../typing/atom-types.js';
import { type BondStretchingParameters, noParameter } from './bond-stretching-parameters.js';
import { empiricalAngle, empiricalAngleForce } from './empirical-angle.js';
import { angleClass, smallRingOfAngle } from './interaction-classes.js';
import { key3, keyedTable, lazily } from './keyed-table.js';
import { EMPIRICAL, EMPIRICAL_FORCE, EQUIVALENT, SPECIFIC, WILDCARD } from './source.js';
import { ANGLES } from './tables.generated.js';
import { levelFour, levelThree, typeProperties } from './type-properties.js';

/** One row an angle i-j-k, by centre j and then by i < k. */
export interface AngleBendingParameters extends AngleBendingTable {
  readonly class: Uint8Array;
  /** Indices into PARAMETER_SOURCES. */
  readonly source: Uint8Array;
  /** Bonds i-j and j-k of each angle. */
  readonly bond_ij: Int32Array;
  readonly bond_jk: Int32Array;
}

/** Force constant and angle by class and types. */
const table = lazily(() =>
  keyedTable(ANGLES, 4, 2, (data, at) => [
    key3(data[at], data[at + 1], data[at + 2], data[at + 3]),
    key3(data[at], data[at + 3], data[at + 2], data[at + 1]),
  ]),
);

/** Throws `mmff94/parameter` for an angle without constants and without a rule. */
export function assignAngleBending(typing: AtomTyping, bonds: BondStretchingParameters): AngleBendingParameters {
  const { form, atomTypes } = typing;
  const { element, degree } = form;
  const { neighbours } = form.molecule;
  const { rows, values } = table();
  const { lin } = typeProperties();
  const equivalent = levelThree();
  const equivalent4 = levelFour();
  let count = 0;
  for (let j = 0; j < degree.length; j++) count += (degree[j] * (degree[j] - 1)) / 2;
  const parameters = {
    i: new Int32Array(count),
    j: new Int32Array(count),
    k: new Int32Array(count),
    angle: new Float64Array(count),
    force: new Float64Array(count),
    linear: new Uint8Array(count),
    class: new Uint8Array(count),
    source: new Uint8Array(count),
    bond_ij: new Int32Array(count),
    bond_jk: new Int32Array(count),
  };

  let n = 0;
  for (let j = 0; j < degree.length; j++)
    for (let p = neighbours.start[j]; p < neighbours.start[j + 1]; p++)
      for (let q = p + 1; q < neighbours.start[j + 1]; q++) {
        const i = neighbours.atom[p];
        const k = neighbours.atom[q];
        const bond_ij = neighbours.bond[p];
        const bond_jk = neighbours.bond[q];
        const ringSize = smallRingOfAngle(typing, i, j, k);
        const class_ = angleClass(bonds.class[bond_ij] + bonds.class[bond_jk], ringSize);
        const type_i = atomTypes[i];
        const type_j = atomTypes[j];
        const type_k = atomTypes[k];

        let source = SPECIFIC;
        let row = rows.get(key3(class_, type_i, type_j, type_k));
        if (row === undefined) {
          source = EQUIVALENT;
          row = rows.get(key3(class_, equivalent[type_i], type_j, equivalent[type_k]));
        }
        if (row === undefined) row = rows.get(key3(class_, equivalent4[type_i], type_j, equivalent4[type_k]));
        if (row === undefined) {
          source = WILDCARD;
          row = rows.get(key3(class_, 0, type_j, 0));
        }
        let angle: number;
        let force: number | undefined = 0;
        if (row === undefined) {
          source = EMPIRICAL;
          angle = empiricalAngle(type_j, ringSize);
        } else {
          force = values[2 * row];
          angle = values[2 * row + 1];
          if (force === 0) source = EMPIRICAL_FORCE;
        }
        if (source === EMPIRICAL || source === EMPIRICAL_FORCE)
          force = empiricalAngleForce(element[i], element[j], element[k], bonds.length[bond_ij], bonds.length[bond_jk], angle, ringSize);
        if (force === undefined)
          throw noParameter(`the angle between atoms ${i}, ${j} and ${k} (types ${type_i}, ${type_j} and ${type_k})`, { atom: j });

        parameters.i[n] = 3 * i;
        parameters.j[n] = 3 * j;
        parameters.k[n] = 3 * k;
        parameters.angle[n] = angle;
        parameters.force[n] = force;
        parameters.linear[n] = lin[type_j];
        parameters.class[n] = class_;
        parameters.source[n] = source;
        parameters.bond_ij[n] = bond_ij;
        parameters.bond_jk[n] = bond_jk;
        n++;
      }
  return parameters;
}

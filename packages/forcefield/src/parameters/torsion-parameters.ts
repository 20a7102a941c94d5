/**
 * Constants of every torsion of a molecule: MMFFTOR by types, with one outer atom as a wildcard, with both, else the empirical rule.
 * A torsion in a ring that the table does not list under its ring class goes straight to the rule, not to the class it has outside the ring:
 * the rule's unrounded numbers are what the molecules ERULE_01, 02, 04 and 07 of the validation suite hold.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 and 587 (1996), step-down protocol 1-1-1-1, 2-2-2-2, 3-2-2-5, 5-2-2-3, 5-2-2-5;
 * 20, 720 (1999) for MMFF94s.
 */
import type { TorsionTable } from '../terms/torsion.js';
import type { AtomTyping } from '../typing/atom-types.js';
import { noParameter } from './bond-stretching-parameters.js';
import { empiricalTorsion } from './empirical-torsion.js';
import { torsionClass } from './interaction-classes.js';
import { type KeyedTable, key4, keyedTable, lazily } from './keyed-table.js';
import { ruleBondOrder } from './rule-bond-order.js';
import { EMPIRICAL, SPECIFIC, WILDCARD } from './source.js';
import { TORSIONS, TORSIONS_STATIC } from './tables.generated.js';
import { levelThree, typeProperties } from './type-properties.js';
import type { Mmff94Variant } from './variant.js';

/** One row a torsion i-j-k-l, by the bond j-k; torsions about a linear atom have none. */
export interface TorsionParameters extends TorsionTable {
  readonly class: Uint8Array;
  /** Indices into PARAMETER_SOURCES. */
  readonly source: Uint8Array;
}

const parse = (text: string): KeyedTable =>
  keyedTable(text, 5, 3, (data, at) => [
    key4(data[at], data[at + 1], data[at + 2], data[at + 3], data[at + 4]),
    key4(data[at], data[at + 4], data[at + 3], data[at + 2], data[at + 1]),
  ]);
const table = lazily(() => parse(TORSIONS));
const staticTable = lazily(() => parse(TORSIONS_STATIC));

interface Found {
  readonly values: Float64Array;
  readonly row: number;
  readonly source: number;
}

/** Throws `mmff94/parameter` for a torsion without constants and without a rule. */
export function assignTorsions(typing: AtomTyping, bondClasses: Uint8Array, variant: Mmff94Variant): TorsionParameters {
  const { form, atomTypes } = typing;
  const { neighbours, bonds } = form.molecule;
  const { lin } = typeProperties();
  const equivalent = levelThree();
  const base = table();
  const changed = variant === 'MMFF94s' ? staticTable() : undefined;

  const rowOf = (class_: number, i: number, j: number, k: number, l: number, source: number): Found | undefined => {
    const key = key4(class_, i, j, k, l);
    const changedRow = changed?.rows.get(key);
    if (changed && changedRow !== undefined) return { values: changed.values, row: changedRow, source };
    const row = base.rows.get(key);
    return row === undefined ? undefined : { values: base.values, row, source };
  };
  const find = (class_: number, i: number, j: number, k: number, l: number): Found | undefined =>
    rowOf(class_, i, j, k, l, SPECIFIC) ??
    rowOf(class_, equivalent[i], j, k, 0, WILDCARD) ??
    rowOf(class_, 0, j, k, equivalent[l], WILDCARD) ??
    rowOf(class_, 0, j, k, 0, WILDCARD);

  let count = 0;
  for (let axis = 0; axis < bonds.count; axis++) forEachTorsion(axis, () => count++);
  const parameters = {
    i: new Int32Array(count),
    j: new Int32Array(count),
    k: new Int32Array(count),
    l: new Int32Array(count),
    v1: new Float64Array(count),
    v2: new Float64Array(count),
    v3: new Float64Array(count),
    class: new Uint8Array(count),
    source: new Uint8Array(count),
  };

  let n = 0;
  for (let axis = 0; axis < bonds.count; axis++) {
    const type_j = atomTypes[bonds.a[axis]];
    const type_k = atomTypes[bonds.b[axis]];
    forEachTorsion(axis, (i, j, k, l) => {
      const class_ = torsionClass(typing, bondClasses, i, j, k, l);
      const found = find(class_, atomTypes[i], type_j, type_k, atomTypes[l]);
      parameters.i[n] = 3 * i;
      parameters.j[n] = 3 * j;
      parameters.k[n] = 3 * k;
      parameters.l[n] = 3 * l;
      parameters.class[n] = class_;
      if (found) {
        parameters.v1[n] = found.values[3 * found.row];
        parameters.v2[n] = found.values[3 * found.row + 1];
        parameters.v3[n] = found.values[3 * found.row + 2];
        parameters.source[n] = found.source;
      } else {
        const rule = empiricalTorsion(type_j, type_k, ruleBondOrder(typing, axis));
        if (rule === undefined) throw noParameter(`torsions about atoms ${j} and ${k} (types ${type_j} and ${type_k})`, { bond: axis });
        parameters.v1[n] = rule.v1;
        parameters.v2[n] = rule.v2;
        parameters.v3[n] = rule.v3;
        parameters.source[n] = EMPIRICAL;
      }
      n++;
    });
  }
  return parameters;

  function forEachTorsion(axis: number, visit: (i: number, j: number, k: number, l: number) => void): void {
    const j = bonds.a[axis];
    const k = bonds.b[axis];
    if (lin[atomTypes[j]] || lin[atomTypes[k]]) return;
    for (let p = neighbours.start[j]; p < neighbours.start[j + 1]; p++)
      for (let q = neighbours.start[k]; q < neighbours.start[k + 1]; q++) {
        const i = neighbours.atom[p];
        const l = neighbours.atom[q];
        if (i !== k && l !== j && i !== l) visit(i, j, k, l);
      }
  }
}

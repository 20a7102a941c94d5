/**
 * Constants of out-of-plane bending at every centre with three neighbours: MMFFOOP by types, by equivalent types of the outer atoms, by
 * the centre alone; a centre that the table does not list has none.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), step-down protocol 1-1-1-1, 2-2-2-2, 3-2-3-3, 5-2-5-5; 20, 720 (1999) for MMFF94s.
 */
import type { OutOfPlaneTable } from '../terms/out-of-plane.js';
import type { AtomTyping } from '../typing/atom-types.js';
import { type KeyedTable, key4, keyedTable, lazily } from './keyed-table.js';
import { EQUIVALENT, SPECIFIC, WILDCARD } from './source.js';
import { OUT_OF_PLANE, OUT_OF_PLANE_STATIC } from './tables.generated.js';
import { levelThree } from './type-properties.js';
import type { Mmff94Variant } from './variant.js';

/** Three rows a centre: each neighbour in turn is the atom l out of the plane of the centre j and the other two. */
export interface OutOfPlaneParameters extends OutOfPlaneTable {
  /** Indices into PARAMETER_SOURCES. */
  readonly source: Uint8Array;
}

/** A row's key: the centre, then the outer types ascending. */
function rowKey(centre: number, a: number, b: number, c: number): number {
  const low = Math.min(a, b, c);
  const high = Math.max(a, b, c);
  return key4(0, centre, low, a + b + c - low - high, high);
}

const parse = (text: string): KeyedTable =>
  keyedTable(text, 4, 1, (data, at) => [rowKey(data[at + 1], data[at], data[at + 2], data[at + 3])]);
const table = lazily(() => parse(OUT_OF_PLANE));
const staticTable = lazily(() => parse(OUT_OF_PLANE_STATIC));

/** Rows with a force constant of zero are left out: they add nothing. */
export function assignOutOfPlane({ form, atomTypes }: AtomTyping, variant: Mmff94Variant): OutOfPlaneParameters {
  const { neighbours } = form.molecule;
  const equivalent = levelThree();
  const changed = variant === 'MMFF94s' ? staticTable() : undefined;

  const find = (key: number): number | undefined => {
    const row = changed?.rows.get(key);
    if (changed && row !== undefined) return changed.values[row];
    const base = table().rows.get(key);
    return base === undefined ? undefined : table().values[base];
  };

  const centres: number[] = [];
  const forces: number[] = [];
  const sources: number[] = [];
  for (let j = 0; j < atomTypes.length; j++) {
    if (form.degree[j] !== 3) continue;
    const at = neighbours.start[j];
    const a = atomTypes[neighbours.atom[at]];
    const b = atomTypes[neighbours.atom[at + 1]];
    const c = atomTypes[neighbours.atom[at + 2]];
    let source = SPECIFIC;
    let force = find(rowKey(atomTypes[j], a, b, c));
    if (force === undefined) {
      source = EQUIVALENT;
      force = find(rowKey(atomTypes[j], equivalent[a], equivalent[b], equivalent[c]));
    }
    if (force === undefined) {
      source = WILDCARD;
      force = find(rowKey(atomTypes[j], 0, 0, 0));
    }
    if (force === undefined || force === 0) continue;
    centres.push(j);
    forces.push(force);
    sources.push(source);
  }

  const count = 3 * centres.length;
  const parameters = {
    i: new Int32Array(count),
    j: new Int32Array(count),
    k: new Int32Array(count),
    l: new Int32Array(count),
    force: new Float64Array(count),
    source: new Uint8Array(count),
  };
  centres.forEach((j, m) => {
    const at = neighbours.start[j];
    for (let out = 0; out < 3; out++) {
      const n = 3 * m + out;
      parameters.i[n] = 3 * neighbours.atom[at + (out === 0 ? 1 : 0)];
      parameters.j[n] = 3 * j;
      parameters.k[n] = 3 * neighbours.atom[at + (out === 2 ? 1 : 2)];
      parameters.l[n] = 3 * neighbours.atom[at + out];
      parameters.force[n] = forces[m];
      parameters.source[n] = sources[m];
    }
  });
  return parameters;
}

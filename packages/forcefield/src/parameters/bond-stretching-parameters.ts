/** Constants of bond stretching for every bond of a molecule: MMFFBOND, else the empirical rule. */
import { type ErrorPlace, TordialError } from '@tordial/geometry';
import type { BondStretchingTable } from '../terms/bond-stretching.js';
import type { AtomTyping } from '../typing/atom-types.js';
import { empiricalForce, empiricalLength } from './empirical-bond.js';
import { key3, keyedTable, lazily } from './keyed-table.js';
import { ruleBondOrder } from './rule-bond-order.js';
import { EMPIRICAL, SPECIFIC } from './source.js';
import { BONDS } from './tables.generated.js';

/** One row a bond, in the order of the molecule's bonds. */
export interface BondStretchingParameters extends BondStretchingTable {
  readonly class: Uint8Array;
  /** Indices into PARAMETER_SOURCES. */
  readonly source: Uint8Array;
}

/** Force constant and length by class and types. */
const table = lazily(() =>
  keyedTable(BONDS, 3, 2, (data, at) => [key3(data[at], 0, data[at + 1], data[at + 2]), key3(data[at], 0, data[at + 2], data[at + 1])]),
);

/** Throws `mmff94/parameter` for a bond without constants and without a rule. */
export function assignBondStretching(typing: AtomTyping, classes: Uint8Array): BondStretchingParameters {
  const { form, atomTypes } = typing;
  const { a, b, count } = form.molecule.bonds;
  const { rows, values } = table();
  const parameters = {
    i: new Int32Array(count),
    j: new Int32Array(count),
    length: new Float64Array(count),
    force: new Float64Array(count),
    class: classes,
    source: new Uint8Array(count),
  };
  for (let n = 0; n < count; n++) {
    const type_i = atomTypes[a[n]];
    const type_j = atomTypes[b[n]];
    parameters.i[n] = 3 * a[n];
    parameters.j[n] = 3 * b[n];
    const row = rows.get(key3(classes[n], 0, type_i, type_j));
    if (row !== undefined) {
      parameters.force[n] = values[2 * row];
      parameters.length[n] = values[2 * row + 1];
      parameters.source[n] = SPECIFIC;
      continue;
    }
    const length = empiricalLength(ruleBondOrder(typing, n), type_i, type_j);
    const force = length === undefined ? undefined : empiricalForce(form.element[a[n]], form.element[b[n]], length);
    if (length === undefined || force === undefined)
      throw noParameter(`the bond between atoms ${a[n]} and ${b[n]} (types ${type_i} and ${type_j})`, { bond: n });
    parameters.length[n] = length;
    parameters.force[n] = force;
    parameters.source[n] = EMPIRICAL;
  }
  return parameters;
}

/** The error for an interaction that the force field has neither constants nor a rule for. */
export function noParameter(interaction: string, place: ErrorPlace): TordialError {
  return new TordialError('mmff94/parameter', `MMFF94 has no constants and no rule for ${interaction}`, place);
}

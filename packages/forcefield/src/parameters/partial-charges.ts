/**
 * Partial charges from bond-charge increments.
 *
 *   q_i = (1 - M_i u_i) q0_i + sum_k (u_k q0_k + w_ki)
 *
 * over the M_i neighbours k; q0 are the formal charges of MMFF94, u the part of it that a neighbour takes over (0.5 for a carboxylate
 * oxygen), w_ki the charge that k pushes onto i along their bond. An increment that is not tabulated is the difference of the two types'
 * partial increments.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 520 (1996), equations 15 to 17; tables MMFFCHG and MMFFPBCI.
 */
import type { AtomTyping } from '../typing/atom-types.js';
import { key3, keyedTable, lazily, numbers } from './keyed-table.js';
import { CHARGE_INCREMENTS, PARTIAL_CHARGE_INCREMENTS } from './tables.generated.js';

/** Increments by bond class and types, in both directions: the value is what the first atom gives to the second. */
const increments = lazily(() => keyedTable(CHARGE_INCREMENTS, 3, 1, (data, at) => [key3(data[at], 0, data[at + 1], data[at + 2])]));

const partialIncrements = lazily(() => {
  const data = numbers(PARTIAL_CHARGE_INCREMENTS);
  const increment = new Float64Array(100);
  const shared = new Float64Array(100);
  for (let at = 0; at < data.length; at += 3) {
    increment[data[at]] = data[at + 1];
    shared[data[at]] = data[at + 2];
  }
  return { increment, shared };
});

/** Charge that an atom of type i gives to a bonded atom of type j, elementary charges. */
export function chargeIncrement(bondClass: number, i: number, j: number): number {
  const { rows, values } = increments();
  const forward = rows.get(key3(bondClass, 0, i, j));
  if (forward !== undefined) return values[forward];
  const backward = rows.get(key3(bondClass, 0, j, i));
  if (backward !== undefined) return -values[backward];
  const { increment } = partialIncrements();
  return increment[j] - increment[i];
}

/** Partial charges, one an atom, in elementary charges; they sum to the formal charges' sum. */
export function partialCharges({ form, atomTypes }: AtomTyping, formalCharges: Float64Array, bondClasses: Uint8Array): Float64Array {
  const { neighbours } = form.molecule;
  const { shared } = partialIncrements();
  const charges = new Float64Array(atomTypes.length);
  for (let i = 0; i < charges.length; i++) {
    let charge = (1 - form.degree[i] * shared[atomTypes[i]]) * formalCharges[i];
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) {
      const k = neighbours.atom[n];
      charge += shared[atomTypes[k]] * formalCharges[k] + chargeIncrement(bondClasses[neighbours.bond[n]], atomTypes[k], atomTypes[i]);
    }
    charges[i] = charge;
  }
  return charges;
}

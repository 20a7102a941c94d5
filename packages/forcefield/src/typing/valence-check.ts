/**
 * Whether MMFF94 can hold an atom at all: an element it knows, closed-shell, with a common valence. Everything that falls outside is an
 * error that names the atom; a wrong type would give a wrong energy in silence.
 */
import { untypable, type ValenceForm } from './valence-form.js';

/** Valences of an element by formal charge. */
const VALENCES: Readonly<Record<number, Readonly<Record<number, readonly number[]>>>> = {
  1: { 0: [1] },
  6: { 0: [4], '-1': [3] },
  7: { 0: [3], 1: [4], '-1': [2] },
  8: { 0: [2], 1: [3], '-1': [1] },
  9: { 0: [1] },
  14: { 0: [4] },
  15: { 0: [3, 5], 1: [4] },
  16: { 0: [2, 4, 6], '-1': [1] },
  17: { 0: [1, 7] },
  35: { 0: [1] },
  53: { 0: [1] },
};

/** Charges of the monatomic ions that have a type. */
const IONS: Readonly<Record<number, readonly number[]>> = {
  3: [1],
  9: [-1],
  11: [1],
  12: [2],
  17: [-1],
  19: [1],
  20: [2],
  26: [2, 3],
  29: [1, 2],
  30: [2],
  35: [-1],
};

/** Throws `mmff94/atom-type` for the first atom that MMFF94 has no room for. */
export function checkValences(form: ValenceForm): void {
  const { element, charge, degree, valence } = form;
  for (let i = 0; i < element.length; i++) {
    if (degree[i] === 0) {
      if (IONS[element[i]]?.includes(charge[i])) continue;
      throw untypable(form, i, `a single atom with charge ${charge[i]} is none of its ions`);
    }
    const byCharge = VALENCES[element[i]];
    if (!byCharge)
      throw untypable(
        form,
        i,
        IONS[element[i]] ? 'it knows this metal only as an ion without bonds' : 'the element is outside the force field',
      );
    if (!byCharge[charge[i]]?.includes(valence[i]))
      throw untypable(form, i, `bond orders that sum to ${valence[i]} with charge ${charge[i]} are not a closed-shell valence it covers`);
  }
}

/**
 * Normal valences of neutral and charged main-group atoms, how many hydrogens an atom lacks, and what is no closed-shell structure.
 *
 * A charged atom has the valences of its isoelectronic neighbour (N+ those of C, O- those of F, S+ those of P), the rule of the
 * OpenSMILES specification and of the CTfile formats; metals have none and are taken as written.
 */
import { elementSymbol, valenceElectrons } from './elements.js';
import { TordialError } from './errors.js';
import type { WrittenAtom } from './written-structure.js';

const BY_ELECTRONS: readonly (readonly number[])[] = [[0], [1], [2], [3], [4], [3, 5], [2, 4, 6], [1, 3, 5, 7], [0, 2, 4, 6, 8]];
const NON_METALS = new Set([1, 2, 5, 6, 7, 8, 9, 10, 14, 15, 16, 17, 18, 32, 33, 34, 35, 36, 52, 53, 54]);

/** Valences that an atom of this element and charge normally has, ascending; null for metals, which are not checked. */
export function normalValences(atomicNumber: number, charge: number): readonly number[] | null {
  if (!NON_METALS.has(atomicNumber)) return null;
  if (atomicNumber === 1) return charge === 0 ? [1] : Math.abs(charge) === 1 ? [0] : [];
  const electrons = valenceElectrons(atomicNumber) - charge;
  if (electrons < 0 || electrons > 8) return [];
  const valences = BY_ELECTRONS[electrons];
  if (atomicNumber > 10) return valences;
  // the second period keeps to its octet, but for neutral nitrogen written with five bonds (nitro, azide, N-oxide, nitrile oxide)
  return atomicNumber === 7 && charge === 0 ? [3, 5] : valences.slice(0, 1);
}

/** Hydrogens that fill an atom up to its next normal valence; 0 where it has none or is full. `valence` is the sum of its bond orders. */
export function missingHydrogens(atomicNumber: number, charge: number, valence: number): number {
  // five-valent nitrogen and hypervalent halogens are never completed with hydrogens: four bonds on N are a missing charge
  const valences = normalValences(atomicNumber, charge);
  if (!valences || valences.length === 0) return 0;
  const singleTarget = atomicNumber === 7 || valenceElectrons(atomicNumber) - charge >= 7;
  for (const target of singleTarget ? valences.slice(0, 1) : valences) if (target >= valence) return target - valence;
  return 0;
}

/** Throws `molecule/radical` or `molecule/valence` for an atom whose bonds and charge are no closed-shell structure. */
export function checkValence(atom: WrittenAtom, valence: number, index: number): void {
  const valences = normalValences(atom.atomicNumber, atom.charge);
  if (!valences?.length && valences !== null && atom.charge !== 0)
    throw new TordialError('molecule/valence', `${atom.label}: a charge of ${signed(atom.charge)} is not possible`, { atom: index });
  if (valences === null || valences.includes(valence)) return;
  const symbol = elementSymbol(atom.atomicNumber);
  const charge = atom.charge === 0 ? 'no charge' : `charge ${signed(atom.charge)}`;
  const expected = valences.join(' or ');
  const lacking = valences.find((v) => v > valence);
  if (lacking !== undefined && (lacking - valence) % 2 === 1 && !(atom.atomicNumber === 7 && valence === 4))
    throw new TordialError(
      'molecule/radical',
      `${atom.label}: ${symbol} with ${charge} and a valence of ${valence} is a radical; give it its hydrogens or charge (expected valence ${expected})`,
      { atom: index },
    );
  throw new TordialError(
    'molecule/valence',
    `${atom.label}: ${symbol} with ${charge} cannot have a valence of ${valence}; expected ${expected}${valence === 4 && atom.atomicNumber === 7 ? ' (a positive charge is missing?)' : ''}`,
    { atom: index },
  );
}

const signed = (charge: number): string => (charge > 0 ? `+${charge}` : String(charge));

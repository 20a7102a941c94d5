/** From a written structure to the parts of a molecule: alternating bonds placed, hydrogens added, valences checked. */
import { TordialError } from './errors.js';
import { placeAlternatingBonds } from './kekule.js';
import { checkLimit, type Limits } from './limits.js';
import type { MoleculeParts } from './molecule.js';
import { checkValence, missingHydrogens, normalValences } from './valence.js';
import type { WrittenAtom, WrittenBond } from './written-structure.js';

const HETERO = new Set([7, 8, 16]);
const HALOGENS = new Set([9, 17, 35, 53]);

export interface Assembled {
  readonly parts: MoleculeParts;
  /** Index of the first hydrogen added to each written atom; those of one atom follow one another. */
  readonly firstHydrogen: Int32Array;
  readonly addedHydrogens: Int32Array;
}

/**
 * Completes a written structure. Written atoms keep their indices; added hydrogens follow in ascending order of the atom they sit on.
 * `bonds` are changed in place where they were aromatic. Throws `molecule/kekule`, `molecule/valence`, `molecule/radical`, `limit/atoms`,
 * `limit/rings`, `molecule/empty`.
 */
export function assemble(atoms: readonly WrittenAtom[], bonds: readonly WrittenBond[], limits: Limits): Assembled {
  if (atoms.length === 0) throw new TordialError('molecule/empty', 'the structure has no atoms');
  checkLimit('atoms', atoms.length, limits);
  // more independent cycles than bonds beyond a tree of all atoms are impossible, fewer only with several fragments
  checkLimit('rings', bonds.length - atoms.length + 1, limits);
  placeAlternatingBonds(atoms, bonds);

  const valence = new Int32Array(atoms.length);
  for (const { a, b, order } of bonds) {
    valence[a] += order;
    valence[b] += order;
  }
  // what a hypervalent N or halogen may be doubly bonded to: oxides, azides, diazo compounds
  const oxidised = new Uint8Array(atoms.length);
  const overdone = new Uint8Array(atoms.length);
  for (const { a, b, order } of bonds)
    for (const [i, j] of order > 1
      ? [
          [a, b],
          [b, a],
        ]
      : []) {
      if (HETERO.has(atoms[j].atomicNumber)) oxidised[i] = 1;
      else overdone[i] = 1;
    }
  const addedHydrogens = new Int32Array(atoms.length);
  const firstHydrogen = new Int32Array(atoms.length);
  let next = atoms.length;
  atoms.forEach((atom, i) => {
    addedHydrogens[i] = atom.hydrogens >= 0 ? atom.hydrogens : missingHydrogens(atom.atomicNumber, atom.charge, valence[i]);
    checkValence(atom, valence[i] + addedHydrogens[i], i);
    const [normal] = normalValences(atom.atomicNumber, atom.charge) ?? [valence[i]];
    const isNitrogen = atom.atomicNumber === 7;
    const doubtful = isNitrogen ? !oxidised[i] : HALOGENS.has(atom.atomicNumber) && atom.charge === 0 && overdone[i];
    if (valence[i] > normal && doubtful)
      throw new TordialError(
        'molecule/valence',
        `${atom.label}: ${isNitrogen ? 'nitrogen with five bonds needs a double bond to O, S or N' : 'a halogen can be doubly bonded to O, S or N only'}; a charge may be missing`,
        { atom: i },
      );
    firstHydrogen[i] = next;
    next += addedHydrogens[i];
  });
  checkLimit('atoms', next, limits);

  const atomicNumbers = new Uint8Array(next).fill(1);
  const formalCharges = new Int8Array(next);
  const isotopes = new Uint16Array(next);
  atoms.forEach((atom, i) => {
    atomicNumbers[i] = atom.atomicNumber;
    formalCharges[i] = atom.charge;
    isotopes[i] = atom.isotope;
  });
  const rows: [number, number, number][] = bonds.map(({ a, b, order }) => [a, b, order]);
  addedHydrogens.forEach((count, i) => {
    for (let n = 0; n < count; n++) rows.push([i, firstHydrogen[i] + n, 1]);
  });
  return { parts: { atomicNumbers, formalCharges, isotopes, bonds: rows }, firstHydrogen, addedHydrogens };
}

/**
 * One writing for structures that can be drawn in two ways.
 *
 * MMFF94's atom types are defined for hypervalent sulphur, phosphorus and chlorine (S=O, P=O) and for dative nitrogen (N+-O-); both
 * writings of one structure must come out the same. A positive S, P or Cl takes a double bond to each negative neighbour, a negative
 * charge on S moves to a terminal atom, and a five-valent nitrogen gives one bond up.
 */
import { elementSymbol, type Molecule, neighboursOf, TordialError } from '@tordial/geometry';

/** The molecule with bond orders and charges of the one writing that atom types are read from. */
export interface ValenceForm {
  readonly molecule: Molecule;
  /** Atomic numbers, one an atom. */
  readonly element: Uint8Array;
  /** Bond orders 1, 2, 3; one a bond of the molecule. */
  readonly order: Uint8Array;
  /** Formal charges of this writing, one an atom. */
  readonly charge: Int8Array;
  /** Number of neighbours, one an atom. */
  readonly degree: Uint8Array;
  /** Sum of bond orders, one an atom. */
  readonly valence: Uint8Array;
}

const N = 7;
const O = 8;
const P = 15;
const S = 16;
const Cl = 17;

/** Rewrites hypervalent nitrogen and dative sulphur, phosphorus and chlorine; needs no coordinates and changes nothing else. */
export function valenceForm(molecule: Molecule): ValenceForm {
  const { atomCount, neighbours, bonds } = molecule;
  const element = molecule.atomicNumbers;
  const order = bonds.order.slice();
  const charge = molecule.formalCharges.slice();
  const degree = new Uint8Array(atomCount);
  const valence = new Uint8Array(atomCount);
  for (let i = 0; i < atomCount; i++) {
    degree[i] = neighbours.start[i + 1] - neighbours.start[i];
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) valence[i] += order[neighbours.bond[n]];
  }

  /** Changes the order of one bond and moves the charge that goes with it. */
  const shift = (i: number, n: number, change: 1 | -1) => {
    const j = neighbours.atom[n];
    order[neighbours.bond[n]] += change;
    valence[i] += change;
    valence[j] += change;
    charge[i] -= change;
    charge[j] += change;
  };

  for (let i = 0; i < atomCount; i++) {
    const first = neighbours.start[i];
    const end = neighbours.start[i + 1];
    if (element[i] === S || element[i] === P || element[i] === Cl) {
      // oxygen takes the double bond first, so that S+(O-)(NR-) and its like come out the same in every writing
      for (const wanted of [O, 0])
        for (let n = first; n < end && charge[i] > 0; n++) {
          const j = neighbours.atom[n];
          if (charge[j] < 0 && (wanted === 0 || element[j] === wanted)) shift(i, n, 1);
        }
      // widely copied files, those of the validation suite among them, give the sulphur of R2S=O a double bond and the charge of R2S(2+)-O(-) too
      if (element[i] === S && charge[i] === 2 && valence[i] === 4 && degree[i] === 3) charge[i] = 0;
      for (let n = first; n < end && charge[i] < 0; n++)
        if (order[neighbours.bond[n]] === 2 && degree[neighbours.atom[n]] === 1) shift(i, n, -1);
    }
    if (element[i] === N && charge[i] === 0 && valence[i] === 5) {
      // nitro, N-oxide, azide, diazo: the bond to a terminal oxygen gives way first, then to another terminal atom, then a triple bond
      const yields = (n: number) => {
        const j = neighbours.atom[n];
        if (order[neighbours.bond[n]] === 1) return 0;
        return (degree[j] === 1 ? 2 : 0) + (element[j] === O ? 2 : 0) + (order[neighbours.bond[n]] === 3 ? 1 : 0);
      };
      let chosen = first;
      for (let n = first; n < end; n++) if (yields(n) > yields(chosen)) chosen = n;
      if (yields(chosen) > 0) shift(i, chosen, -1);
    }
  }
  return { molecule, element, order, charge, degree, valence };
}

/** First neighbour of atom i that a bond of this order leads to, -1 where there is none. */
export function neighbourByOrder({ molecule: { neighbours }, order }: ValenceForm, i: number, wanted: number): number {
  for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) if (order[neighbours.bond[n]] === wanted) return neighbours.atom[n];
  return -1;
}

/** Number of neighbours of atom i that are of this element and have no other neighbour. */
export function terminalCount(form: ValenceForm, i: number, element: number): number {
  let count = 0;
  for (const j of neighboursOf(form.molecule, i)) if (form.element[j] === element && form.degree[j] === 1) count++;
  return count;
}

/** Number of neighbours of atom i that are of this element. */
export function elementCount(form: ValenceForm, i: number, element: number): number {
  let count = 0;
  for (const j of neighboursOf(form.molecule, i)) if (form.element[j] === element) count++;
  return count;
}

/** The error for an atom that MMFF94 has no type for; the message names the atom and the reason. */
export function untypable(form: ValenceForm, i: number, reason: string): TordialError {
  const symbol = elementSymbol(form.element[i]);
  return new TordialError('mmff94/atom-type', `MMFF94 has no type for atom ${i} (${symbol}): ${reason}`, { atom: i });
}

/** The separate fragments of a structure: salts, mixtures, solvates. */
import { atomicMass } from './elements.js';
import { createMolecule, type Molecule, neighboursOf, type StereoTable } from './molecule.js';

export interface Fragments {
  readonly count: number;
  /** Number of the fragment that each atom belongs to, counted in the order of their first atoms. */
  readonly ofAtom: Int32Array;
}

/** Finds the fragments that no bond joins. */
export function fragmentsOf(molecule: Pick<Molecule, 'atomCount' | 'neighbours'>): Fragments {
  const ofAtom = new Int32Array(molecule.atomCount).fill(-1);
  let count = 0;
  for (let first = 0; first < molecule.atomCount; first++) {
    if (ofAtom[first] >= 0) continue;
    ofAtom[first] = count;
    const reached = [first];
    for (const i of reached)
      for (const j of neighboursOf(molecule, i))
        if (ofAtom[j] < 0) {
          ofAtom[j] = count;
          reached.push(j);
        }
    count++;
  }
  return { count, ofAtom };
}

/** Each fragment as a molecule of its own, with the old index of each of its atoms; a molecule of one fragment is given as it is. */
export function separateFragments(molecule: Molecule): { readonly molecule: Molecule; readonly atoms: Int32Array }[] {
  const { count, ofAtom } = fragmentsOf(molecule);
  return Array.from({ length: count }, (_, fragment) => {
    const atoms = Int32Array.from(Array.from(ofAtom.keys()).filter((i) => ofAtom[i] === fragment));
    return { molecule: count === 1 ? molecule : part(molecule, atoms), atoms };
  });
}

/**
 * The largest organic fragment as a molecule of its own: among fragments with a carbon bonded to carbon or hydrogen (all, where there is
 * none) the one with the most heavy atoms, then the heaviest, then the first. `atoms` holds the old index of each of its atoms.
 */
export function largestFragment(molecule: Molecule): { readonly molecule: Molecule; readonly atoms: Int32Array } {
  const fragments = separateFragments(molecule);
  const organic = (i: number) =>
    molecule.atomicNumbers[i] === 6 &&
    neighboursOf(molecule, i).some((j) => molecule.atomicNumbers[j] === 6 || molecule.atomicNumbers[j] === 1);
  const measured = fragments.map(({ atoms }, n) => ({
    n,
    measures: [
      atoms.some(organic) ? 1 : 0,
      atoms.filter((i) => molecule.atomicNumbers[i] > 1).length,
      atoms.reduce((mass, i) => mass + atomicMass(molecule.atomicNumbers[i]), 0),
    ],
  }));
  const best = measured.reduce((p, q) => {
    const n = p.measures.findIndex((value, at) => Math.abs(value - q.measures[at]) > 1e-9);
    return n >= 0 && q.measures[n] > p.measures[n] ? q : p;
  });
  return fragments[best.n];
}

/** The given atoms, which no bond joins to others, as a molecule; atom order, name and stereo are kept. */
function part(molecule: Molecule, atoms: Int32Array): Molecule {
  const { bonds, stereo } = molecule;
  const place = new Int32Array(molecule.atomCount).fill(-1);
  atoms.forEach((old, i) => {
    place[old] = i;
  });
  const at = (i: number) => (i < 0 ? i : place[i]);
  const rows: [number, number, number][] = [];
  for (let n = 0; n < bonds.count; n++) if (place[bonds.a[n]] >= 0) rows.push([place[bonds.a[n]], place[bonds.b[n]], bonds.order[n]]);
  const kept: StereoTable = {
    tetrahedral: stereo.tetrahedral.flatMap(({ atom, neighbours: [p, q, r, s], sign }) =>
      place[atom] < 0 ? [] : [{ atom: place[atom], neighbours: [at(p), at(q), at(r), at(s)] as const, sign }],
    ),
    doubleBonds: stereo.doubleBonds.flatMap((bond) => (place[bond.a] < 0 ? [] : [{ ...bond, ...ends(bond) }])),
    axes: stereo.axes.flatMap((axis) => (place[axis.a] < 0 ? [] : [{ ...axis, ...ends(axis) }])),
  };
  return createMolecule({
    atomicNumbers: atoms.map((i) => molecule.atomicNumbers[i]),
    formalCharges: atoms.map((i) => molecule.formalCharges[i]),
    isotopes: atoms.map((i) => molecule.isotopes[i]),
    bonds: rows,
    stereo: kept,
    name: molecule.name,
  });

  function ends({ a, b, substituentA, substituentB }: { a: number; b: number; substituentA: number; substituentB: number }) {
    return { a: at(a), b: at(b), substituentA: at(substituentA), substituentB: at(substituentB) };
  }
}

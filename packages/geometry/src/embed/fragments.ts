/** Separate fragments of a molecule: taken apart for embedding, and put side by side again. */
import { type Coordinates, createMolecule, type Molecule } from '../molecule.js';
import { contactRadius } from './bounds.js';

/** Free space between the contact surfaces of two fragments, angstrom. */
const GAP = 1;

export interface Fragment {
  /** Its atoms in the whole molecule, ascending. */
  readonly atoms: Int32Array;
  /** The fragment as a molecule of its own, atoms in the same order. */
  readonly molecule: Molecule;
}

/** The connected fragments, in the order of their lowest atoms; one that is the whole molecule is that molecule. */
export function connectedFragments(molecule: Molecule): Fragment[] {
  const { atomCount, neighbours } = molecule;
  const owner = new Int32Array(atomCount).fill(-1);
  let count = 0;
  for (let root = 0; root < atomCount; root++) {
    if (owner[root] >= 0) continue;
    const reached = [root];
    owner[root] = count;
    for (const i of reached)
      for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) {
        const j = neighbours.atom[n];
        if (owner[j] >= 0) continue;
        owner[j] = count;
        reached.push(j);
      }
    count++;
  }
  if (count === 1) return [{ atoms: Int32Array.from({ length: atomCount }, (_, i) => i), molecule }];
  return Array.from({ length: count }, (_, f) => part(molecule, Int32Array.from([...owner.keys()].filter((i) => owner[i] === f))));
}

function part(molecule: Molecule, atoms: Int32Array): Fragment {
  const place = new Map(Array.from(atoms, (atom, n) => [atom, n]));
  const at = (atom: number) => place.get(atom) ?? -1;
  const { bonds, stereo } = molecule;
  const rows: [number, number, number][] = [];
  for (let n = 0; n < bonds.count; n++) if (place.has(bonds.a[n])) rows.push([at(bonds.a[n]), at(bonds.b[n]), bonds.order[n]]);
  return {
    atoms,
    molecule: createMolecule({
      atomicNumbers: atoms.map((i) => molecule.atomicNumbers[i]),
      formalCharges: atoms.map((i) => molecule.formalCharges[i]),
      isotopes: atoms.map((i) => molecule.isotopes[i]),
      bonds: rows,
      stereo: {
        tetrahedral: stereo.tetrahedral
          .filter(({ atom }) => place.has(atom))
          .map(({ atom, neighbours: [p, q, r, s], sign }) => ({ atom: at(atom), neighbours: [at(p), at(q), at(r), at(s)], sign })),
        doubleBonds: stereo.doubleBonds.filter(({ a }) => place.has(a)).map((entry) => ({ ...entry, ...ends(entry) })),
        axes: stereo.axes.filter(({ a }) => place.has(a)).map((entry) => ({ ...entry, ...ends(entry) })),
      },
    }),
  };

  function ends({ a, b, substituentA, substituentB }: { a: number; b: number; substituentA: number; substituentB: number }) {
    return { a: at(a), b: at(b), substituentA: at(substituentA), substituentB: at(substituentB) };
  }
}

/** Coordinates of the whole molecule from those of its fragments (each about its own centre), lined up along x. */
export function sideBySide(molecule: Molecule, fragments: readonly { readonly atoms: Int32Array; readonly x: Coordinates }[]): Coordinates {
  if (fragments.length === 1) return fragments[0].x;
  const whole = new Float64Array(3 * molecule.atomCount);
  let edge = 0;
  for (const { atoms, x } of fragments) {
    let left = 0;
    let right = 0;
    atoms.forEach((atom, n) => {
      const radius = contactRadius(molecule.atomicNumbers[atom]);
      left = Math.min(left, x[3 * n] - radius);
      right = Math.max(right, x[3 * n] + radius);
    });
    atoms.forEach((atom, n) => {
      whole[3 * atom] = x[3 * n] - left + edge;
      whole[3 * atom + 1] = x[3 * n + 1];
      whole[3 * atom + 2] = x[3 * n + 2];
    });
    edge += right - left + GAP;
  }
  return whole;
}

/**
 * SMARTS of a torsion, for programs that assign parameters by pattern. Each atom is written with its element, its number of neighbours
 * (hydrogens included), whether it is aromatic and whether it is in a ring, and its charge where it has one; each bond with its written order, or as aromatic.
 */
import { bondBetween, type Molecule, neighboursOf } from '@tordial/geometry';
import { aromaticAtoms } from '@tordial/scan';

type Torsion = readonly [number, number, number, number];

/** How `torsionPatterns` makes its patterns, in words for a document. */
export const SMARTS_STATEMENT =
  'made from the four atoms: element, number of neighbours with hydrogens, aromatic or not, in a ring or not, charge; bonds by written order or aromatic; atoms mapped 1 to 4';

export interface TorsionPattern {
  readonly smarts: string;
  /** Torsions of the molecule that the pattern matches, each once. */
  readonly matches: readonly Torsion[];
}

/** The patterns of some torsions, each distinct one once, with all torsions of the molecule that it matches. */
export function torsionPatterns(molecule: Molecule, torsions: readonly Torsion[]): TorsionPattern[] {
  const write = writer(molecule);
  const own = [...new Set(torsions.map((atoms) => canonical(write, atoms)))];
  const all = allTorsions(molecule).map((atoms) => ({ atoms, smarts: canonical(write, atoms) }));
  return own.map((smarts) => ({ smarts, matches: all.filter((other) => other.smarts === smarts).map(({ atoms }) => atoms) }));
}

/** The lower of the two directions. */
function canonical(write: (atoms: Torsion) => string, [a, b, c, d]: Torsion): string {
  return [write([a, b, c, d]), write([d, c, b, a])].sort()[0];
}

function writer(molecule: Molecule): (atoms: Torsion) => string {
  const aromatic = aromaticAtoms(molecule);
  const inRing = new Uint8Array(molecule.atomCount);
  for (const ring of molecule.rings) for (const atom of ring) inRing[atom] = 1;
  const atomText = (atom: number, map: number): string => {
    const charge = molecule.formalCharges[atom];
    const signed = charge === 0 ? '' : `;${charge > 0 ? '+' : '-'}${Math.abs(charge)}`;
    return `[#${molecule.atomicNumbers[atom]};X${neighboursOf(molecule, atom).length};${aromatic[atom] ? 'a' : 'A'};${inRing[atom] ? 'R' : '!R'}${signed}:${map}]`;
  };
  const bondText = (a: number, b: number): string => {
    const order = molecule.bonds.order[bondBetween(molecule, a, b)];
    const within = molecule.rings.some((ring) => ring.includes(a) && ring.includes(b) && ring.every((atom) => aromatic[atom]));
    return within ? ':' : order === 3 ? '#' : order === 2 ? '=' : '-';
  };
  return ([a, b, c, d]) =>
    `${atomText(a, 1)}${bondText(a, b)}${atomText(b, 2)}${bondText(b, c)}${atomText(c, 3)}${bondText(c, d)}${atomText(d, 4)}`;
}

function allTorsions(molecule: Molecule): Torsion[] {
  const { bonds } = molecule;
  const found: Torsion[] = [];
  for (let n = 0; n < bonds.count; n++)
    for (const i of neighboursOf(molecule, bonds.a[n]))
      for (const l of neighboursOf(molecule, bonds.b[n]))
        if (i !== bonds.b[n] && l !== bonds.a[n] && i !== l) found.push([i, bonds.a[n], bonds.b[n], l]);
  return found;
}

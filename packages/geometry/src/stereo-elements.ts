/** Elements of stereo in one form, whatever their kind, so that symmetry arguments need to be made only once. */
import type { AxialStereo, DoubleBondStereo, Molecule, StereoTable, TetrahedralCentre } from './molecule.js';

/** In a ligand list: a lone pair. */
export const LONE_PAIR = -1;

export type Sign = -1 | 0 | 1;

/**
 * One element of stereo. `ligands` are four: all of a tetrahedral centre (ascending, lone pair last), or two at each end of a bond or axis
 * (each pair ascending, lone pair last). `sign` is the handedness of a centre, +1 for cis of a double bond, the sign of an axis' torsion.
 */
export interface StereoElement {
  readonly kind: 'tetrahedral' | 'doubleBond' | 'axis';
  readonly atoms: readonly number[];
  readonly ligands: readonly number[];
  readonly sign: Sign;
  /** Listed only when the input states it: nitrogen that inverts, N-H of an imine. */
  readonly onlyIfStated: boolean;
}

/** The entries of a molecule's stereo table as elements. */
export function elementsOf(molecule: Pick<Molecule, 'stereo' | 'neighbours' | 'bonds'>): StereoElement[] {
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  const pair = (end: number, other: number): [number, number] => {
    const own = endLigands(molecule, end, other);
    return [own[0] ?? LONE_PAIR, own[1] ?? LONE_PAIR];
  };
  return [
    ...tetrahedral.map(({ atom, neighbours, sign }) => element('tetrahedral', [atom], neighbours, sign)),
    ...doubleBonds.map(({ a, b, cis }) => element('doubleBond', [a, b], [...pair(a, b), ...pair(b, a)], cis === null ? 0 : cis ? 1 : -1)),
    ...axes.map(({ a, b, sign }) => element('axis', [a, b], [...pair(a, b), ...pair(b, a)], sign)),
  ];
}

function element(kind: StereoElement['kind'], atoms: readonly number[], ligands: readonly number[], sign: Sign): StereoElement {
  return { kind, atoms, ligands, sign, onlyIfStated: false };
}

/** Singly bonded ligands at one end of a double bond or axis, ascending. */
function endLigands({ neighbours, bonds }: Pick<Molecule, 'neighbours' | 'bonds'>, end: number, other: number): number[] {
  const ligands: number[] = [];
  for (let n = neighbours.start[end]; n < neighbours.start[end + 1]; n++)
    if (neighbours.atom[n] !== other && bonds.order[neighbours.bond[n]] === 1) ligands.push(neighbours.atom[n]);
  return ligands;
}

/** The ring system that an element belongs to by any of its atoms, -1 where it is in none. */
export function systemOf({ atoms }: StereoElement, systems: ArrayLike<number>): number {
  return Math.max(...atoms.map((atom) => systems[atom]));
}

/** Handedness of an element by the colours of its ligands; 0 where it is open or the colours leave ligands equal. */
export function senseInColours({ kind, ligands, sign }: StereoElement, colours: ArrayLike<number>): number {
  if (sign === 0) return 0;
  const [p, q, r, s] = ligands.map((i) => (i === LONE_PAIR ? -1 : colours[i]));
  const pairs = kind === 'tetrahedral' ? [p - q, p - r, p - s, q - r, q - s, r - s] : [p - q, r - s];
  let sense: number = sign;
  for (const difference of pairs) {
    if (difference === 0) return 0;
    if (difference > 0) sense = -sense;
  }
  return sense;
}

/** Ligands that share their colour with one they could be exchanged with. */
export function tied({ kind, ligands }: StereoElement, colours: ArrayLike<number>): number[] {
  const rivals = (n: number) => (kind === 'tetrahedral' ? [0, 1, 2, 3].filter((m) => m !== n) : [n ^ 1]);
  return ligands.filter(
    (ligand, n) => ligand !== LONE_PAIR && rivals(n).some((m) => ligands[m] >= 0 && colours[ligands[m]] === colours[ligand]),
  );
}

/** The stereo table that holds these elements. */
export function toTable(elements: readonly StereoElement[]): StereoTable {
  const tetrahedral: TetrahedralCentre[] = [];
  const doubleBonds: DoubleBondStereo[] = [];
  const axes: AxialStereo[] = [];
  for (const { kind, atoms, ligands, sign } of elements) {
    const [a, b] = atoms;
    const [p, q, r, s] = ligands;
    if (kind === 'tetrahedral') tetrahedral.push({ atom: a, neighbours: [p, q, r, s], sign });
    else if (kind === 'doubleBond') doubleBonds.push({ a, b, substituentA: p, substituentB: r, cis: sign === 0 ? null : sign > 0 });
    else axes.push({ a, b, substituentA: p, substituentB: r, sign });
  }
  return { tetrahedral, doubleBonds, axes };
}

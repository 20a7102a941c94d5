/**
 * What a molecule prefers across each bond: flat arrangements that are fixed (double bonds, flat rings, amides, esters) and the
 * torsion terms that pull the others to their usual angles.
 *
 * Each quartet i-j-k-l adds  E = sum_n V_n / 2 (1 + s_n cos n phi)  (kcal/mol), written as a cubic in cos phi. The sizes are common
 * practice for a bond as a whole, shared out over its quartets: ethane-like 2.9, C-O 1.1, C-N 2.0, amide 18, ester 9,
 * conjugated single bond 4-5, disulfide 7 with its minimum at 90 degrees, double bond 45.
 */
import { bondBetween, type Molecule } from '../molecule.js';
import type { Shapes } from './shapes.js';

/** A bond (or straight axis of cumulated bonds) whose four nearest substituents lie in one plane. */
export interface FlatBond {
  readonly a: number;
  readonly b: number;
  /** Reference substituents, and whether they lie on one side; null where either will do. */
  readonly atA: number;
  readonly atB: number;
  readonly cis: boolean | null;
}

/** One row a quartet; E = c1 cos phi + c2 cos^2 phi + c3 cos^3 phi up to a constant, kcal/mol. */
export interface TorsionTable {
  readonly count: number;
  readonly i: Int32Array;
  readonly j: Int32Array;
  readonly k: Int32Array;
  readonly l: Int32Array;
  readonly c1: Float64Array;
  readonly c2: Float64Array;
  readonly c3: Float64Array;
}

/** An axis of two, four ... cumulated double bonds: the substituents at one end stand across those at the other. */
export interface CrossedAxis {
  readonly a: number;
  readonly b: number;
  readonly atA: readonly number[];
  readonly atB: readonly number[];
}

/** What holds or pulls the torsion angles of a molecule. */
export interface Turning {
  readonly flat: readonly FlatBond[];
  readonly crossed: readonly CrossedAxis[];
  readonly torsions: TorsionTable;
}

/** Rings from this size on hold a trans double bond. */
const SMALLEST_TRANS_RING = 8;
/** Open double bonds of rings up to this size are made cis. */
const LARGEST_CIS_RING = 11;

/** kcal/mol for one quartet; a positive V puts maxima at 0, a negative one minima. */
interface Series {
  readonly v2?: number;
  readonly v3?: number;
}

/** The flat bonds, crossed axes and torsion terms of a molecule. */
export function turning(molecule: Molecule, shapes: Shapes): Turning {
  const { bonds, neighbours, atomicNumbers, rings, stereo } = molecule;
  const { steric, unsaturated, flatRing, flatRingBond, aromaticBond, bondRing } = shapes;
  const degree = (i: number) => neighbours.start[i + 1] - neighbours.start[i];
  const others = (i: number, without: number) =>
    Array.from(neighbours.atom.subarray(neighbours.start[i], neighbours.start[i + 1])).filter((j) => j !== without);
  const flat: FlatBond[] = [];
  const crossed: CrossedAxis[] = [];
  const rows: { i: number; j: number; k: number; l: number; series: Series }[] = [];
  const stated = new Map(stereo.doubleBonds.map((entry) => [entry.a * molecule.atomCount + entry.b, entry]));

  for (let n = 0; n < bonds.count; n++) {
    const [a, b] = [bonds.a[n], bonds.b[n]];
    if (degree(a) < 2 || degree(b) < 2 || steric[a] === 2 || steric[b] === 2) continue;
    const arrangement = arrange(n, a, b);
    if (arrangement) flat.push(arrangement);
    addTorsions(a, b, others(a, b), others(b, a), (i, l) => series(n, a, b, i, l));
  }
  for (const { a, b, steps } of straightAxes(molecule, steric)) {
    const [atA, atB] = [others(a.atom, a.next), others(b.atom, b.next)];
    if (atA.length === 0 || atB.length === 0) continue;
    // a cumulene of an odd number of double bonds is flat like an alkene, of an even number crossed like allene; an alkyne turns freely
    if (steps === 0) continue;
    if (steps % 2 === 1 && steric[a.atom] === 3 && steric[b.atom] === 3)
      flat.push({ a: a.atom, b: b.atom, atA: atA[0], atB: atB[0], cis: senseOf(a.atom, b.atom, atA[0], atB[0]) });
    if (steps % 2 === 0) crossed.push({ a: a.atom, b: b.atom, atA, atB });
    const v2 = (steps % 2 === 1 ? -1 : 1) * (40 / (atA.length * atB.length));
    addTorsions(a.atom, b.atom, atA, atB, () => ({ v2 }));
  }
  const shapesOf = rows.map(({ series }) => cubic(series));
  return {
    flat,
    crossed,
    torsions: {
      count: rows.length,
      i: Int32Array.from(rows, ({ i }) => i),
      j: Int32Array.from(rows, ({ j }) => j),
      k: Int32Array.from(rows, ({ k }) => k),
      l: Int32Array.from(rows, ({ l }) => l),
      c1: Float64Array.from(shapesOf, ([c1]) => c1),
      c2: Float64Array.from(shapesOf, ([, c2]) => c2),
      c3: Float64Array.from(shapesOf, ([, , c3]) => c3),
    },
  };

  function addTorsions(
    a: number,
    b: number,
    atA: readonly number[],
    atB: readonly number[],
    seriesOf: (i: number, l: number) => Series | null,
  ): void {
    for (const i of atA)
      for (const l of atB) {
        if (i === l) continue;
        const terms = seriesOf(i, l);
        if (terms) rows.push({ i, j: a, k: b, l, series: terms });
      }
  }

  /** The flat arrangement that a bond must have, if any. */
  function arrange(n: number, a: number, b: number): FlatBond | null {
    if (steric[a] !== 3 && steric[b] !== 3) return null;
    const [atA, atB] = [others(a, b), others(b, a)];
    if (
      flatRingBond[n] ||
      (bondRing[n] > 0 &&
        bondRing[n] < SMALLEST_TRANS_RING &&
        steric[a] === 3 &&
        steric[b] === 3 &&
        (bonds.order[n] === 2 || carbonylBond(a, b)))
    ) {
      // inside one ring the neighbours lie on one side
      const ring = rings.find((atoms, r) => atoms.includes(a) && atoms.includes(b) && (flatRing[r] === 1 || !flatRingBond[n]));
      const inside = ring ? [atA.find((i) => ring.includes(i)), atB.find((i) => ring.includes(i))] : [];
      if (inside[0] === undefined || inside[1] === undefined) return null;
      return { a, b, atA: inside[0], atB: inside[1], cis: true };
    }
    if (bonds.order[n] === 2 && steric[a] === 3 && steric[b] === 3)
      return { a, b, atA: atA[0], atB: atB[0], cis: senseOf(a, b, atA[0], atB[0]) };
    return carbonylBond(a, b) ? carbonylSense(n, a, b) : null;
  }

  function senseOf(a: number, b: number, atA: number, atB: number): boolean | null {
    const entry = stated.get(Math.min(a, b) * molecule.atomCount + Math.max(a, b));
    if (entry && entry.cis !== null) {
      const [p, q] = a === entry.a ? [atA, atB] : [atB, atA];
      return (p === entry.substituentA) === (q === entry.substituentB) ? entry.cis : !entry.cis;
    }
    // an open double bond is cis inside of a medium ring, and where it links the small rings of a porphyrin
    const bond = bondBetween(molecule, a, b);
    const size = bond < 0 ? 0 : bondRing[bond];
    if (size < SMALLEST_TRANS_RING) return null;
    const ring = rings.find((atoms) => atoms.includes(a) && atoms.includes(b));
    if (size > LARGEST_CIS_RING && !(ring?.every((i) => steric[i] === 3) && (inFlatRing(a) || inFlatRing(b)))) return null;
    return ring ? ring.includes(atA) === ring.includes(atB) : null;
  }

  /** X=C-N or X=C-O with X = O, S, N: lone pair and double bond make it flat. */
  function carbonylBond(a: number, b: number): boolean {
    return (isAcyl(a) && isDonor(b)) || (isAcyl(b) && isDonor(a));
  }
  function isAcyl(i: number): boolean {
    return atomicNumbers[i] === 6 && steric[i] === 3 && acylOxygen(i) >= 0;
  }
  function acylOxygen(i: number): number {
    for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++)
      if (bonds.order[neighbours.bond[m]] === 2 && [8, 16].includes(atomicNumbers[neighbours.atom[m]])) return neighbours.atom[m];
    return -1;
  }
  function isDonor(i: number): boolean {
    return !unsaturated[i] && ((atomicNumbers[i] === 7 && steric[i] === 3) || ([8, 16].includes(atomicNumbers[i]) && degree(i) === 2));
  }
  /** The usual (Z) form of esters, acids and secondary amides: the heavy substituent, or an acid's hydrogen, beside the carbonyl oxygen. */
  function carbonylSense(n: number, a: number, b: number): FlatBond | null {
    const [acyl, donor] = isAcyl(a) && isDonor(b) ? [a, b] : [b, a];
    const on = others(donor, acyl);
    const heavy = on.filter((i) => atomicNumbers[i] > 1);
    const beside = heavy.length === 1 ? heavy[0] : on.length === 1 ? on[0] : -1;
    // thioamides, hydrazides and hydroxamic acids take either form
    const usual = atomicNumbers[acylOxygen(acyl)] === 8 && beside >= 0 && [1, 6].includes(atomicNumbers[beside]);
    const fixed = usual && bondRing[n] === 0;
    if (atomicNumbers[donor] !== 7 && !fixed) return null;
    return { a: acyl, b: donor, atA: acylOxygen(acyl), atB: fixed ? beside : on[0], cis: fixed ? true : null };
  }

  function series(n: number, a: number, b: number, i: number, l: number): Series | null {
    const quartets = (degree(a) - 1) * (degree(b) - 1);
    const share = (v: number) => v / quartets;
    const order = bonds.order[n];
    if (steric[a] > 4 || steric[b] > 4) return null;
    if (steric[a] === 3 && steric[b] === 3) {
      const ring = bondRing[n];
      if (order === 2 && !aromaticBond[n]) return { v2: -share(45) };
      if (aromaticBond[n]) return { v2: -share(28) };
      if (flatRingBond[n]) return { v2: -share(16) };
      if (order > 1) return { v2: -share(30) };
      if (carbonylBond(a, b)) {
        const oxygen = (donor: number) => atomicNumbers[donor] !== 7;
        return { v2: -share(oxygen(a) || oxygen(b) ? 9 : 18) };
      }
      const donors = (isLonePair(a) ? 1 : 0) + (isLonePair(b) ? 1 : 0);
      if (donors === 2) return { v2: share(4) };
      if (donors === 1) return { v2: -share(conjugatedDonor(a, b) ? 10 : 5) };
      return { v2: -share(ring > 0 ? 5 : biaryl(a, b) ? 2.5 : 4.5) };
    }
    if (steric[a] === 4 && steric[b] === 4) {
      const [p, q] = [atomicNumbers[a], atomicNumbers[b]];
      const lone = (z: number) => z === 8 || z === 16 || z === 34;
      if (lone(p) && lone(q)) return { v2: share(p === 8 || q === 8 ? 3 : 7) };
      if (p === 7 && q === 7) return { v2: share(2), v3: share(1) };
      if (lone(p) || lone(q)) return { v3: share(p === 16 || q === 16 ? 1.6 : 1.2) };
      if (p === 7 || q === 7) return { v3: share(p > 10 || q > 10 ? 1 : 2.2) };
      // the small rings' pucker is left to their angles
      return { v3: share(p > 10 || q > 10 ? 1.3 : bondRing[n] === 3 || bondRing[n] === 4 ? 1 : 2.9) };
    }
    // one trigonal, one tetrahedral end
    const [trigonal, tetrahedral, atTetrahedral, atTrigonal] = steric[a] === 3 ? [a, b, l, i] : [b, a, i, l];
    if ((atomicNumbers[tetrahedral] === 8 || atomicNumbers[tetrahedral] === 16) && degree(tetrahedral) === 2) {
      if (!unsaturated[trigonal]) return { v2: share(2) };
      if (carbonylBond(a, b)) return { v2: -share(9) };
      // between two rings (diaryl ethers) neither holds it in its plane
      const between = others(tetrahedral, trigonal).some((i) => steric[i] === 3 && unsaturated[i]);
      return { v2: -share(atomicNumbers[tetrahedral] === 8 && !between ? 3.5 : 1.5) };
    }
    if (atomicNumbers[tetrahedral] === 7 && degree(tetrahedral) < 4) return { v2: -share(2) };
    if (!unsaturated[trigonal]) return null;
    const doubled = bonds.order[bondBetween(molecule, trigonal, atTrigonal)] === 2 && !inAromatic(trigonal);
    if (doubled) return { v3: -share(2) };
    if (inAromatic(trigonal) && atomicNumbers[atTetrahedral] > 1) return { v2: share(1) };
    return null;
  }

  function isLonePair(i: number): boolean {
    return !unsaturated[i];
  }
  /** Enamines of carbonyls, amidines, guanidines: nitrogen on C=N */
  function conjugatedDonor(a: number, b: number): boolean {
    const acceptor = isLonePair(a) ? b : a;
    return others(acceptor, acceptor === a ? b : a).some(
      (i) => atomicNumbers[i] === 7 && bonds.order[bondBetween(molecule, acceptor, i)] === 2 && !inAromatic(acceptor),
    );
  }
  function inAromatic(i: number): boolean {
    for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++) if (aromaticBond[neighbours.bond[m]]) return true;
    return false;
  }
  function inFlatRing(i: number): boolean {
    for (let m = neighbours.start[i]; m < neighbours.start[i + 1]; m++) if (flatRingBond[neighbours.bond[m]]) return true;
    return false;
  }
  function biaryl(a: number, b: number): boolean {
    return inAromatic(a) && inAromatic(b);
  }
}

/** Chains of linear atoms, with the atom at each end, its neighbour inside, and the number of double bonds (0 with a triple bond among them). */
function straightAxes(molecule: Molecule, steric: Uint8Array): { a: AxisEnd; b: AxisEnd; steps: number }[] {
  const { atomCount, neighbours, bonds } = molecule;
  const axes: { a: AxisEnd; b: AxisEnd; steps: number }[] = [];
  for (let start = 0; start < atomCount; start++) {
    if (steric[start] === 2 && neighbours.start[start + 1] - neighbours.start[start] === 2) continue;
    for (let n = neighbours.start[start]; n < neighbours.start[start + 1]; n++) {
      let before = start;
      let at = neighbours.atom[n];
      let doubles = bonds.order[neighbours.bond[n]] === 2 ? 1 : 0;
      let length = 1;
      while (steric[at] === 2 && neighbours.start[at + 1] - neighbours.start[at] === 2) {
        const m = neighbours.atom[neighbours.start[at]] === before ? neighbours.start[at] + 1 : neighbours.start[at];
        before = at;
        at = neighbours.atom[m];
        if (bonds.order[neighbours.bond[m]] === 2) doubles++;
        length++;
        if (length > atomCount) break;
      }
      if (length > 1 && start < at)
        axes.push({ a: { atom: start, next: neighbours.atom[n] }, b: { atom: at, next: before }, steps: doubles === length ? doubles : 0 });
    }
  }
  return axes;
}

/** The last atom of a straight axis that may carry substituents, and its neighbour inside. */
interface AxisEnd {
  readonly atom: number;
  readonly next: number;
}

/** cos 2 phi = 2 c^2 - 1, cos 3 phi = 4 c^3 - 3 c; a signed V stands for V/2 s. */
function cubic({ v2 = 0, v3 = 0 }: Series): [number, number, number] {
  return [(-3 * v3) / 2, v2, 2 * v3];
}

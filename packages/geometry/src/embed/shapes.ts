/**
 * The local shape of every atom: how many bonds and lone pairs stand around it (valence-shell electron-pair repulsion,
 * R. J. Gillespie, J. Chem. Educ. 40, 295 (1963)), and which atoms and rings conjugation makes flat.
 */
import { bondBetween, type Molecule } from '../molecule.js';

/** One entry an atom, ring or bond, in the molecule's order. */
export interface Shapes {
  /** Bonds plus lone pairs an atom: 2 linear, 3 trigonal planar, 4 tetrahedral, 5 and 6 hypervalent; conjugated amine nitrogens count as 3. */
  readonly steric: Uint8Array;
  /** 1 for an atom with a double or triple bond. */
  readonly unsaturated: Uint8Array;
  /** 1 for a ring that is flat. */
  readonly flatRing: Uint8Array;
  /** 1 for a bond of a flat ring. */
  readonly flatRingBond: Uint8Array;
  /** 1 for a bond of a ring with 4n + 2 pi electrons. */
  readonly aromaticBond: Uint8Array;
  /** Size of the smallest ring through a bond, 0 outside of rings. */
  readonly bondRing: Int32Array;
}

/** Electrons in the valence shell of the neutral main-group atom; 0 for transition metals, whose lone pairs do not shape them. */
function valenceElectrons(atomicNumber: number): number {
  for (const [first, last, core] of [
    [1, 2, 0],
    [3, 10, 2],
    [11, 18, 10],
    [19, 20, 18],
    [31, 36, 28],
    [37, 38, 36],
    [49, 54, 46],
    [55, 56, 54],
    [81, 86, 78],
  ])
    if (atomicNumber >= first && atomicNumber <= last) return atomicNumber - core;
  return 0;
}

/** Works the shapes out from bonds, charges and rings. */
export function atomShapes(molecule: Molecule): Shapes {
  const { atomCount, atomicNumbers, formalCharges, bonds, neighbours, rings } = molecule;
  const degree = (i: number) => neighbours.start[i + 1] - neighbours.start[i];
  const orderSum = new Int32Array(atomCount);
  const unsaturated = new Uint8Array(atomCount);
  for (let n = 0; n < bonds.count; n++)
    for (const i of [bonds.a[n], bonds.b[n]]) {
      orderSum[i] += bonds.order[n];
      if (bonds.order[n] > 1) unsaturated[i] = 1;
    }

  const bondRing = new Int32Array(bonds.count);
  const atomRing = new Int32Array(atomCount);
  const ringBonds = rings.map((ring) => Array.from(ring, (i, n) => bondBetween(molecule, i, ring[(n + 1) % ring.length])));
  rings.forEach((ring, n) => {
    for (const bond of ringBonds[n]) if (bondRing[bond] === 0) bondRing[bond] = ring.length;
    for (const i of ring) if (atomRing[i] === 0) atomRing[i] = ring.length;
  });

  const steric = new Uint8Array(atomCount);
  const lonePairs = new Uint8Array(atomCount);
  for (let i = 0; i < atomCount; i++) {
    lonePairs[i] = Math.max(0, valenceElectrons(atomicNumbers[i]) - formalCharges[i] - orderSum[i]) >> 1;
    steric[i] = Math.min(6, degree(i) + lonePairs[i]);
    // a triple or cumulated bond inside a small ring cannot be straight
    if (steric[i] === 2 && degree(i) === 2 && atomRing[i] > 0 && atomRing[i] < 8) steric[i] = 3;
  }

  // a lone pair next to a double bond: amides, anilines, enamines, and carbanions alike
  const conjugated = (i: number) => {
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) {
      const j = neighbours.atom[n];
      if ((unsaturated[j] && steric[j] <= 3 && atomicNumbers[j] >= 5 && atomicNumbers[j] <= 7 && degree(j) > 1) || atomicNumbers[j] === 5)
        return true;
    }
    return false;
  };
  const flattened: number[] = [];
  for (let i = 0; i < atomCount; i++)
    if ((atomicNumbers[i] === 7 || atomicNumbers[i] === 6) && steric[i] === 4 && degree(i) === 3 && lonePairs[i] === 1 && !unsaturated[i])
      if (conjugated(i) && atomRing[i] !== 3) flattened.push(i);
  for (const i of flattened) steric[i] = 3;

  const flatRing = new Uint8Array(rings.length);
  const flatRingBond = new Uint8Array(bonds.count);
  const aromaticBond = new Uint8Array(bonds.count);
  rings.forEach((ring, n) => {
    let electrons = 0;
    let heavy = false;
    for (const i of ring) {
      if (atomicNumbers[i] > 10) heavy = true;
      if (unsaturated[i] && steric[i] <= 3) electrons += piElectrons(i, ringBonds[n]);
      else if (lonePairs[i] > 0 && (steric[i] === 3 || degree(i) === 2)) electrons += 2;
      else if (steric[i] !== 3) return;
    }
    const huckel = electrons % 4 === 2;
    if (ring.length === 4 ? electrons > 0 : ring.length <= 6 ? !heavy || huckel : ring.length === 7 && huckel) {
      flatRing[n] = 1;
      for (const bond of ringBonds[n]) flatRingBond[bond] = 1;
    }
    if (ring.length >= 5 && ring.length <= 7 && huckel) for (const bond of ringBonds[n]) aromaticBond[bond] = 1;
  });
  return { steric, unsaturated, flatRing, flatRingBond, aromaticBond, bondRing };

  /** 1 where the double bond lies in a ring, 0 where it draws the electrons out (C=O) */
  function piElectrons(i: number, inside: readonly number[]): number {
    for (let n = neighbours.start[i]; n < neighbours.start[i + 1]; n++) {
      const bond = neighbours.bond[n];
      if (bonds.order[bond] > 1) return inside.includes(bond) || bondRing[bond] > 0 ? 1 : 0;
    }
    return 0;
  }
}

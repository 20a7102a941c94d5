/** What a chemist calls a bond that turns. */
import { bondBetween, type Molecule, neighboursOf } from '@tordial/geometry';
import { aromaticAtoms } from './aromatic-atoms.js';
import { atomShape, bondsOfOrder } from './atom-shape.js';

export type RotorKind =
  | 'sp3-sp3'
  | 'sp2-sp3'
  | 'biaryl'
  | 'conjugated single bond'
  | 'terminal methyl'
  | 'symmetric top'
  | 'hydroxyl'
  | 'carboxylic acid'
  | 'thiol'
  | 'alkyl ether'
  | 'aryl ether'
  | 'vinyl ether'
  | 'ester'
  | 'ester O-alkyl'
  | 'ester O-aryl'
  | 'ester O-vinyl'
  | 'anhydride'
  | 'carbonate'
  | 'imidate'
  | 'thioester'
  | 'amide'
  | 'amide N-alkyl'
  | 'anilide'
  | 'carbamate'
  | 'urea'
  | 'thioamide'
  | 'thiourea'
  | 'amidine'
  | 'guanidine'
  | 'alkyl amine'
  | 'aryl amine'
  | 'enamine'
  | 'nitro'
  | 'thioether'
  | 'aryl thioether'
  | 'sulfinyl'
  | 'sulfonyl'
  | 'sulfonamide'
  | 'sulfonamide N-alkyl'
  | 'sulfonate ester'
  | 'phosphate ester'
  | 'disulfide'
  | 'silyl ether'
  | 'heteroatom-heteroatom'
  | 'double bond'
  | 'triple bond'
  | 'ring bond';

const [CARBON, NITROGEN, OXYGEN, SILICON, PHOSPHORUS, SULFUR, SELENIUM] = [6, 7, 8, 14, 15, 16, 34];

/** Elements whose OH is that of an acid or a silanol; N-OH and O-OH count as bonds between heteroatoms. */
const ACID_FORMERS = new Set([5, SILICON, PHOSPHORUS, SULFUR, SELENIUM]);

/** A function that names the bonds of one molecule; `symmetryNumbers` are those of the sides at a and b (`symmetryNumberOfSide`). */
export function bondKinds(molecule: Molecule): (a: number, b: number, symmetryNumbers: readonly [number, number]) => RotorKind {
  const { atomicNumbers, formalCharges, bonds } = molecule;
  const aromatic = aromaticAtoms(molecule);
  const inRing = ringBonds(molecule);
  const element = (i: number) => atomicNumbers[i];
  const others = (i: number, but: number) => neighboursOf(molecule, i).filter((j) => j !== but);
  const has = (i: number, but: number, test: (j: number) => boolean) => others(i, but).some(test);
  const isHydrogen = (i: number) => atomicNumbers[i] === 1;
  const isPlanarCarbon = (i: number) => element(i) === CARBON && atomShape(molecule, i) === 'planar';
  /** Terminal oxygens of oxo groups, written with a double bond or as charges. */
  const oxoCount = (i: number) =>
    neighboursOf(molecule, i).filter(
      (j) =>
        element(j) === OXYGEN &&
        neighboursOf(molecule, j).length === 1 &&
        (bonds.order[bondBetween(molecule, i, j)] === 2 || formalCharges[j] === -1),
    ).length;
  const isNitro = (i: number) => element(i) === NITROGEN && oxoCount(i) === 2;
  const isSulfonyl = (i: number) => element(i) === SULFUR && neighboursOf(molecule, i).length === 4 && oxoCount(i) >= 2;
  const isSulfinyl = (i: number) => element(i) === SULFUR && neighboursOf(molecule, i).length === 3 && oxoCount(i) >= 1;
  const isPhosphoryl = (i: number) =>
    element(i) === PHOSPHORUS && neighboursOf(molecule, i).length === 4 && bondsOfOrder(molecule, i, 2) + oxoCount(i) > 0;
  /** Element that a non-aromatic carbon holds by a double bond, 0 where there is none. */
  const acylElement = (i: number) => {
    if (element(i) !== CARBON || aromatic[i]) return 0;
    const partner = neighboursOf(molecule, i).find((j) => bonds.order[bondBetween(molecule, i, j)] === 2);
    return partner === undefined ? 0 : element(partner);
  };
  const isAcyl = (i: number) => [NITROGEN, OXYGEN, SULFUR].includes(acylElement(i));
  const singleHetero = (i: number, but: number, z: number) =>
    has(i, but, (j) => element(j) === z && bonds.order[bondBetween(molecule, i, j)] === 1 && neighboursOf(molecule, j).length > 1);

  return (a, b, symmetryNumbers) => {
    const bond = bondBetween(molecule, a, b);
    if (inRing[bond]) return 'ring bond';
    if (bonds.order[bond] > 1) return bonds.order[bond] === 2 ? 'double bond' : 'triple bond';
    if ((isMethyl(a, b) && symmetryNumbers[0] === 3) || (isMethyl(b, a) && symmetryNumbers[1] === 3)) return 'terminal methyl';
    if (Math.max(...symmetryNumbers) > 2) return 'symmetric top';
    if (aromatic[a] && aromatic[b]) return 'biaryl';
    if (element(a) === CARBON && element(b) === CARBON) return betweenCarbons(a, b);
    if (element(a) === CARBON) return toHeteroatom(a, b);
    return element(b) === CARBON ? toHeteroatom(b, a) : betweenHeteroatoms(a, b);
  };

  function isMethyl(i: number, from: number): boolean {
    const substituents = others(i, from);
    return element(i) === CARBON && substituents.length === 3 && substituents.every(isHydrogen);
  }

  function betweenCarbons(a: number, b: number): RotorKind {
    const planar = Number(isPlanarCarbon(a)) + Number(isPlanarCarbon(b));
    return planar === 2 ? 'conjugated single bond' : planar === 1 ? 'sp2-sp3' : 'sp3-sp3';
  }

  function betweenHeteroatoms(a: number, b: number): RotorKind {
    for (const [p, q] of [
      [a, b],
      [b, a],
    ]) {
      if (ACID_FORMERS.has(element(p)) && element(q) === OXYGEN && has(q, p, isHydrogen)) return 'hydroxyl';
      if (isSulfonyl(p) && element(q) === NITROGEN) return 'sulfonamide';
      if (isSulfonyl(p) && element(q) === OXYGEN) return 'sulfonate ester';
      if (isPhosphoryl(p) && element(q) === OXYGEN) return 'phosphate ester';
      if (element(p) === SILICON && element(q) === OXYGEN) return 'silyl ether';
    }
    const divalentSulfur = (i: number) => element(i) === SULFUR && neighboursOf(molecule, i).length === 2;
    return divalentSulfur(a) && divalentSulfur(b) ? 'disulfide' : 'heteroatom-heteroatom';
  }

  function toHeteroatom(carbon: number, hetero: number): RotorKind {
    const acyl = acylElement(carbon);
    switch (element(hetero)) {
      case NITROGEN:
        return toNitrogen(carbon, hetero, acyl);
      case OXYGEN:
        return toOxygen(carbon, hetero, acyl);
      case SULFUR:
      case SELENIUM:
        if (isSulfonyl(hetero)) return 'sulfonyl';
        if (isSulfinyl(hetero)) return 'sulfinyl';
        if (has(hetero, carbon, isHydrogen)) return 'thiol';
        if (aromatic[carbon]) return 'aryl thioether';
        return acyl === OXYGEN || acyl === SULFUR ? 'thioester' : 'thioether';
      default: {
        const planar = Number(isPlanarCarbon(carbon)) + Number(atomShape(molecule, hetero) === 'planar');
        return planar === 2 ? 'conjugated single bond' : planar === 1 ? 'sp2-sp3' : 'sp3-sp3';
      }
    }
  }

  function toNitrogen(carbon: number, nitrogen: number, acyl: number): RotorKind {
    if (isNitro(nitrogen)) return 'nitro';
    if (bondsOfOrder(molecule, nitrogen, 2) > 0 && !aromatic[nitrogen])
      return isPlanarCarbon(carbon) ? 'conjugated single bond' : 'sp2-sp3';
    if (formalCharges[nitrogen] === 1 && !aromatic[nitrogen]) return isPlanarCarbon(carbon) ? 'sp2-sp3' : 'alkyl amine';
    if (acyl === OXYGEN)
      return singleHetero(carbon, nitrogen, NITROGEN) ? 'urea' : singleHetero(carbon, nitrogen, OXYGEN) ? 'carbamate' : 'amide';
    if (acyl === SULFUR) return singleHetero(carbon, nitrogen, NITROGEN) ? 'thiourea' : 'thioamide';
    if (acyl === NITROGEN) return singleHetero(carbon, nitrogen, NITROGEN) ? 'guanidine' : 'amidine';
    if (acyl === CARBON) return 'enamine';
    if (isPlanarCarbon(carbon)) return has(nitrogen, carbon, isAcyl) ? 'anilide' : 'aryl amine';
    if (aromatic[nitrogen]) return 'sp2-sp3';
    if (has(nitrogen, carbon, isAcyl)) return 'amide N-alkyl';
    return has(nitrogen, carbon, isSulfonyl) ? 'sulfonamide N-alkyl' : 'alkyl amine';
  }

  function toOxygen(carbon: number, oxygen: number, acyl: number): RotorKind {
    const toHydrogen = has(oxygen, carbon, isHydrogen);
    if (acyl === OXYGEN) {
      if (toHydrogen) return 'carboxylic acid';
      if (has(oxygen, carbon, isAcyl)) return 'anhydride';
      if (singleHetero(carbon, oxygen, NITROGEN)) return 'carbamate';
      return singleHetero(carbon, oxygen, OXYGEN) ? 'carbonate' : 'ester';
    }
    if (toHydrogen) return 'hydroxyl';
    if (acyl === SULFUR) return 'thioester';
    if (acyl === NITROGEN) return 'imidate';
    const ofEster = has(oxygen, carbon, (j) => isAcyl(j) || isSulfonyl(j) || isPhosphoryl(j));
    if (aromatic[carbon]) return ofEster ? 'ester O-aryl' : 'aryl ether';
    if (acyl === CARBON) return ofEster ? 'ester O-vinyl' : 'vinyl ether';
    return ofEster ? 'ester O-alkyl' : 'alkyl ether';
  }
}

/** 1 for each bond that is part of a ring: the bonds between neighbours on a relevant cycle. */
export function ringBonds(molecule: Pick<Molecule, 'bonds' | 'rings' | 'neighbours'>): Uint8Array {
  const inRing = new Uint8Array(molecule.bonds.count);
  for (const ring of molecule.rings)
    ring.forEach((i, n) => {
      inRing[bondBetween(molecule, i, ring[(n + 1) % ring.length])] = 1;
    });
  return inRing;
}

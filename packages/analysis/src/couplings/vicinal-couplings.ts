/** Which protons couple over a carbon-carbon bond, and how strongly in one geometry or averaged over many. */
import { bondBetween, type Coordinates, degrees, type Molecule, neighboursOf, TordialError, torsion, wrapRadians } from '@tordial/geometry';
import { boltzmannPopulations } from '../populations.js';
import { type CouplingSubstituent, groupElectronegativity, haasnootCoupling } from './haasnoot-altona.js';

/** What couplings need to know of a molecule. */
export type CouplingMolecule = Pick<Molecule, 'atomicNumbers' | 'formalCharges' | 'neighbours' | 'bonds'>;

/** Coupling of two protons, or of a methyl's three as one. */
export interface VicinalCoupling {
  /** Atoms of either side: one proton, or the three of a methyl. */
  readonly protons: readonly [readonly number[], readonly number[]];
  /** Hz. */
  readonly coupling: number;
}

/** Coupling of one pair of protons in one geometry. */
interface PairCoupling {
  readonly protons: readonly [number, number];
  /** H-C-C-H, degrees. */
  readonly angle: number;
  /** Hz. */
  readonly coupling: number;
}

/**
 * Couplings of every proton on the first carbon of `axis` with every one on the second, in one geometry (3 values an atom, angstrom). Torsion
 * angles and orientations are measured in the geometry.
 *
 * Throws `couplings/not-sp3` where an axis atom is not a saturated carbon, `couplings/missing-hydrogens` where one has fewer than four neighbours
 * for lack of hydrogens, `couplings/no-protons` where one carries none.
 */
export function pairCouplings(molecule: CouplingMolecule, axis: readonly [number, number], x: Coordinates): PairCoupling[] {
  const [a, b] = axis;
  const ends = [substituentsOf(molecule, a, b), substituentsOf(molecule, b, a)];
  const protons = ends.map((end) => end.filter((i) => molecule.atomicNumbers[i] === 1));
  return protons[0].flatMap((h) =>
    protons[1].map((k) => {
      const phi = torsion(x, h, a, b, k);
      const substituents = [
        ...orientedSubstituents(molecule, ends[0], h, a, (i) => wrapRadians(phi - torsion(x, i, a, b, k))),
        ...orientedSubstituents(molecule, ends[1], k, b, (i) => wrapRadians(phi - torsion(x, h, a, b, i))),
      ];
      return { protons: [h, k] as const, angle: degrees(phi), coupling: haasnootCoupling(phi, substituents) };
    }),
  );
}

/** Whether the axis joins two saturated carbons that both carry protons, so that `vicinalCouplings` has something to give. */
export function hasVicinalProtons(molecule: CouplingMolecule, axis: readonly [number, number]): boolean {
  try {
    axis.forEach((carbon, side) => {
      substituentsOf(molecule, carbon, axis[1 - side]);
    });
    return true;
  } catch (error) {
    if (error instanceof TordialError && error.code.startsWith('couplings/')) return false;
    throw error;
  }
}

/**
 * Couplings over `axis` in one geometry, a methyl's protons averaged as they are on the time scale of NMR. The two protons of a CH2 are told apart by
 * the side they lie on, as in `reference`: a geometry that was made by reflection has them exchanged. Throws as `pairCouplings`.
 */
export function vicinalCouplings(
  molecule: CouplingMolecule,
  axis: readonly [number, number],
  x: Coordinates,
  reference: Coordinates = x,
): VicinalCoupling[] {
  const groups = axis.map((carbon, side) => protonGroups(molecule, carbon, axis[1 - side]));
  const exchanged = new Map<number, number>();
  groups.forEach((group, side) => {
    const [p, q] = group.length === 2 ? [group[0][0], group[1][0]] : [0, 0];
    const centre = [axis[side], axis[1 - side]] as const;
    if (p === q || handOf(x, ...centre, p, q) * handOf(reference, ...centre, p, q) >= 0) return;
    exchanged.set(p, q);
    exchanged.set(q, p);
  });
  const pairs = pairCouplings(molecule, axis, x).map(({ protons: [h, k], coupling }) => ({
    protons: [exchanged.get(h) ?? h, exchanged.get(k) ?? k] as const,
    coupling,
  }));
  return groups[0].flatMap((first) =>
    groups[1].map((second) => {
      const members = pairs.filter(({ protons: [h, k] }) => first.includes(h) && second.includes(k));
      return { protons: [first, second] as const, coupling: members.reduce((sum, pair) => sum + pair.coupling, 0) / members.length };
    }),
  );
}

/**
 * Couplings averaged over geometries with the Boltzmann weights of their `energies` (kcal/mol) at T, each counted with its `widths` (the share of
 * the turn it stands for; equal when left out), the protons of a CH2 as in the first geometry. Throws as `pairCouplings`, and `couplings/geometries` when none or of unequal number.
 */
export function averagedCouplings(
  molecule: CouplingMolecule,
  axis: readonly [number, number],
  geometries: readonly Coordinates[],
  energies: ArrayLike<number>,
  temperature: number,
  widths?: ArrayLike<number>,
): VicinalCoupling[] {
  if (geometries.length === 0 || energies.length !== geometries.length)
    throw new TordialError(
      'couplings/geometries',
      `${geometries.length} geometries with ${energies.length} energies: give one energy for each`,
    );
  const weights = boltzmannPopulations(energies, temperature, widths);
  const sums: { protons: VicinalCoupling['protons']; coupling: number }[] = [];
  geometries.forEach((x, n) => {
    vicinalCouplings(molecule, axis, x, geometries[0]).forEach(({ protons, coupling }, pair) => {
      sums[pair] ??= { protons, coupling: 0 };
      sums[pair].coupling += weights[n] * coupling;
    });
  });
  return sums;
}

/** Sign: on which side of the plane of a carbon, its neighbour on the axis and one proton the other proton lies. */
function handOf(x: Coordinates, carbon: number, neighbour: number, p: number, q: number): number {
  return Math.sign(wrapRadians(torsion(x, p, carbon, neighbour, q)));
}

/** Substituents of an sp3 carbon but for the other carbon of the fragment. */
function substituentsOf(molecule: CouplingMolecule, carbon: number, other: number): number[] {
  const { atomicNumbers, bonds } = molecule;
  if (atomicNumbers[carbon] !== 6)
    throw new TordialError(
      'couplings/not-sp3',
      `atom ${carbon} is not carbon: couplings are given for H-C-C-H with saturated carbons only`,
      { atom: carbon },
    );
  const around = [...neighboursOf(molecule, carbon)];
  const valence = around.reduce((sum, i) => sum + bonds.order[bondBetween(molecule, carbon, i)], 0);
  if (valence > around.length || molecule.formalCharges[carbon] !== 0)
    throw new TordialError(
      'couplings/not-sp3',
      `carbon ${carbon} is not saturated: couplings are given for H-C-C-H with saturated carbons only`,
      {
        atom: carbon,
      },
    );
  if (around.length < 4)
    throw new TordialError(
      'couplings/missing-hydrogens',
      `carbon ${carbon} has ${around.length} neighbours: give the molecule with all its hydrogens`,
      {
        atom: carbon,
      },
    );
  const rest = around.filter((i) => i !== other);
  if (!rest.some((i) => atomicNumbers[i] === 1))
    throw new TordialError('couplings/no-protons', `carbon ${carbon} carries no hydrogen: there is no vicinal coupling over this bond`, {
      atom: carbon,
    });
  return rest;
}

/** `clockwise(i)`: angle (radians) from the coupled proton to substituent i, clockwise seen with its carbon in front. */
function orientedSubstituents(
  molecule: CouplingMolecule,
  end: readonly number[],
  proton: number,
  carbon: number,
  clockwise: (i: number) => number,
): CouplingSubstituent[] {
  return end
    .filter((i) => i !== proton && molecule.atomicNumbers[i] !== 1)
    .map((i) => {
      const beta = [...neighboursOf(molecule, i)].filter((j) => j !== carbon).map((j) => molecule.atomicNumbers[j]);
      return { electronegativity: groupElectronegativity(molecule.atomicNumbers[i], beta), orientation: clockwise(i) > 0 ? 1 : -1 };
    });
}

function protonGroups(molecule: CouplingMolecule, carbon: number, other: number): number[][] {
  const protons = substituentsOf(molecule, carbon, other).filter((i) => molecule.atomicNumbers[i] === 1);
  return protons.length === 3 ? [protons] : protons.map((proton) => [proton]);
}

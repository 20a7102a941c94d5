/** The wells of a profile as a chemist names them: which are the same molecule relabelled, which are mirror images. */
import { TordialError } from '@tordial/geometry';
import { type KlynePrelogName, klynePrelogName, type ProfileDocument, type ProfileStationaryPoint } from '@tordial/scan';
import { moleculeOfDocument } from './document-molecule.js';
import { kcalPer } from './energy-unit.js';
import { isometries } from './isometries.js';

/** One well of the turn. */
export interface Rotamer {
  /** Degrees in [-180, 180). */
  readonly angle: number;
  /** Above the lowest well, kcal/mol. */
  readonly energy: number;
  readonly name: KlynePrelogName;
  /** What the trade calls it besides: gauche or anti about a bond of saturated atoms, s-cis or s-trans of a conjugated one. */
  readonly commonName: 'gauche' | 'anti' | 's-cis' | 's-trans' | null;
  /** Other wells that are this one with equal atoms exchanged. */
  readonly identical: readonly number[];
  /** Wells that are its mirror image; itself where the structure is its own. */
  readonly mirrorImages: readonly number[];
  /** Wells of one species are identical or mirror images; counted from 0 in the order of their energies. */
  readonly species: number;
}

/** What stands between two neighbouring wells. */
export interface BarrierBetween {
  /** The well before it and the well after it, cyclic by angle. */
  readonly wells: readonly [number, number];
  readonly kind: 'barrier' | 'crossing';
  /** Degrees. */
  readonly angle: number;
  /** Above the lowest well, kcal/mol. */
  readonly energy: number;
}

/** Wells of the same energy within this, kcal/mol, and distances within this, angstrom, may be the same or mirror images. */
const SAME_ENERGY = 0.05;
const SAME_DISTANCE = 0.2;
/** Degrees within which a well that is its own mirror image stands at 0 or 180 exactly. */
const ON_MIRROR = 1;

/**
 * The wells of a profile's stationary points, ascending by angle, with `barriers[i]` between well i and the next one. Throws
 * `profile/stationary-points` when wells and barriers do not take turns; a profile without any barrier has none to name.
 */
export function rotamers(document: ProfileDocument): { readonly wells: Rotamer[]; readonly barriers: BarrierBetween[] } {
  const factor = kcalPer(document.unit);
  const ordered = [...document.stationaryPoints].sort((a, b) => a.angle - b.angle);
  const wells = ordered.filter((point) => point.kind === 'well');
  const barriers = ordered.filter((point) => point.kind !== 'well');
  if (wells.length === 0 || wells.length !== barriers.length || !takeTurns(ordered))
    throw new TordialError(
      'profile/stationary-points',
      `${wells.length} wells and ${barriers.length} barriers: round one turn they must alternate; the profile is flat or incomplete`,
    );
  const lowest = Math.min(...wells.map((well) => well.energy));
  const relations = compareWells(document, wells);
  const species = speciesOf(wells, relations);
  const rotamerList = wells.map((well, i): Rotamer => {
    const mirrorImages = relations.mirror[i];
    const angle = mirrorImages.includes(i) ? snapped(well.angle) : well.angle;
    return {
      angle: well.angle,
      energy: (well.energy - lowest) * factor,
      name: klynePrelogName(angle),
      commonName: commonName(document, angle),
      identical: relations.identical[i],
      mirrorImages,
      species: species[i],
    };
  });
  const startsWithBarrier = ordered[0].kind !== 'well';
  return {
    wells: rotamerList,
    barriers: wells.map((_, i) => {
      // the first barrier by angle stands before the first well when the list starts with it, and so closes the turn
      const barrier = barriers[startsWithBarrier ? (i + 1) % barriers.length : i];
      return {
        wells: [i, (i + 1) % wells.length] as const,
        kind: barrier.kind === 'crossing' ? 'crossing' : 'barrier',
        angle: barrier.angle,
        energy: (barrier.energy - lowest) * factor,
      };
    }),
  };
}

/** Name of a well for people: the Klyne-Prelog name, both signs of a mirror pair as one when `either`. */
export function rotamerLabel({ name, commonName }: Rotamer, either = false): string {
  const label = either ? name.replace(/^[+-]/, '±') : name;
  return commonName ? `${label} (${commonName})` : label;
}

function takeTurns(ordered: readonly ProfileStationaryPoint[]): boolean {
  return ordered.every((point, n) => (point.kind === 'well') !== (ordered[(n + 1) % ordered.length].kind === 'well'));
}

interface Relations {
  readonly identical: number[][];
  readonly mirror: number[][];
}

function compareWells(document: ProfileDocument, wells: readonly ProfileStationaryPoint[]): Relations {
  const factor = kcalPer(document.unit);
  const kinds = moleculeOfDocument(document.molecule).symmetryClasses;
  const structures = wells.map((well) => Float64Array.from(well.coordinates));
  const identical: number[][] = wells.map(() => []);
  const mirror: number[][] = wells.map(() => []);
  for (let i = 0; i < wells.length; i++)
    for (let j = i; j < wells.length; j++) {
      if (Math.abs(wells[i].energy - wells[j].energy) * factor > SAME_ENERGY) continue;
      const found = isometries(structures[i], structures[j], kinds, { tolerance: SAME_DISTANCE, limit: 64 });
      if (i !== j && found.some((isometry) => isometry.proper)) {
        identical[i].push(j);
        identical[j].push(i);
      }
      if (found.some((isometry) => isometry.improper)) {
        mirror[i].push(j);
        if (i !== j) mirror[j].push(i);
      }
    }
  return { identical, mirror };
}

function speciesOf(wells: readonly ProfileStationaryPoint[], { identical, mirror }: Relations): number[] {
  const species = wells.map(() => -1);
  let count = 0;
  const byEnergy = wells.map((_, i) => i).sort((a, b) => wells[a].energy - wells[b].energy || a - b);
  for (const start of byEnergy) {
    if (species[start] >= 0) continue;
    const members = new Set([start]);
    for (const i of members) for (const j of [...identical[i], ...mirror[i]]) members.add(j);
    for (const i of members) species[i] = count;
    count++;
  }
  return species;
}

function snapped(angle: number): number {
  for (const exact of [-180, 0, 180]) if (Math.abs(angle - exact) < ON_MIRROR) return exact;
  return angle;
}

/** Bonds of saturated atoms whose rotamers are called gauche and anti. */
const SATURATED = new Set([
  'sp3-sp3',
  'alkyl ether',
  'alkyl amine',
  'thioether',
  'hydroxyl',
  'thiol',
  'disulfide',
  'heteroatom-heteroatom',
  'silyl ether',
]);

function commonName({ rotor, molecule }: ProfileDocument, angle: number): Rotamer['commonName'] {
  const size = Math.abs(angle - 360 * Math.round(angle / 360));
  if (rotor.kind === 'conjugated single bond') return size < 30 ? 's-cis' : size >= 150 ? 's-trans' : null;
  if (!SATURATED.has(rotor.kind)) return null;
  // gauche is said of the chain's own atoms; between carbons a hydrogen in the torsion has no such name
  const [a, , , d] = rotor.torsion;
  if (rotor.kind === 'sp3-sp3' && (molecule.elements[a] === 'H' || molecule.elements[d] === 'H')) return null;
  return size >= 150 ? 'anti' : size >= 30 && size < 90 ? 'gauche' : null;
}

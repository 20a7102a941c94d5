/** The wells of a profile as a chemist names them: which are the same molecule relabelled, which are mirror images. */
import { TordialError, wrapDegrees } from '@tordial/geometry';
import { energyAt, type KlynePrelogName, klynePrelogName, type ProfileDocument, type ProfileStationaryPoint } from '@tordial/scan';
import { moleculeOfDocument } from './document-molecule.js';
import { kcalPer } from './energy-unit.js';
import { isometries } from './isometries.js';
import { curveOfPoints } from './profile-checks.js';

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
  /** Its places in the document's `stationaryPoints`, the lowest first: several where one position is seen on several branches. */
  readonly stationaryPoints: readonly number[];
}

/** What stands between two neighbouring wells. */
export interface BarrierBetween {
  /** The well before it and the well after it, cyclic by angle. */
  readonly wells: readonly [number, number];
  /** `crossing`: no saddle is known, only where the envelope passes from one branch to another. */
  readonly kind: 'barrier' | 'crossing';
  /** Degrees. */
  readonly angle: number;
  /** Above the lowest well, kcal/mol. */
  readonly energy: number;
  /** Its place in the document's `stationaryPoints`; null where the document has none there. */
  readonly stationaryPoint: number | null;
}

/** Wells of the same energy within this, kcal/mol, and distances within this, angstrom, may be the same or mirror images. */
const SAME_ENERGY = 0.05;
const SAME_DISTANCE = 0.2;
/** Degrees within which a well that is its own mirror image stands at 0 or 180 exactly. */
const ON_MIRROR = 1;
/** Wells this near, degrees, with a crossing no higher than this above both, kcal/mol, are one position of the rotor seen on two branches. */
const SAME_POSITION = 20;
const SHALLOW = 0.1;

/**
 * The wells of a profile, ascending by angle, with `barriers[i]` between well i and the next one.
 *
 * Where two branches of the envelope cross in the bottom of one well, as they do when some other part of the molecule can lie either way, the
 * position counts once. Where the document has two wells without a maximum between, the highest point of the curve between them stands as a
 * crossing. Throws `profile/stationary-points` when there is no well or no maximum: such a profile has no rotamers to name.
 */
export function rotamers(document: ProfileDocument): { readonly wells: Rotamer[]; readonly barriers: BarrierBetween[] } {
  const { stationaryPoints } = document;
  const factor = kcalPer(document.unit);
  const unordered = mergedBottoms(alternating(document), document);
  const related = compareWells(
    document,
    unordered.map(({ wells }) => wells),
  );
  const angles = unordered.map((position, i) => angleOf(position, document, related.mirror[i].includes(i)));
  // what was seen on both sides of 180 may have moved from one end of the turn to the other
  const first = angles.indexOf(Math.min(...angles));
  const turned = <T>(row: readonly T[]): T[] => [...row.slice(first), ...row.slice(0, first)];
  const renumbered = (rows: readonly (readonly number[])[]): number[][] =>
    turned(rows).map((row) => row.map((i) => (i - first + rows.length) % rows.length).sort((i, j) => i - j));
  const turn = turned(unordered);
  const relations = { identical: renumbered(related.identical), mirror: renumbered(related.mirror) };

  const energies = turn.map(({ wells }) => stationaryPoints[wells[0]].energy);
  const lowest = Math.min(...energies);
  const species = speciesOf(energies, relations);
  return {
    wells: turned(angles).map((angle, i) => ({
      angle,
      energy: (energies[i] - lowest) * factor,
      name: klynePrelogName(angle),
      commonName: commonName(document, angle),
      identical: relations.identical[i],
      mirrorImages: relations.mirror[i],
      species: species[i],
      stationaryPoints: turn[i].wells,
    })),
    barriers: turn.map(({ after }, i) => ({
      wells: [i, (i + 1) % turn.length] as const,
      kind: after.kind,
      angle: after.angle,
      energy: (after.energy - lowest) * factor,
      stationaryPoint: after.stationaryPoint,
    })),
  };
}

/** A position of the rotor (stationary points by index, the lowest first) and the maximum after it, in the document's unit. */
interface Position {
  readonly wells: readonly number[];
  readonly after: Omit<BarrierBetween, 'wells'>;
}

/** Wells and maxima by angle, one of each in turn: of maxima that follow each other the highest, and between two wells something. */
function alternating(document: ProfileDocument): Position[] {
  const { stationaryPoints } = document;
  const order = stationaryPoints.map((_, n) => n).sort((a, b) => stationaryPoints[a].angle - stationaryPoints[b].angle);
  const wells = order.filter((n) => stationaryPoints[n].kind === 'well');
  if (wells.length === 0 || wells.length === order.length)
    throw new TordialError(
      'profile/stationary-points',
      `${wells.length} wells and ${order.length - wells.length} barriers: a flat or incomplete profile has no rotamers`,
    );
  return wells.map((well, i) => {
    const from = order.indexOf(well);
    const span = (order.indexOf(wells[(i + 1) % wells.length]) - from + order.length) % order.length || order.length;
    const between = Array.from({ length: span - 1 }, (_, step) => order[(from + 1 + step) % order.length]);
    const after =
      between.length > 0
        ? maximum(
            stationaryPoints,
            between.reduce((top, n) => (stationaryPoints[n].energy > stationaryPoints[top].energy ? n : top)),
          )
        : highestBetween(document, stationaryPoints[well].angle, stationaryPoints[wells[(i + 1) % wells.length]].angle);
    return { wells: [well], after };
  });
}

function maximum(points: readonly ProfileStationaryPoint[], n: number): Position['after'] {
  const { kind, angle, energy } = points[n];
  return { kind: kind === 'crossing' ? 'crossing' : 'barrier', angle, energy, stationaryPoint: n };
}

function highestBetween(document: ProfileDocument, from: number, to: number): Position['after'] {
  const curve = curveOfPoints(document);
  const width = to > from ? to - from : to - from + 360;
  const zero = document.points[0].energy - document.points[0].relativeEnergy;
  let best = { angle: from, height: Number.NEGATIVE_INFINITY };
  for (let step = 0; step <= 200; step++) {
    const angle = from + (width * step) / 200;
    const height = energyAt(curve, angle);
    if (height > best.height) best = { angle, height };
  }
  return { kind: 'crossing', angle: wrapDegrees(best.angle), energy: best.height / kcalPer(document.unit) + zero, stationaryPoint: null };
}

/** Neighbouring positions that only a shallow crossing parts, made one. */
function mergedBottoms(turn: readonly Position[], document: ProfileDocument): Position[] {
  const { stationaryPoints, unit } = document;
  const shallow = SHALLOW / kcalPer(unit);
  const positions = [...turn];
  for (let i = 0; positions.length > 1 && i < positions.length; ) {
    const j = (i + 1) % positions.length;
    const here = positions[i];
    const next = positions[j];
    const [a, b] = [here, next].map(({ wells }) => stationaryPoints[wells[0]]);
    const near = here.wells.some((m) =>
      next.wells.some((n) => Math.abs(wrapDegrees(stationaryPoints[m].angle - stationaryPoints[n].angle)) <= SAME_POSITION),
    );
    if (here.after.kind !== 'crossing' || !near || here.after.energy - Math.max(a.energy, b.energy) > shallow) {
      i++;
      continue;
    }
    const wells = [...here.wells, ...next.wells].sort((m, n) => stationaryPoints[m].energy - stationaryPoints[n].energy || m - n);
    positions[i] = { wells, after: next.after };
    positions.splice(j, 1);
  }
  return positions;
}

/** Name of a well for people: the Klyne-Prelog name, both signs of a mirror pair as one when `either`. */
export function rotamerLabel({ name, commonName }: Rotamer, either = false): string {
  const label = either ? name.replace(/^[+-]/, '±') : name;
  return commonName ? `${label} (${commonName})` : label;
}

interface Relations {
  readonly identical: number[][];
  readonly mirror: number[][];
}

/** How the positions are related, each by any of its wells. */
function compareWells({ molecule, stationaryPoints, unit }: ProfileDocument, positions: readonly (readonly number[])[]): Relations {
  const factor = kcalPer(unit);
  const kinds = moleculeOfDocument(molecule).symmetryClasses;
  const structures = stationaryPoints.map((point) => Float64Array.from(point.coordinates));
  const identical: Set<number>[] = positions.map(() => new Set());
  const mirror: Set<number>[] = positions.map(() => new Set());
  for (let i = 0; i < positions.length; i++)
    for (let j = i; j < positions.length; j++)
      for (const m of positions[i])
        for (const n of positions[j]) {
          if (i === j && n < m) continue;
          if (Math.abs(stationaryPoints[m].energy - stationaryPoints[n].energy) * factor > SAME_ENERGY) continue;
          const found = isometries(structures[m], structures[n], kinds, { tolerance: SAME_DISTANCE, limit: 64 });
          if (i !== j && found.some((isometry) => isometry.proper)) {
            identical[i].add(j);
            identical[j].add(i);
          }
          if (found.some((isometry) => isometry.improper)) {
            mirror[i].add(j);
            mirror[j].add(i);
          }
        }
  const ascending = (set: Set<number>): number[] => [...set].sort((a, b) => a - b);
  return { identical: identical.map(ascending), mirror: mirror.map(ascending) };
}

function speciesOf(energies: readonly number[], { identical, mirror }: Relations): number[] {
  const species = energies.map(() => -1);
  let count = 0;
  const byEnergy = energies.map((_, i) => i).sort((a, b) => energies[a] - energies[b] || a - b);
  for (const start of byEnergy) {
    if (species[start] >= 0) continue;
    const members = new Set([start]);
    for (const i of members) for (const j of [...identical[i], ...mirror[i]]) members.add(j);
    for (const i of members) species[i] = count;
    count++;
  }
  return species;
}

/** Angle of a position (degrees in [-180, 180)): the mean direction of its wells of equal energy, on the mirror plane where it is its own image. */
function angleOf({ wells }: Position, { stationaryPoints, unit }: ProfileDocument, ownMirror: boolean): number {
  const { angle: lowest, energy } = stationaryPoints[wells[0]];
  const equal = wells.map((n) => stationaryPoints[n]).filter((point) => (point.energy - energy) * kcalPer(unit) < SAME_ENERGY);
  const mean = lowest + equal.reduce((sum, point) => sum + wrapDegrees(point.angle - lowest), 0) / equal.length;
  return wrapDegrees(ownMirror ? snapped(wrapDegrees(mean)) : mean);
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

/** The result of a one-dimensional scan as a plain JSON document; the JSON Schema stands in docs/schemas/profile-1.json. */
import { type Coordinates, elementSymbol, type Molecule, type Note, TordialError } from '@tordial/geometry';
import { type EnergyUnit, perKcal } from './energy-unit.js';
import type { Profile } from './profile.js';
import type { BranchEnd } from './profile-curve.js';
import { rounded } from './rounded.js';
import type { Motion } from './stationary/motion.js';
import type { PathEnd, ProvedPoint, Verdict } from './stationary/proof-task.js';

export const PROFILE_SCHEMA = 'tordial/profile/1';

/** Input atoms in their order, enough to draw and to rebuild the molecule without any other file. */
export interface DocumentMolecule {
  readonly name: string;
  /** Canonical SMILES, stereo included. */
  readonly smiles: string;
  readonly elements: readonly string[];
  readonly formalCharges: readonly number[];
  /** Rows of atom, atom, order. */
  readonly bonds: readonly (readonly [number, number, number])[];
  /** Separate fragments, 1 for one molecule. */
  readonly fragments: number;
}

/** One torsion term on the rotor's axis, and where its constants come from. */
export interface DocumentTorsionTerm {
  readonly atoms: readonly [number, number, number, number];
  readonly types: readonly [number, number, number, number];
  readonly class: number;
  /** V1, V2, V3 (and beyond for a series), kcal/mol. */
  readonly v: readonly number[];
  /** Phases of a series' terms, degrees, where they are not 0, 180, 0, 180 ... */
  readonly phases?: readonly number[];
  readonly source: 'specific' | 'wildcard' | 'empirical rule' | 'series';
}

export interface DocumentRotor {
  readonly torsion: readonly [number, number, number, number];
  readonly axis: readonly [number, number];
  /** What a chemist calls the bond: 'aryl ether', 'amide', 'sp3-sp3' ... */
  readonly kind: string;
  /** Atoms that turn with the axis's first and second atom, the axis's own included. */
  readonly sides: readonly [readonly number[], readonly number[]];
  /** Torsions of other rotors that symmetry makes equivalent: this profile is theirs too, at -phi where `mirrored`. */
  readonly serves?: readonly { readonly torsion: readonly [number, number, number, number]; readonly mirrored: boolean }[];
  /** Torsion terms of the force field on the axis; empty for a potential that has none. */
  readonly parameters: readonly DocumentTorsionTerm[];
}

export interface ProfilePoint {
  /** Degrees, ascending; in [-180, 180) where the profile covers the full turn. */
  readonly angle: number;
  /** Absolute, in the document's unit. */
  readonly energy: number;
  /** Above the lowest well of the profile. */
  readonly relativeEnergy: number;
  /** Driving torque dE/dphi, unit per radian. */
  readonly torque: number;
  readonly converged: boolean;
  /** Largest component of the gradient tangent to the constraint, kcal/mol/angstrom; null for a rigid scan. */
  readonly residual: number | null;
  /** The next point (cyclic) lies on another branch of the envelope: no smooth curve joins the two. */
  readonly breakAfter: boolean;
  /** Across a break: this point's branch at the next point's angle and at the previous one's (energy, torque), where known. */
  readonly beyond: BranchEnd | null;
  readonly before: BranchEnd | null;
  /** Slope of the branch that leads on, where two branches of one energy meet at this very angle; the torque when left out. */
  readonly torqueAfter?: number;
  /** Angle of the point that this one is copied from, where only one period was scanned. */
  readonly copyOf?: number;
  /** Angstrom, x0 y0 z0 x1 ... */
  readonly coordinates: readonly number[];
}

export interface ProfileStationaryPoint {
  /** A `crossing` is a maximum of the envelope where two branches meet: no saddle, and the way between the branches may lead well above it. */
  readonly kind: 'well' | 'barrier' | 'crossing';
  readonly angle: number;
  readonly energy: number;
  readonly relativeEnergy: number;
  /** Driving torque left over, unit per radian; that of the lower branch for a crossing. */
  readonly torque: number;
  readonly converged: boolean;
  readonly coordinates: readonly number[];
}

/** A stationary point of the profile after it was proved: what it is, beside what the profile took it for. Energies in the document's unit. */
export interface ProfileProvedPoint {
  /** Index among `stationaryPoints`. */
  readonly of: number;
  readonly kind: 'well' | 'barrier' | 'crossing';
  readonly verdict: Verdict;
  /** Negative eigenvalues of the Hessian without translation and rotation. */
  readonly order: number;
  readonly angle: number;
  readonly energy: number;
  /** Above the lowest proved point. */
  readonly relativeEnergy: number;
  /** Largest gradient component, kcal/mol/angstrom. */
  readonly gradientMax: number;
  readonly converged: boolean;
  /** Root mean square distance from the profile's geometry, angstrom. */
  readonly moved: number;
  /** Of a saddle: overlap of its negative mode with the turn of the rotor, 0 to 1; the motion it resembles most; where its paths down end. */
  readonly overlap: number | null;
  readonly motion: { readonly kind: Motion['kind']; readonly atoms: readonly number[]; readonly overlap: number } | null;
  readonly ends: readonly [PathEnd, PathEnd] | null;
  /** Nitrogens that turn inside out between the two ends. */
  readonly inverts: readonly number[];
  /** Saddles on the way between the wells, of which this one is the highest; 0 where they are not joined. */
  readonly links: number;
  /** Of a well: the first well that is the same minimum with equivalent atoms exchanged. */
  readonly sameAs: number | null;
  /** Harmonic, cm-1, ascending; imaginary ones negative. */
  readonly frequencies: readonly number[];
  /** Angstrom. */
  readonly coordinates: readonly number[];
}

export interface ProfileDocument {
  readonly schema: typeof PROFILE_SCHEMA;
  readonly molecule: DocumentMolecule;
  readonly rotor: DocumentRotor;
  readonly unit: EnergyUnit;
  readonly points: readonly ProfilePoint[];
  readonly stationaryPoints: readonly ProfileStationaryPoint[];
  /** One for each stationary point, where they were proved. */
  readonly proved?: readonly ProfileProvedPoint[];
  /** What followed from the profile when it was written: rotamers, populations, rates, cautions. It can be made again from the rest. */
  readonly analysis?: Readonly<Record<string, unknown>>;
  readonly settings: {
    readonly kind: 'relaxed' | 'rigid';
    /** Degrees. */
    readonly step: number;
    readonly startAngle: number;
    /** First and last angle asked for: the profile is open and covers this range or what of it could be reached. Absent for the full turn. */
    readonly range?: readonly [number, number];
    /** Degrees that were scanned; the rest of the turn is copied from them. Absent where all was scanned. */
    readonly period?: number;
    readonly conformers: number;
    readonly seed: number;
    /** kcal/mol/angstrom. */
    readonly tolerance: number;
    readonly [name: string]: unknown;
  };
  readonly notes: readonly Note[];
  readonly provenance: { readonly program: string; readonly version: string; readonly potential: string; readonly [name: string]: unknown };
}

/** What a document says beside the scan itself. */
export interface DocumentDetails {
  readonly molecule: Molecule;
  /** Canonical SMILES. */
  readonly smiles: string;
  readonly fragments: number;
  readonly kind: string;
  readonly serves?: DocumentRotor['serves'];
  readonly parameters: readonly DocumentTorsionTerm[];
  readonly unit: EnergyUnit;
  /** Settings beside those the scan itself knows. */
  readonly settings: { readonly conformers: number; readonly seed: number; readonly [name: string]: unknown };
  /** Notes that came before those of the scan. */
  readonly notes: readonly Note[];
  readonly provenance: ProfileDocument['provenance'];
}

/** The document of a scan. Energies, torques, angles and coordinates are rounded to 1e-6, below what a scan resolves. */
export function profileDocument(profile: Profile, details: DocumentDetails): ProfileDocument {
  const { molecule, unit } = details;
  const factor = perKcal(unit);
  const { points, stationaryPoints } = profile;
  const lowest = Math.min(...points.map(({ energy }) => energy), ...stationaryPoints.map(({ energy }) => energy));
  const absolute = (energy: number): number => rounded(energy * factor);
  const branch = (end: BranchEnd | null): BranchEnd | null => end && { energy: absolute(end.energy), torque: absolute(end.torque) };
  const common = (point: { angle: number; energy: number; torque: number; converged: boolean; coordinates: Coordinates }) => ({
    angle: rounded(point.angle),
    energy: absolute(point.energy),
    relativeEnergy: absolute(point.energy - lowest),
    torque: absolute(point.torque),
    converged: point.converged,
    coordinates: Array.from(point.coordinates, rounded),
  });
  return {
    schema: PROFILE_SCHEMA,
    molecule: {
      name: molecule.name,
      smiles: details.smiles,
      elements: Array.from(molecule.atomicNumbers, elementSymbol),
      formalCharges: Array.from(molecule.formalCharges),
      bonds: Array.from(molecule.bonds.a, (a, n) => [a, molecule.bonds.b[n], molecule.bonds.order[n]] as const),
      fragments: details.fragments,
    },
    rotor: {
      torsion: profile.torsion,
      axis: [profile.torsion[1], profile.torsion[2]],
      kind: details.kind,
      sides: [Array.from(profile.sides.a), Array.from(profile.sides.b)],
      ...(details.serves && details.serves.length > 0 ? { serves: details.serves } : {}),
      parameters: details.parameters,
    },
    unit,
    points: points.map((point) => ({
      ...common(point),
      residual: point.residual === null ? null : rounded(point.residual),
      breakAfter: point.breakAfter,
      beyond: branch(point.beyond),
      before: branch(point.before),
      ...(point.torqueAfter === undefined ? {} : { torqueAfter: absolute(point.torqueAfter) }),
      ...(point.copyOf === undefined ? {} : { copyOf: rounded(point.copyOf) }),
    })),
    stationaryPoints: stationaryPoints.map((point) => ({ kind: point.kind, ...common(point) })),
    settings: {
      kind: profile.kind,
      step: profile.step,
      startAngle: profile.startAngle,
      ...(profile.range ? { range: profile.range } : {}),
      ...(profile.period === null ? {} : { period: profile.period }),
      tolerance: profile.tolerance,
      ...details.settings,
    },
    notes: [...details.notes, ...profile.notes],
    provenance: { ...details.provenance, evaluations: profile.evaluations },
  };
}

/**
 * A document with its proved points added: `frequencies` (cm-1) of each point in the same order. Throws `proof/points` when the points are not those of the document.
 */
export function withProvedPoints(
  document: ProfileDocument,
  points: readonly ProvedPoint[],
  frequencies: readonly ArrayLike<number>[],
  notes: readonly Note[],
): ProfileDocument {
  if (points.length !== document.stationaryPoints.length || frequencies.length !== points.length)
    throw new TordialError('proof/points', `${points.length} proved points for ${document.stationaryPoints.length} stationary points`);
  const factor = perKcal(document.unit);
  const lowest = Math.min(...points.map(({ energy }) => energy));
  return {
    ...document,
    proved: points.map(({ hessian: _, ...point }, n) => ({
      ...point,
      angle: rounded(point.angle),
      energy: rounded(point.energy * factor),
      relativeEnergy: rounded((point.energy - lowest) * factor),
      gradientMax: rounded(point.gradientMax),
      moved: rounded(point.moved),
      overlap: point.overlap === null ? null : rounded(point.overlap),
      motion: point.motion && { ...point.motion, overlap: rounded(point.motion.overlap) },
      ends: point.ends && [endOf(point.ends[0], factor), endOf(point.ends[1], factor)],
      frequencies: Array.from(frequencies[n], (value) => Math.round(value * 1e3) / 1e3 + 0),
      coordinates: Array.from(point.coordinates, rounded),
    })),
    notes: [...document.notes, ...notes],
  };
}

function endOf({ well, angle, energy }: PathEnd, factor: number): PathEnd {
  return { well, angle: rounded(angle), energy: rounded(energy * factor) };
}

/** Whether a profile ends at its first and last point instead of going round. */
export function isOpen({ settings }: Pick<ProfileDocument, 'settings'>): boolean {
  return settings.range !== undefined;
}

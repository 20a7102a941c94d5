/** The result of a one-dimensional scan as a plain JSON document; the JSON Schema stands in docs/schemas/profile-1.json. */
import type { Note } from '@tordial/geometry';

export const PROFILE_SCHEMA = 'tordial/profile/1';

export type EnergyUnit = 'kcal/mol' | 'kJ/mol';

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
  readonly source: 'specific' | 'wildcard' | 'empirical rule' | 'series';
}

export interface DocumentRotor {
  readonly torsion: readonly [number, number, number, number];
  readonly axis: readonly [number, number];
  /** What a chemist calls the bond: 'aryl ether', 'amide', 'sp3-sp3' ... */
  readonly kind: string;
  /** Atoms that turn with the axis's first and second atom, the axis's own included. */
  readonly sides: readonly [readonly number[], readonly number[]];
  /** Torsion terms of the force field on the axis; empty for a potential that has none. */
  readonly parameters: readonly DocumentTorsionTerm[];
}

export interface ProfilePoint {
  /** Degrees, ascending in [-180, 180). */
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
  /** Angstrom, x0 y0 z0 x1 ... */
  readonly coordinates: readonly number[];
}

export interface ProfileStationaryPoint {
  /** A `crossing` is a maximum of the envelope where two branches meet, an upper bound and no saddle. */
  readonly kind: 'well' | 'barrier' | 'crossing';
  readonly angle: number;
  readonly energy: number;
  readonly relativeEnergy: number;
  readonly coordinates: readonly number[];
}

export interface ProfileDocument {
  readonly schema: typeof PROFILE_SCHEMA;
  readonly molecule: DocumentMolecule;
  readonly rotor: DocumentRotor;
  readonly unit: EnergyUnit;
  readonly points: readonly ProfilePoint[];
  readonly stationaryPoints: readonly ProfileStationaryPoint[];
  readonly settings: {
    readonly kind: 'relaxed' | 'rigid';
    /** Degrees. */
    readonly step: number;
    readonly startAngle: number;
    readonly conformers: number;
    readonly seed: number;
    /** kcal/mol/angstrom. */
    readonly tolerance: number;
    readonly [name: string]: unknown;
  };
  readonly notes: readonly Note[];
  readonly provenance: { readonly program: string; readonly version: string; readonly potential: string; readonly [name: string]: unknown };
}

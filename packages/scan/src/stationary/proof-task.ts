/** What every part of a proof works with: the molecule, the rotor, what is counted and noted, and what a proved point is. */

import { type Coordinates, degrees, leastRmsd, type Molecule, type Note, torsion as torsionAngle, wrapDegrees } from '@tordial/geometry';
import type { DrivenRotor } from '../driven-rotor.js';
import { minimise } from '../minimise.js';
import type { Calculation } from '../potential.js';
import type { Preconditioner } from '../preconditioner.js';
import type { Torsion } from '../rotors/defining-torsion.js';
import type { Motion } from './motion.js';
import { type StationaryStructure, stationaryPoint } from './saddle.js';
import type { Minimum } from './same-minimum.js';

/** A stationary point of a profile that is to be proved. */
export interface Candidate {
  readonly kind: 'well' | 'barrier' | 'crossing';
  /** Degrees. */
  readonly angle: number;
  /** Angstrom. */
  readonly coordinates: Coordinates;
}

/** What is known of a profile: its stationary points and the geometries along it, both ascending by angle round one turn. */
export interface Candidates {
  readonly torsion: Torsion;
  readonly stationaryPoints: readonly Candidate[];
  readonly points: readonly { readonly angle: number; readonly coordinates: Coordinates }[];
}

/** Displacement (angstrom, all coordinates together) that takes a structure off a ridge. */
export const PUSH = 0.15;

export interface ProofOptions {
  /** Largest gradient component of a proved point, kcal/mol/angstrom; 1e-4. */
  readonly tolerance?: number;
  /** Displacement of the Hessians' differences, angstrom; 1e-3. More for a potential whose gradient is noisy. */
  readonly displacement?: number;
  readonly onProgress?: (done: number, total: number) => void;
}

/**
 * `minimum` and `saddle` are what they should be: no negative eigenvalue; one, with paths down to the wells on either side, by way of other minima and lower saddles where need be. `merged`: the well relaxed into another
 * well. `other saddle`: first-order, but its paths end elsewhere; `higher order`: more than one negative eigenvalue; `not found`: nothing to prove.
 */
export type Verdict = 'minimum' | 'merged' | 'saddle' | 'other saddle' | 'higher order' | 'not found';

/** Where a path down from a saddle ends. */
export interface PathEnd {
  /** Index of the well among the stationary points; null for a minimum that is no well of the profile. */
  readonly well: number | null;
  /** The rotor's angle there, degrees, and the energy, kcal/mol. */
  readonly angle: number;
  readonly energy: number;
}

export interface ProvedPoint extends Minimum {
  /** Index of the stationary point that it was refined from. */
  readonly of: number;
  readonly kind: Candidate['kind'];
  readonly verdict: Verdict;
  /** Negative eigenvalues of the projected Hessian. */
  readonly order: number;
  /** Of the rotor, degrees in [-180, 180). */
  readonly angle: number;
  readonly gradientMax: number;
  readonly converged: boolean;
  /** Root mean square distance from the profile's geometry, angstrom. */
  readonly moved: number;
  /** Of a saddle: the overlap of its negative mode with the turn of the profile's rotor, mass-weighted, 0 to 1. */
  readonly overlap: number | null;
  /** Of a saddle: the motion that its negative mode resembles most. */
  readonly motion: Motion | null;
  /** Of a first-order saddle: where its two paths down end, that towards smaller angles of the rotor first. */
  readonly ends: readonly [PathEnd, PathEnd] | null;
  /** Of a first-order saddle: nitrogens that turn inside out between its two ends. */
  readonly inverts: readonly number[];
  /**
   * Saddles on the way between the two wells, all proved, of which this one is the highest: 1 when its own paths end in the wells; more when the way
   * passes other minima, whose other rotors turn or nitrogens invert. 0 where the wells are not joined.
   */
  readonly links: number;
  /** Of a well: the first of the wells that is the same minimum with equivalent atoms exchanged, by index among the stationary points; itself when it is the first. */
  readonly sameAs: number | null;
  /** Row-major, kcal/mol/angstrom^2. */
  readonly hessian: Float64Array;
}

export interface ProvedPoints {
  /** One for each stationary point of the profile, in their order. */
  readonly points: readonly ProvedPoint[];
  readonly notes: readonly Note[];
  /** Energies and gradients asked for. */
  readonly evaluations: number;
}

export interface Proof {
  readonly molecule: Molecule;
  readonly rotor: DrivenRotor;
  readonly masses: Float64Array;
  readonly model: Preconditioner;
  readonly tolerance: number;
  readonly displacement: number | undefined;
  readonly same: (p: Minimum, q: Minimum) => boolean;
  readonly notes: Note[];
  /** Saddles beyond its own that may still be tried for the barrier at work. */
  tries: number;
  /** Evaluations beyond which nothing further is tried for it. */
  limit: number;
  /** Where the barrier at work stands: degrees from the angle of the well before it, and on to the well after it. */
  arc: { readonly from: number; readonly width: number };
  evaluations: number;
}

/** A free relaxation that turns the rotor by more than this, degrees, has left its well. */
export const LEFT = 20;

/** Two minima whose rotor stands within this, degrees, are at one angle. */
export const SAME_ANGLE = 5;

/** Overlap with the turn of the rotor below which a saddle is another bond's. */
export const TAKES_PART = 0.1;

/** Saddles that are tried for one barrier beyond its own before the wells count as not joined. */
export const MOST_TRIES = 4;

/** Energies and gradients that one barrier may cost before no further way is tried: a flexible molecule has more ways than can be followed. */
export const MOST_EVALUATIONS = 6000;

export function angleOf({ rotor: { torsion } }: Proof, x: Coordinates): number {
  return wrapDegrees(degrees(torsionAngle(x, ...torsion)));
}

export function* minimumNear(work: Proof, start: Coordinates): Calculation<StationaryStructure> {
  const rough = yield* minimise(start, work.model, { tolerance: work.tolerance });
  work.evaluations += rough.evaluations;
  let found = yield* refined(work, rough.coordinates, 0, []);
  for (let n = 0; n < 4 && found.order > 0; n++) {
    const again = yield* minimise(displaced(found.coordinates, found.modes.vectors[0], PUSH), work.model, { tolerance: work.tolerance });
    work.evaluations += again.evaluations;
    found = yield* refined(work, again.coordinates, 0, []);
  }
  return found;
}

export function* refined(
  work: Proof,
  start: Coordinates,
  order: number,
  follow: readonly Float64Array[],
): Calculation<StationaryStructure> {
  const found = yield* stationaryPoint(start, {
    order,
    follow,
    tolerance: work.tolerance,
    displacement: work.displacement,
    maxSteps: 40,
    renewal: 15,
  });
  work.evaluations += found.evaluations;
  return found;
}

export function displaced(x: Coordinates, direction: Float64Array, by: number): Coordinates {
  return x.map((value, k) => value + by * direction[k]);
}

export function plain(work: Proof, found: StationaryStructure, of: number, kind: Candidate['kind'], before: Coordinates) {
  const { coordinates, energy, gradientMax, converged, order, hessian } = found;
  return {
    of,
    kind,
    order,
    angle: angleOf(work, coordinates),
    energy,
    gradientMax,
    converged,
    moved: leastRmsd(coordinates, before),
    coordinates,
    hessian,
  };
}

export function say({ notes }: Proof, code: string, message: string): void {
  notes.push({ code, message });
}

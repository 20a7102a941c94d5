/**
 * Conformers: structures from distance geometry and moved copies of the lowest of them, relaxed on a potential, each only once.
 *
 * More starts than conformers are relaxed roughly; the lowest different ones are then relaxed to the end. Two structures are one conformer
 * when their energies agree and symmetry-aware superposition lays their heavy atoms on each other; mirror images stay two.
 *
 * Half of the starts are turned copies of what is lowest so far, the least used first: G. Chang, W. C. Guida, W. C. Still, J. Am. Chem. Soc. 111, 4379 (1989).
 */
import {
  type AutomorphismGroup,
  automorphisms,
  type Coordinates,
  embedMany,
  type Molecule,
  type Note,
  openStereo,
  perceiveStereo,
  type StereoTable,
  seededRandom,
  symmetricRmsd,
  TordialError,
} from '@tordial/geometry';
import { drive } from './drive.js';
import { checkSizes, minimise, type Relaxed } from './minimise.js';
import { modelHessian } from './model-hessian.js';
import type { Calculation, Potential } from './potential.js';
import type { Preconditioner } from './preconditioner.js';
import { findRotors } from './rotors/index.js';
import { movableRotors, torsionMove } from './torsion-moves.js';

export interface ConformerOptions {
  /** Conformers wanted at most; 20. */
  readonly count?: number;
  /** Structures relaxed roughly to choose from; three times `count`. */
  readonly starts?: number;
  /** Start of the random numbers: the same seed gives the same conformers. Default 1. */
  readonly seed?: number;
  /** Conformers higher than this above the lowest are left out, kcal/mol; no limit. */
  readonly window?: number;
  /** Heavy-atom distance below which two structures of equal energy are one conformer, angstrom; 0.1. */
  readonly rmsd?: number;
  /** Largest gradient component of a relaxed conformer, kcal/mol/angstrom; 1e-3. */
  readonly tolerance?: number;
  /**
   * What becomes of stereocentres, double bonds and axes that the molecule leaves open: `one` (default) gives all conformers the configuration
   * of the first structure, so that they interconvert by rotation; `any` lets each start choose, and energies of different stereoisomers mix.
   */
  readonly openStereo?: 'one' | 'any';
}

export interface Conformer {
  /** Angstrom. */
  readonly coordinates: Coordinates;
  /** kcal/mol. */
  readonly energy: number;
  /** Above the lowest, kcal/mol. */
  readonly relativeEnergy: number;
  readonly converged: boolean;
}

export interface ConformerSet {
  /** Lowest first; at least one. */
  readonly conformers: readonly Conformer[];
  /** Open stereocentres and what was chosen, conformers that did not converge, starts that lost their configuration. */
  readonly notes: readonly Note[];
  /** Energies and gradients asked for. */
  readonly evaluations: number;
}

/** Energies of one conformer from two starts agree to this, kcal/mol, once they are relaxed; before that to ROUGHLY_EQUAL. */
const EQUAL = 0.01;
const ROUGHLY_EQUAL = 0.1;
/** Share of the starts that are embedded; the others are moved copies of the lowest. */
const EMBEDDED = 0.5;
/** Structures this far above the lowest are moved on from, kcal/mol. */
const NEAR = 5;
/** Where the rough relaxation stops, kcal/mol/angstrom. */
const ROUGH = 0.5;
/** Automorphisms that a comparison tries at most; beyond that a copy may be kept as a second conformer. */
const AUTOMORPHISM_LIMIT = 500;

/**
 * Different relaxed structures of a molecule. Throws `embed/failed` when it cannot be embedded, `conformers/settings` for settings out of
 * range, `conformers/stereo` when no relaxed structure keeps the stated configuration, `potential/atoms` when sizes differ.
 */
export function conformers(molecule: Molecule, potential: Potential, options: ConformerOptions = {}): ConformerSet {
  checkSizes(molecule, potential, new Float64Array(3 * molecule.atomCount));
  return drive(conformerSearch(molecule, options), potential);
}

/** The search as a calculation, for any kind of potential. Throws as `conformers` does. */
export function* conformerSearch(molecule: Molecule, options: ConformerOptions = {}): Calculation<ConformerSet> {
  const { count = 20, seed = 1, window = Number.POSITIVE_INFINITY, rmsd = 0.1, tolerance = 1e-3, openStereo: open = 'one' } = options;
  const starts = options.starts ?? 3 * count;
  if (!(Number.isInteger(count) && count >= 1 && Number.isInteger(starts) && starts >= count))
    throw new TordialError('conformers/settings', `conformers need a count of at least 1 and no fewer starts, not ${count} and ${starts}`);
  if (!(window >= 0 && rmsd >= 0 && tolerance > 0))
    throw new TordialError('conformers/settings', 'window and rmsd must not be negative, tolerance must be positive');

  const notes: Note[] = openStereo(molecule);
  const whole = open === 'one' && notes.length > 0 ? withConfiguration(molecule, seed) : molecule;
  const model = modelHessian(molecule);
  const group = automorphisms(whole, { limit: AUTOMORPHISM_LIMIT });
  let evaluations = 0;

  const rough: Relaxed[] = [];
  const rotors = movableRotors(findRotors(molecule));
  const embedded = rotors.length === 0 ? starts : Math.max(count, Math.ceil(starts * EMBEDDED));
  const known: Known[] = [];
  const random = seededRandom(seed + 1);
  for (const start of embedMany(whole, embedded, { seed })) yield* add(start);
  for (let n = embedded; n < starts; n++) {
    // the least used of the lowest structures, so that none is exhausted while a better one waits
    const lowest = Math.min(...known.map(({ relaxed }) => relaxed.energy));
    const near = known.filter(({ relaxed }) => relaxed.energy - lowest <= NEAR);
    const parent = near.reduce((p, q) => (q.used < p.used || (q.used === p.used && q.relaxed.energy < p.relaxed.energy) ? q : p));
    parent.used++;
    const moved = torsionMove(molecule, rotors, parent.relaxed.coordinates, random);
    if (moved) yield* add(moved);
  }
  const chosen = different(whole, group, rough, rmsd, ROUGHLY_EQUAL).slice(0, count);

  const final: Relaxed[] = [];
  for (const { coordinates } of chosen) {
    const relaxed: Relaxed = yield* relaxation(model, coordinates, tolerance);
    evaluations += relaxed.evaluations;
    final.push(relaxed);
  }
  const sound = final.filter(({ coordinates }) => keepsStereo(whole, coordinates));
  if (sound.length === 0)
    throw new TordialError(
      'conformers/stereo',
      'every structure lost its stated configuration while it relaxed: the potential does not hold it',
    );
  if (sound.length < final.length)
    notes.push({
      code: 'conformers/stereo',
      message: `${final.length - sound.length} structures lost their stated configuration while they relaxed and are left out`,
    });

  const kept = different(whole, group, sound, rmsd, EQUAL);
  const lowest = kept[0].energy;
  const result = kept
    .filter(({ energy }) => energy - lowest <= window)
    .map(({ coordinates, energy, converged }) => ({ coordinates, energy, relativeEnergy: energy - lowest, converged }));
  const stopped = result.filter(({ converged }) => !converged).length;
  if (stopped > 0)
    notes.push({
      code: 'conformers/convergence',
      message: `${stopped} of ${result.length} conformers did not reach the gradient asked for`,
    });
  return { conformers: result, notes, evaluations };

  function* add(start: Coordinates): Calculation<void> {
    const relaxed: Relaxed = yield* relaxation(model, start, Math.max(ROUGH, tolerance));
    evaluations += relaxed.evaluations;
    rough.push(relaxed);
    if (!known.some(({ relaxed: { energy } }) => Math.abs(energy - relaxed.energy) < ROUGHLY_EQUAL)) known.push({ relaxed, used: 0 });
  }
}

/** A structure to move on from, and how often that was done. */
interface Known {
  readonly relaxed: Relaxed;
  used: number;
}

function* relaxation(model: Preconditioner, start: Coordinates, tolerance: number): Calculation<Relaxed> {
  return yield* minimise(start, model, { tolerance });
}

/** The molecule with its open configurations stated as a first structure has them. */
function withConfiguration(molecule: Molecule, seed: number): Molecule {
  const [first] = embedMany(molecule, 1, { seed });
  return { ...molecule, stereo: perceiveStereo(molecule, first) };
}

/** The stated configurations are all there. */
export function keepsStereo(molecule: Molecule, x: Coordinates): boolean {
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  const seen: StereoTable = perceiveStereo(molecule, x);
  return (
    tetrahedral.every(({ sign }, n) => sign === 0 || seen.tetrahedral[n].sign === sign) &&
    doubleBonds.every(({ cis }, n) => cis === null || seen.doubleBonds[n].cis === cis) &&
    axes.every(({ sign }, n) => sign === 0 || seen.axes[n].sign === sign)
  );
}

/** The structures without copies, lowest first. */
function different(molecule: Molecule, group: AutomorphismGroup, structures: readonly Relaxed[], rmsd: number, equal: number): Relaxed[] {
  const kept: Relaxed[] = [];
  for (const candidate of structures.toSorted((p, q) => p.energy - q.energy)) {
    const copy = kept.some(
      ({ energy, coordinates }) =>
        candidate.energy - energy <= equal && symmetricRmsd(molecule, candidate.coordinates, coordinates, group) <= rmsd,
    );
    if (!copy) kept.push(candidate);
  }
  return kept;
}

/**
 * The Merck molecular force field MMFF94 and its static variant MMFF94s of one molecule.
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490-519, 520-552, 553-586, 587-615, 616-641 (1996); 20, 720-729, 730-748 (1999).
 */
import { type Coordinates, type Molecule, TordialError } from '@tordial/geometry';
import { addNonBondedVectors } from './kernel/vector-rows.js';
import { assignParameters, type Mmff94Parameters, type Mmff94Variant } from './parameters/assign-parameters.js';
import { type TorsionSeries, type TorsionsWithSeries, withTorsionSeries } from './parameters/torsion-series-parameters.js';
import { addAngleBending } from './terms/angle-bending.js';
import { addBondStretching } from './terms/bond-stretching.js';
import type { Dielectric } from './terms/electrostatic.js';
import { addNonBonded, nonBondedEnergies, nonBondedRows } from './terms/non-bonded.js';
import { addOutOfPlane } from './terms/out-of-plane.js';
import { addStretchBend } from './terms/stretch-bend.js';
import { addTorsions } from './terms/torsion.js';
import { addTorsionSeries } from './terms/torsion-series.js';

export interface Mmff94Options {
  /** MMFF94s, the default, keeps delocalised trivalent nitrogen planar, as time-averaged structures have it. */
  readonly variant?: Mmff94Variant;
  /** Constant with D = 1 by default. */
  readonly dielectric?: Dielectric;
  /** Torsion series in place of MMFF94's own torsion terms, such as the `series` of a `tordial/fit/1` document for this molecule. */
  readonly torsionOverrides?: readonly TorsionSeries[];
  /** False for the plain loop over pairs where the WebAssembly one would be taken; they agree to rounding. */
  readonly vectors?: boolean;
}

/** The seven terms of the energy, kcal/mol; their sum is the energy. */
export interface EnergyTerms {
  readonly bondStretching: number;
  readonly angleBending: number;
  readonly stretchBend: number;
  readonly outOfPlane: number;
  readonly torsion: number;
  readonly vanDerWaals: number;
  readonly electrostatic: number;
}

/** The energy of a molecule as a function of its coordinates. It owns its tables; `evaluate` allocates nothing. */
export interface Mmff94 {
  readonly atomCount: number;
  readonly variant: Mmff94Variant;
  /** What to call it in a result: the variant, and ' + series' where torsion series of the caller stand in it. */
  readonly label: string;
  readonly torsionOverrides: readonly TorsionSeries[];
  readonly dielectric: Dielectric;
  readonly parameters: Mmff94Parameters & TorsionsWithSeries;
  /**
   * Energy in kcal/mol of the coordinates (angstrom, 3 an atom); overwrites `gradient`, when given, with dE/dx (kcal/mol/angstrom, 3 an atom).
   * Throws `mmff94/coordinates` for arrays of another length and for coordinates that are no numbers or beyond 1e9 angstrom.
   */
  evaluate(x: Coordinates, gradient?: Float64Array): number;
  /** The energy term by term. Throws as `evaluate`. */
  terms(x: Coordinates): EnergyTerms;
}

/**
 * Types the atoms, assigns charges and parameters, and returns the energy function.
 *
 * Throws `mmff94/atom-type` for an atom that MMFF94 does not cover, naming it and the reason, `mmff94/parameter` for an interaction that
 * has neither constants nor a rule, `mmff94/variant` or `mmff94/dielectric` for options that are none, and `mmff94/torsion-series` for overrides that do not fit the molecule.
 */
export function mmff94(molecule: Molecule, options: Mmff94Options = {}): Mmff94 {
  const { variant = 'MMFF94s', dielectric = { model: 'constant', constant: 1 }, torsionOverrides = [], vectors = true } = options;
  if (variant !== 'MMFF94' && variant !== 'MMFF94s')
    throw new TordialError('mmff94/variant', `there is no variant ${variant}; take MMFF94 or MMFF94s`);
  checkDielectric(dielectric);

  const { atomCount } = molecule;
  const assigned = assignParameters(molecule, variant);
  const parameters = { ...assigned, ...withTorsionSeries(assigned.torsion, torsionOverrides) };
  const { bondStretching, angleBending, stretchBend, outOfPlane, torsion, torsionSeries } = parameters;
  const rows = nonBondedRows(molecule, parameters.vanDerWaals, parameters.partialCharges, dielectric);
  const unread = new Float64Array(3 * atomCount);

  function evaluate(x: Coordinates, gradient: Float64Array = unread): number {
    checkCoordinates(x, atomCount);
    if (gradient.length !== 3 * atomCount) throw wrongLength('gradient', gradient.length, atomCount);
    gradient.fill(0);
    const bonded =
      addBondStretching(bondStretching, x, gradient) +
      addAngleBending(angleBending, x, gradient) +
      addStretchBend(stretchBend, x, gradient) +
      addOutOfPlane(outOfPlane, x, gradient) +
      addTorsions(torsion, x, gradient) +
      addTorsionSeries(torsionSeries, x, gradient);
    const nonBonded = (vectors ? addNonBondedVectors(rows, x, gradient) : undefined) ?? addNonBonded(rows, x, gradient);
    return bonded + nonBonded;
  }

  function terms(x: Coordinates): EnergyTerms {
    checkCoordinates(x, atomCount);
    return {
      bondStretching: addBondStretching(bondStretching, x, unread),
      angleBending: addAngleBending(angleBending, x, unread),
      stretchBend: addStretchBend(stretchBend, x, unread),
      outOfPlane: addOutOfPlane(outOfPlane, x, unread),
      torsion: addTorsions(torsion, x, unread) + addTorsionSeries(torsionSeries, x, unread),
      ...nonBondedEnergies(rows, x),
    };
  }

  const label = torsionOverrides.length > 0 ? `${variant} + series` : variant;
  return { atomCount, variant, label, torsionOverrides, dielectric, parameters, evaluate, terms };
}

function checkDielectric({ model, constant }: Dielectric): void {
  if (model !== 'constant' && model !== 'distance')
    throw new TordialError('mmff94/dielectric', `there is no dielectric model ${model}; take constant or distance`);
  if (!(constant > 0 && Number.isFinite(constant)))
    throw new TordialError('mmff94/dielectric', `the dielectric constant must be a positive number, not ${constant}`);
}

function wrongLength(what: string, length: number, atomCount: number): TordialError {
  return new TordialError('mmff94/coordinates', `${length} ${what} values for ${atomCount} atoms; give three an atom`);
}

/** Farther than any system reaches, and near enough that no power of a distance in the terms overflows, angstrom. */
const FARTHEST = 1e9;

function checkCoordinates(x: Coordinates, atomCount: number): void {
  if (x.length !== 3 * atomCount) throw wrongLength('coordinate', x.length, atomCount);
  for (let n = 0; n < x.length; n++) {
    if (Math.abs(x[n]) <= FARTHEST) continue;
    const atom = Math.floor(n / 3);
    throw new TordialError(
      'mmff94/coordinates',
      `the ${'xyz'[n % 3]} coordinate of atom ${atom} is ${x[n]}; give numbers up to ${FARTHEST}`,
      { atom },
    );
  }
}

/** Relaxation of a molecule with one rotor held exactly at an angle. */
import { type Coordinates, type Molecule, radians } from '@tordial/geometry';
import { drive } from './drive.js';
import { checkBent, type DrivenRotor, drivenRotor, heldAt, rigidTorque } from './driven-rotor.js';
import { checkSizes, type MinimiseOptions, minimise, type Preconditioner, type Relaxed } from './minimise.js';
import { modelHessian } from './model-hessian.js';
import type { Calculation, Potential } from './potential.js';
import type { Torsion } from './rotors/defining-torsion.js';

export interface RelaxedAt extends Relaxed {
  /** dE/dphi along the relaxed path: the constraint's Lagrange multiplier, kcal/mol/radian. */
  readonly torque: number;
}

export type RelaxAtOptions = Omit<MinimiseOptions, 'constraint'>;

/**
 * Relaxes `start` with the rotor held at `angle` (radian). The preconditioner must be one for this constraint, as `modelHessian` with the rotor's torsion is.
 *
 * The torque is that of turning side b rigidly at the relaxed geometry. There g = lambda dphi/dx with the multiplier lambda, and the rigid
 * turn t has t . dphi/dx = 1, so g . t = lambda, which by the envelope theorem is the slope of the relaxed energy.
 */
export function* relaxationAt(
  rotor: DrivenRotor,
  preconditioner: Preconditioner,
  angle: number,
  start: Coordinates,
  options: RelaxAtOptions = {},
): Calculation<RelaxedAt> {
  checkBent(rotor, start);
  const constraint = heldAt(rotor, angle);
  const x = start.slice();
  constraint.retract(x);
  const relaxed = yield* minimise(x, preconditioner, { ...options, constraint });
  checkBent(rotor, relaxed.coordinates);
  return { ...relaxed, torque: rigidTorque(rotor, relaxed.coordinates, relaxed.gradient) };
}

/**
 * Relaxes `x` (left as it is) with the torsion i-a-b-j held at `angle` degrees.
 * Throws as `minimise` and `drivenRotor` do; `scan/linear` when an angle within the torsion opens beyond 175 degrees.
 */
export function relaxAt(
  molecule: Molecule,
  potential: Potential,
  torsion: Torsion,
  angle: number,
  x: Coordinates,
  options: RelaxAtOptions = {},
): RelaxedAt {
  checkSizes(molecule, potential, x);
  const rotor = drivenRotor(molecule, torsion);
  return drive(relaxationAt(rotor, modelHessian(molecule, torsion), radians(angle), x, options), potential);
}

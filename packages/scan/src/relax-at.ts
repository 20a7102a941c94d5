/** Relaxation of a molecule with one rotor held exactly at an angle. */
import { type Coordinates, degrees, type Molecule, radians, TordialError, wrapRadians } from '@tordial/geometry';
import { drive } from './drive.js';
import { checkBent, type DrivenRotor, drivenRotor, heldAt, rigidTorque, rotorAngle } from './driven-rotor.js';
import { checkSizes, type MinimiseOptions, minimise, type Relaxed } from './minimise.js';
import { modelHessian } from './model-hessian.js';
import type { Calculation, Potential } from './potential.js';
import type { Preconditioner } from './preconditioner.js';
import { heldInRing } from './ring-torsion.js';
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
  if (rotor.inRing) return yield* relaxationInRing(rotor, preconditioner, angle, start, options);
  const relaxed = yield* minimise(start, preconditioner, { ...options, constraint: heldAt(rotor, angle) });
  checkBent(rotor, relaxed.coordinates);
  return { ...relaxed, torque: rigidTorque(rotor, relaxed.coordinates, relaxed.gradient) };
}

/** The same for a torsion inside a ring, whose multiplier is that of `heldInRing`. Throws `scan/ring-broken` when the angle cannot be reached. */
function* relaxationInRing(
  rotor: DrivenRotor,
  preconditioner: Preconditioner,
  angle: number,
  start: Coordinates,
  options: RelaxAtOptions,
): Calculation<RelaxedAt> {
  const constraint = heldInRing(rotor, angle, preconditioner);
  const x = start.slice();
  preconditioner.follow?.(x);
  constraint.retract(x);
  if (!(Math.abs(wrapRadians(angle - rotorAngle(rotor, x))) < 1e-8))
    throw new TordialError(
      'scan/ring-broken',
      `Newton steps do not bring the torsion ${rotor.torsion.join('-')} to ${degrees(angle).toFixed(1)} degrees: the ring would break there`,
    );
  const relaxed = yield* minimise(x, preconditioner, { ...options, constraint });
  checkBent(rotor, relaxed.coordinates);
  return { ...relaxed, torque: constraint.multiplier(relaxed.coordinates, relaxed.gradient) };
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
  const rotor = drivenRotor(molecule, torsion, { rings: true });
  return drive(relaxationAt(rotor, modelHessian(molecule, rotor.inRing ? null : torsion), radians(angle), x, options), potential);
}

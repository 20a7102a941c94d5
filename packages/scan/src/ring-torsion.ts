/**
 * A torsion inside a ring, held exactly. Nothing turns rigidly there: the geometry is brought back onto the constraint by Newton steps along the
 * gradient of the angle, in the metric of the model Hessian, so that the change goes into the softest motions (ring puckering) and not into
 * bonds.
 *
 * Source of the projection: with n = dphi/dx and H the model Hessian, v = H^-1 n / (n . H^-1 n) changes phi at the rate 1 at the least cost;
 * D. G. Luenberger, Management Sci. 18, 620 (1972), on steps along a constraint and back onto it.
 */
import {
  type Coordinates,
  degrees,
  distance,
  type Molecule,
  neighboursOf,
  TordialError,
  torsionGradient,
  wrapRadians,
} from '@tordial/geometry';
import { type DrivenRotor, rotorAngle } from './driven-rotor.js';
import { type Constraint, largest } from './minimise.js';
import type { Preconditioner } from './preconditioner.js';

/** Radian: the angle counts as held within this. */
const HELD = 1e-10;
const MOST_STEPS = 40;
/** Radian: the farthest that one Newton step goes. */
const LONGEST = 0.1;

/** A ring torsion held at an angle, and its Lagrange multiplier. */
export interface HeldInRing extends Constraint {
  /** dE/dphi for a gradient dE/dx at a relaxed geometry, kcal/mol/radian. */
  multiplier(x: Coordinates, gradient: Float64Array): number;
}

/**
 * The torsion held at `angle` (radian). The preconditioner is that of the free molecule and must have followed the geometry.
 * Where the Newton steps do not arrive, the geometry stays off the constraint and `reduce` gives NaN, so that a minimiser takes a shorter step.
 */
export function heldInRing(rotor: DrivenRotor, angle: number, preconditioner: Preconditioner): HeldInRing {
  const length = 3 * rotor.atomCount;
  const [i, a, b, j] = rotor.torsion;
  const places = [3 * i, 3 * a, 3 * b, 3 * j];
  const slope = new Float64Array(12);
  const normal = new Float64Array(length);
  const softest = new Float64Array(length);
  const tangent = new Float64Array(length);

  /** Writes n, and v with n . v = 1. */
  function lookAt(x: Coordinates): void {
    torsionGradient(x, i, a, b, j, slope);
    normal.fill(0);
    places.forEach((at, p) => {
      for (let k = 0; k < 3; k++) normal[at + k] = slope[3 * p + k];
    });
    preconditioner.solve(normal, softest);
    const rate = dot(normal, softest);
    for (let k = 0; k < length; k++) softest[k] /= rate;
  }

  const off = (x: Coordinates): number => wrapRadians(angle - rotorAngle(rotor, x));

  return {
    retract: (x) => {
      for (let n = 0; n < MOST_STEPS; n++) {
        const rest = off(x);
        if (!(Math.abs(rest) > HELD)) return;
        lookAt(x);
        const step = Math.max(-LONGEST, Math.min(LONGEST, rest));
        for (let k = 0; k < length; k++) x[k] += step * softest[k];
      }
    },
    reduce: (x, gradient) => {
      if (!(Math.abs(off(x)) < 1e3 * HELD)) return Number.NaN;
      lookAt(x);
      // least-squares multiplier for what is tangent; that along v for the gradient of E(retract(x))
      const along = dot(gradient, normal) / dot(normal, normal);
      const torque = dot(gradient, softest);
      for (let k = 0; k < length; k++) {
        tangent[k] = gradient[k] - along * normal[k];
        gradient[k] -= torque * normal[k];
      }
      return largest(tangent);
    },
    multiplier: (x, gradient) => {
      lookAt(x);
      return dot(gradient, softest);
    },
  };
}

function dot(u: Float64Array, v: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < u.length; k++) sum += u[k] * v[k];
  return sum;
}

/** A bond stretched by this much (angstrom) against its length at the start counts as broken. */
export const BROKEN_BOND = 0.3;
/** An energy this far (kcal/mol) above the lowest start is that of a broken bond: a C-C single bond takes about 90 (CRC Handbook, ethane; from memory). */
export const BROKEN_ENERGY = 90;

/** What a scan that drives a ring must not do to it. */
export interface RingGuard {
  /** Throws `scan/ring-broken` for a geometry in which the ring would have broken. */
  check(x: Coordinates, energy: number): void;
}

/** Guards the bonds of a molecule against their lengths in a relaxed geometry, and the energy against that geometry's. */
export function ringGuard(molecule: Molecule, rotor: DrivenRotor, relaxed: Coordinates, energy: number): RingGuard {
  const bonds: [number, number, number][] = [];
  for (let i = 0; i < molecule.atomCount; i++)
    for (const j of neighboursOf(molecule, i)) if (i < j) bonds.push([i, j, distance(relaxed, i, j)]);
  return {
    check: (x, reached) => {
      const angle = degrees(rotorAngle(rotor, x)).toFixed(1);
      const broken = bonds.find(([i, j, length]) => !(distance(x, i, j) - length <= BROKEN_BOND));
      if (broken) {
        const [i, j, length] = broken;
        throw new TordialError(
          'scan/ring-broken',
          `at ${angle} degrees the bond ${i}-${j} is ${distance(x, i, j).toFixed(2)} angstrom long instead of ${length.toFixed(2)}: the ring would break there`,
          { atom: i },
        );
      }
      if (!(reached - energy <= BROKEN_ENERGY))
        throw new TordialError(
          'scan/ring-broken',
          `at ${angle} degrees the energy is ${(reached - energy).toFixed(0)} kcal/mol above the start, what it takes to break a bond: the ring would break there`,
        );
    },
  };
}

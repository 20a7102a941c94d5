/** A rotor that is driven through its angles: the torsion, the atoms that turn, and the frame in which its geometries are compared. */
import {
  angle as bondAngle,
  type Coordinates,
  degrees,
  type Molecule,
  sidesOfBond,
  TordialError,
  torsion,
  torsionGradient,
  turnAbout,
} from '@tordial/geometry';
import { type Constraint, largest } from './minimise.js';
import { checkTorsion } from './rotors/check-torsion.js';
import type { Torsion } from './rotors/defining-torsion.js';

export interface DrivenRotor {
  readonly atomCount: number;
  /** i, a, b, j: the angle is that of i-a-b-j, the axis a-b. */
  readonly torsion: Torsion;
  /** Atoms that turn with a and with b, both ascending, axis atoms included; those alone where the axis is part of a ring. */
  readonly sides: { readonly a: Int32Array; readonly b: Int32Array };
  /** Whether the axis is part of a ring: nothing turns rigidly about it. */
  readonly inRing: boolean;
}

/** Largest angle within the torsion, degrees: beyond it the torsion angle has no meaning. */
export const STRAIGHTEST = 175;

/** The rotor of a torsion; one inside a ring only when `rings` are taken. Throws as `checkTorsion` does. */
export function drivenRotor(molecule: Molecule, atoms: Torsion, { rings = false } = {}): DrivenRotor {
  const torsion = checkTorsion(molecule, atoms, { rings });
  const [, a, b] = torsion;
  const sides = sidesOfBond(molecule, a, b);
  const { atomCount } = molecule;
  if (!sides) return { atomCount, torsion, sides: { a: Int32Array.of(a), b: Int32Array.of(b) }, inRing: true };
  return { atomCount, torsion, sides, inRing: false };
}

/** Torsion angle of the rotor, radian in (-pi, pi]. */
export function rotorAngle({ torsion: [i, a, b, j] }: DrivenRotor, x: Coordinates): number {
  return torsion(x, i, a, b, j);
}

/**
 * Turns the rotor to `angle` (radian) in place, everything else kept: the smaller side moves. Beside separate fragments, which see the
 * difference, it is always side b, as in `rigidTorque`.
 */
export function turnTo(rotor: DrivenRotor, x: Coordinates, angle: number): void {
  const {
    torsion: [, a, b],
    sides,
    atomCount,
  } = rotor;
  const by = angle - rotorAngle(rotor, x);
  const alone = sides.a.length + sides.b.length === atomCount;
  if (!alone || sides.b.length <= sides.a.length) turnAbout(x, a, b, sides.b, by);
  else turnAbout(x, b, a, sides.a, by);
}

/** Throws `scan/linear` when an angle within the torsion is above 175 degrees, where its torsion angle loses its meaning. */
export function checkBent({ torsion: [i, a, b, j] }: DrivenRotor, x: Coordinates): void {
  const chain = [i, a, b, j];
  for (let n = 0; n < 2; n++) {
    const size = degrees(bondAngle(x, chain[n], chain[n + 1], chain[n + 2]));
    if (size > STRAIGHTEST)
      throw new TordialError(
        'scan/linear',
        `the angle ${chain[n]}-${chain[n + 1]}-${chain[n + 2]} is ${size.toFixed(1)} degrees: the torsion ${chain.join('-')} has no angle there; define it by atoms that are not in line`,
        { atom: chain[n + 1] },
      );
  }
}

/** dx/dphi of turning side b rigidly about the axis: g . dx/dphi for a gradient g, kcal/mol/radian. */
export function rigidTorque({ torsion: [, a, b], sides }: DrivenRotor, x: Coordinates, g: Float64Array): number {
  const ox = x[3 * b],
    oy = x[3 * b + 1],
    oz = x[3 * b + 2];
  const ax = ox - x[3 * a],
    ay = oy - x[3 * a + 1],
    az = oz - x[3 * a + 2];
  // sum of r x g over the side, along the axis
  let mx = 0,
    my = 0,
    mz = 0;
  for (let n = 0; n < sides.b.length; n++) {
    const at = 3 * sides.b[n];
    const rx = x[at] - ox,
      ry = x[at + 1] - oy,
      rz = x[at + 2] - oz;
    const gx = g[at],
      gy = g[at + 1],
      gz = g[at + 2];
    mx += ry * gz - rz * gy;
    my += rz * gx - rx * gz;
    mz += rx * gy - ry * gx;
  }
  return (ax * mx + ay * my + az * mz) / Math.hypot(ax, ay, az);
}

/** Gradient of the torsion angle at hand. */
const slope = new Float64Array(12);

/** The rotor held at `angle` (radian). */
export function heldAt(rotor: DrivenRotor, angle: number): Constraint {
  const [i, a, b, j] = rotor.torsion;
  return {
    retract: (x) => turnTo(rotor, x, angle),
    reduce: (x, gradient) => {
      torsionGradient(x, i, a, b, j, slope);
      const torque = rigidTorque(rotor, x, gradient);
      let along = 0;
      let square = 0;
      for (let k = 0; k < 12; k++) {
        along += gradient[3 * rotor.torsion[Math.trunc(k / 3)] + (k % 3)] * slope[k];
        square += slope[k] * slope[k];
      }
      // first the part tangent to the constraint, to be measured; then the gradient of E(retract(x)), which has no torque about the axis
      addSlope(rotor.torsion, gradient, -along / square);
      const residual = largest(gradient);
      addSlope(rotor.torsion, gradient, along / square - torque);
      return residual;
    },
  };
}

/** Adds a multiple of the slope of the torsion angle to a gradient. */
function addSlope(torsion: Torsion, gradient: Float64Array, by: number): void {
  for (let p = 0; p < 4; p++) for (let k = 0; k < 3; k++) gradient[3 * torsion[p] + k] += by * slope[3 * p + k];
}

/**
 * Moves x in place into the rotor's frame: a at the origin, b on the positive z axis, i in the half plane y = 0, x > 0.
 * In this frame side a of neighbouring points of a scan lies almost still, and so does side b once its turn is taken back.
 */
export function intoRotorFrame({ torsion: [i, a, b] }: DrivenRotor, x: Coordinates): void {
  const ox = x[3 * a],
    oy = x[3 * a + 1],
    oz = x[3 * a + 2];
  let zx = x[3 * b] - ox,
    zy = x[3 * b + 1] - oy,
    zz = x[3 * b + 2] - oz;
  const zLength = Math.hypot(zx, zy, zz);
  zx /= zLength;
  zy /= zLength;
  zz /= zLength;
  let xx = x[3 * i] - ox,
    xy = x[3 * i + 1] - oy,
    xz = x[3 * i + 2] - oz;
  const along = xx * zx + xy * zy + xz * zz;
  xx -= along * zx;
  xy -= along * zy;
  xz -= along * zz;
  const xLength = Math.hypot(xx, xy, xz);
  xx /= xLength;
  xy /= xLength;
  xz /= xLength;
  const yx = zy * xz - zz * xy,
    yy = zz * xx - zx * xz,
    yz = zx * xy - zy * xx;
  for (let at = 0; at < x.length; at += 3) {
    const rx = x[at] - ox,
      ry = x[at + 1] - oy,
      rz = x[at + 2] - oz;
    x[at] = rx * xx + ry * xy + rz * xz;
    x[at + 1] = rx * yx + ry * yy + rz * yz;
    x[at + 2] = rx * zx + ry * zy + rz * zz;
  }
}

/** Turns the vectors of side b (3 values an atom, from `offset` on) about the z axis of the rotor's frame by `angle` radian, in place. */
export function turnSide({ sides }: DrivenRotor, vectors: Float64Array, angle: number, offset = 0): void {
  const cosine = Math.cos(angle);
  const sine = Math.sin(angle);
  for (let n = 0; n < sides.b.length; n++) {
    const at = offset + 3 * sides.b[n];
    const vx = vectors[at],
      vy = vectors[at + 1];
    vectors[at] = cosine * vx - sine * vy;
    vectors[at + 1] = sine * vx + cosine * vy;
  }
}

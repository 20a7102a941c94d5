/**
 * Distances, angles and torsion angles of Cartesian coordinates, and the gradient of a torsion angle.
 *
 * Angles are radians throughout; `degrees` and `radians` convert. A torsion angle i-j-k-l is positive when, looking from j to k, the
 * front bond j-i must turn clockwise to eclipse the rear bond k-l (IUPAC, Basic terminology of stereochemistry, 1996).
 */
import type { Coordinates } from './molecule.js';

const TURN = 2 * Math.PI;

/** Radians to degrees. */
export function degrees(angle: number): number {
  return (angle * 180) / Math.PI;
}

/** Degrees to radians. */
export function radians(angle: number): number {
  return (angle * Math.PI) / 180;
}

/** The same direction as `angle` (degrees), in [-180, 180). */
export function wrapDegrees(angle: number): number {
  const wrapped = angle - 360 * Math.floor((angle + 180) / 360);
  return wrapped >= 180 ? wrapped - 360 : wrapped + 0;
}

/** The same direction as `angle` (radians), in (-pi, pi]: the range of `torsion`. */
export function wrapRadians(angle: number): number {
  const wrapped = angle + TURN * Math.floor((Math.PI - angle) / TURN);
  return wrapped <= -Math.PI ? wrapped + TURN : wrapped + 0;
}

/** Distance between atoms i and j, angstrom. */
export function distance(x: Coordinates, i: number, j: number): number {
  return Math.hypot(x[3 * j] - x[3 * i], x[3 * j + 1] - x[3 * i + 1], x[3 * j + 2] - x[3 * i + 2]);
}

/** Angle i-j-k at atom j, radians in [0, pi]; accurate at both ends of the range. */
export function angle(x: Coordinates, i: number, j: number, k: number): number {
  const ux = x[3 * i] - x[3 * j], uy = x[3 * i + 1] - x[3 * j + 1], uz = x[3 * i + 2] - x[3 * j + 2];
  const vx = x[3 * k] - x[3 * j], vy = x[3 * k + 1] - x[3 * j + 1], vz = x[3 * k + 2] - x[3 * j + 2];
  const cross = Math.hypot(uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx);
  return Math.atan2(cross, ux * vx + uy * vy + uz * vz);
}

/** Torsion angle i-j-k-l, radians in (-pi, pi]; 0 where three of the atoms lie on a line and no torsion angle is defined. */
export function torsion(x: Coordinates, i: number, j: number, k: number, l: number): number {
  const fx = x[3 * j] - x[3 * i], fy = x[3 * j + 1] - x[3 * i + 1], fz = x[3 * j + 2] - x[3 * i + 2];
  const gx = x[3 * k] - x[3 * j], gy = x[3 * k + 1] - x[3 * j + 1], gz = x[3 * k + 2] - x[3 * j + 2];
  const hx = x[3 * l] - x[3 * k], hy = x[3 * l + 1] - x[3 * k + 1], hz = x[3 * l + 2] - x[3 * k + 2];

  // normals of both planes; atan2 keeps full accuracy near 0 and pi, where an arc cosine loses half the digits
  const ax = fy * gz - fz * gy, ay = fz * gx - fx * gz, az = fx * gy - fy * gx;
  const bx = gy * hz - gz * hy, by = gz * hx - gx * hz, bz = gx * hy - gy * hx;
  const sine = Math.hypot(gx, gy, gz) * (fx * bx + fy * by + fz * bz);
  const phi = Math.atan2(sine, ax * bx + ay * by + az * bz);
  return phi <= -Math.PI ? Math.PI : phi + 0;
}

/**
 * Writes the derivatives of the torsion angle i-j-k-l with respect to the positions of i, j, k and l (12 values, radian/angstrom) into
 * `out`. An end atom that lies on the axis gets no gradient: the angle is undefined there.
 *
 * Source: A. Blondel and M. Karplus, J. Comput. Chem. 17, 1132 (1996), equation 27, without the singularities at 0 and pi.
 */
export function torsionGradient(x: Coordinates, i: number, j: number, k: number, l: number, out: Float64Array): void {
  const fx = x[3 * i] - x[3 * j], fy = x[3 * i + 1] - x[3 * j + 1], fz = x[3 * i + 2] - x[3 * j + 2];
  const gx = x[3 * j] - x[3 * k], gy = x[3 * j + 1] - x[3 * k + 1], gz = x[3 * j + 2] - x[3 * k + 2];
  const hx = x[3 * l] - x[3 * k], hy = x[3 * l + 1] - x[3 * k + 1], hz = x[3 * l + 2] - x[3 * k + 2];
  const ax = fy * gz - fz * gy, ay = fz * gx - fx * gz, az = fx * gy - fy * gx;
  const bx = hy * gz - hz * gy, by = hz * gx - hx * gz, bz = hx * gy - hy * gx;

  const axis2 = gx * gx + gy * gy + gz * gz;
  const axis = Math.sqrt(axis2);
  const a2 = ax * ax + ay * ay + az * az;
  const b2 = bx * bx + by * by + bz * bz;
  const onAxis = 1e-24 * axis2;
  const perA = a2 > onAxis ? 1 / a2 : 0;
  const perB = b2 > onAxis ? 1 / b2 : 0;
  const p = axis > 0 ? (fx * gx + fy * gy + fz * gz) * perA / axis : 0;
  const q = axis > 0 ? (hx * gx + hy * gy + hz * gz) * perB / axis : 0;
  const u = axis * perA, v = axis * perB;

  out[0] = -u * ax; out[1] = -u * ay; out[2] = -u * az;
  out[9] = v * bx; out[10] = v * by; out[11] = v * bz;
  const sx = p * ax - q * bx, sy = p * ay - q * by, sz = p * az - q * bz;
  out[3] = u * ax + sx; out[4] = u * ay + sy; out[5] = u * az + sz;
  out[6] = -v * bx - sx; out[7] = -v * by - sy; out[8] = -v * bz - sz;
}

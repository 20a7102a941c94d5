/**
 * Reduced moment of inertia of one internal rotation, from a geometry.
 *
 * Coordinates are 3 values an atom in angstrom, masses in amu, moments in amu angstrom^2; `top` lists the atoms of one side of the axis,
 * with or without its axis atom, which lies on the axis and adds nothing.
 */
import { type Coordinates, superpose, TordialError, turnAbout, wrapRadians } from '@tordial/geometry';
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { ROTATIONAL_WAVENUMBER } from '../constants.js';

/** Principal moments (ascending, amu angstrom^2), their axes, and the centre of mass of a structure. */
export interface Inertia {
  readonly mass: number;
  readonly centre: Float64Array;
  readonly moments: Float64Array;
  /** Unit vectors, one row a moment. */
  readonly axes: readonly Float64Array[];
}

/** Mass, centre of mass and principal moments of inertia of a structure. */
export function inertia(x: Coordinates, masses: ArrayLike<number>): Inertia {
  const centre = new Float64Array(3);
  let mass = 0;
  for (let i = 0; i < masses.length; i++) {
    mass += masses[i];
    for (let k = 0; k < 3; k++) centre[k] += masses[i] * x[3 * i + k];
  }
  for (let k = 0; k < 3; k++) centre[k] /= mass;
  const tensor = Matrix.zeros(3, 3);
  for (let i = 0; i < masses.length; i++) {
    const r = [x[3 * i] - centre[0], x[3 * i + 1] - centre[1], x[3 * i + 2] - centre[2]];
    const square = r[0] ** 2 + r[1] ** 2 + r[2] ** 2;
    for (let k = 0; k < 3; k++)
      for (let l = 0; l < 3; l++) tensor.set(k, l, tensor.get(k, l) + masses[i] * ((k === l ? square : 0) - r[k] * r[l]));
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(tensor, { assumeSymmetric: true });
  const order = [0, 1, 2].sort((p, q) => realEigenvalues[p] - realEigenvalues[q]);
  return {
    mass,
    centre,
    moments: Float64Array.from(order, (n) => Math.max(0, realEigenvalues[n])),
    axes: order.map((n) => Float64Array.from([0, 1, 2], (row) => eigenvectorMatrix.get(row, n))),
  };
}

/**
 * Reduced moment of a symmetric top on a rigid frame, exact for it:
 *
 *   I = A (1 - sum_i A lambda_i^2 / I_i)
 *
 * A the moment of the top about the bond a-b, lambda_i the cosines between the bond and the principal axes of the whole molecule, I_i its
 * principal moments. Throws `rotor/top` when the top is not symmetric about the bond (its centre of mass off the axis, or two different
 * moments across it): use `eastRadomMoment` or `kineticMoment` there.
 *
 * K. S. Pitzer and W. D. Gwinn, J. Chem. Phys. 10, 428 (1942).
 */
export function pitzerGwinnMoment(
  x: Coordinates,
  masses: ArrayLike<number>,
  axis: readonly [number, number],
  top: ArrayLike<number>,
): number {
  const u = direction(x, axis);
  requireSymmetricTop(x, masses, axis, top, u);
  const A = momentAbout(x, masses, top, position(x, axis[0]), u);
  const whole = inertia(x, masses);
  let share = 0;
  for (let n = 0; n < 3; n++) {
    const lambda = u[0] * whole.axes[n][0] + u[1] * whole.axes[n][1] + u[2] * whole.axes[n][2];
    // a linear frame has one vanishing moment, that of the top's own axis excepted: the bond is never along it then
    if (whole.moments[n] > 0) share += (A * lambda ** 2) / whole.moments[n];
  }
  return A * (1 - share);
}

function requireSymmetricTop(
  x: Coordinates,
  masses: ArrayLike<number>,
  axis: readonly [number, number],
  top: ArrayLike<number>,
  u: Float64Array,
): void {
  // moments of mass across the axis: first order must vanish, second order must be the same in every direction
  const [e, f] = across(u);
  const origin = position(x, axis[0]);
  let me = 0, mf = 0, mee = 0, mff = 0, mef = 0, meu = 0, mfu = 0; // biome-ignore format: one row of sums
  for (let n = 0; n < top.length; n++) {
    const m = masses[top[n]];
    const r = [0, 1, 2].map((k) => x[3 * top[n] + k] - origin[k]);
    const pe = dot(r, e), pf = dot(r, f), pu = dot(r, u); // biome-ignore format: one row of projections
    me += m * pe;
    mf += m * pf;
    mee += m * pe * pe;
    mff += m * pf * pf;
    mef += m * pe * pf;
    meu += m * pe * pu;
    mfu += m * pf * pu;
  }
  const size = mee + mff;
  if (!(size > 0)) throw new TordialError('rotor/top', 'the top has no atom off the axis: it has no moment of inertia to turn');
  const asymmetry = Math.hypot(mee - mff, 2 * mef) / size;
  const offAxis = Math.hypot(me, mf) / Math.sqrt(size);
  if (asymmetry > 0.05 || offAxis > 0.1 || Math.hypot(meu, mfu) / size > 0.1)
    throw new TordialError('rotor/top', 'the top is not symmetric about its bond: use the moment of East and Radom or the kinetic one');
}

/**
 * Reduced moment I(2,3) of any two fragments: I_A I_B / (I_A + I_B), each moment about the axis through both fragments' centres of mass.
 * `sides` lists the atoms of both sides, axis atoms included. Throws `rotor/axis` where both centres of mass coincide.
 *
 * A. L. L. East and L. Radom, J. Chem. Phys. 106, 6655 (1997).
 */
export function eastRadomMoment(x: Coordinates, masses: ArrayLike<number>, sides: readonly [ArrayLike<number>, ArrayLike<number>]): number {
  const [p, q] = sides.map((side) => centreOf(x, masses, side));
  const length = Math.hypot(q[0] - p[0], q[1] - p[1], q[2] - p[2]);
  if (!(length > 1e-8)) throw new TordialError('rotor/axis', "the two sides' centres of mass coincide and define no axis");
  const u = Float64Array.from([0, 1, 2], (k) => (q[k] - p[k]) / length);
  const a = momentAbout(x, masses, sides[0], p, u);
  const b = momentAbout(x, masses, sides[1], p, u);
  return (a * b) / (a + b);
}

/**
 * Kinetic moment of a motion: sum m |dx/dphi|^2 after the part that only moves or turns the whole molecule is taken out,
 *
 *   I = sum_i m_i t_i^2 - M v^2 - L . J^-1 L,   v = sum m t / M,   L = sum m r x t
 *
 * so that it does not depend on the frame the path is drawn in. `tangent`: dx/dphi, angstrom a radian. For a rigid turn it is the exact
 * reduced moment, also of asymmetric tops.
 *
 * J. E. Kilpatrick and K. S. Pitzer, J. Chem. Phys. 17, 1064 (1949); W. H. Miller, N. C. Handy, J. E. Adams, J. Chem. Phys. 72, 99 (1980).
 */
export function kineticMoment(x: Coordinates, masses: ArrayLike<number>, tangent: ArrayLike<number>): number {
  const { mass, centre, moments, axes } = inertia(x, masses);
  const momentum = new Float64Array(3);
  const spin = new Float64Array(3);
  let total = 0;
  for (let i = 0; i < masses.length; i++) {
    const m = masses[i];
    const tx = tangent[3 * i], ty = tangent[3 * i + 1], tz = tangent[3 * i + 2]; // biome-ignore format: a vector
    const rx = x[3 * i] - centre[0], ry = x[3 * i + 1] - centre[1], rz = x[3 * i + 2] - centre[2]; // biome-ignore format: a vector
    total += m * (tx * tx + ty * ty + tz * tz);
    momentum[0] += m * tx;
    momentum[1] += m * ty;
    momentum[2] += m * tz;
    spin[0] += m * (ry * tz - rz * ty);
    spin[1] += m * (rz * tx - rx * tz);
    spin[2] += m * (rx * ty - ry * tx);
  }
  total -= dot(momentum, momentum) / mass;
  for (let n = 0; n < 3; n++) {
    // a linear molecule cannot spin about its own axis
    if (moments[n] > 1e-9 * moments[2]) total -= dot(spin, axes[n]) ** 2 / moments[n];
  }
  return total;
}

/** dx/dphi (angstrom a radian) of turning `side` (the atoms on the second axis atom's side) rigidly about the axis. */
export function rigidTangent(x: Coordinates, axis: readonly [number, number], side: ArrayLike<number>): Float64Array {
  const u = direction(x, axis);
  const origin = position(x, axis[0]);
  const tangent = new Float64Array(x.length);
  for (let n = 0; n < side.length; n++) {
    const at = 3 * side[n];
    const rx = x[at] - origin[0], ry = x[at + 1] - origin[1], rz = x[at + 2] - origin[2]; // biome-ignore format: a vector
    tangent[at] = u[1] * rz - u[2] * ry;
    tangent[at + 1] = u[2] * rx - u[0] * rz;
    tangent[at + 2] = u[0] * ry - u[1] * rx;
  }
  return tangent;
}

/** One geometry of a path: its angle in radians, its coordinates, and whether a smooth path joins it to the next. */
export interface PathPoint {
  readonly angle: number;
  readonly coordinates: Coordinates;
  readonly breakAfter?: boolean;
}

/**
 * dx/dphi at point i of a closed path of geometries (angles ascending over one turn).
 *
 * A neighbour is turned back rigidly by the angle between the two and superposed (weighted by mass); what is then left is relaxation, small and
 * smooth, and is differentiated centrally, or to one side at a break. The rigid turn itself is differentiated exactly. Atoms of equal `kinds`
 * (symmetry classes) that the neighbour has exchanged, as a mirror image does with the hydrogens of a methyl, are put back first.
 */
export function pathTangent(
  path: readonly PathPoint[],
  i: number,
  masses: ArrayLike<number>,
  axis: readonly [number, number],
  side: ArrayLike<number>,
  kinds?: ArrayLike<number>,
): Float64Array {
  const count = path.length;
  const here = path[i].coordinates;
  const tangent = rigidTangent(here, axis, side);
  const before = path[(i + count - 1) % count];
  const after = path[(i + 1) % count];
  const relaxed = (neighbour: PathPoint): { step: number; coordinates: Coordinates } => {
    const step = wrapRadians(neighbour.angle - path[i].angle);
    const back = neighbour.coordinates.slice();
    turnAbout(back, axis[0], axis[1], side, -step);
    const moved = superpose(back, here, { weights: masses }).coordinates;
    const relabelled = kinds && inPlace(moved, here, kinds);
    return { step, coordinates: relabelled ? superpose(relabelled, here, { weights: masses }).coordinates : moved };
  };
  const backward = count > 1 && !before.breakAfter ? relaxed(before) : null;
  const forward = count > 1 && !path[i].breakAfter ? relaxed(after) : null;
  for (let k = 0; k < here.length; k++) {
    const down = backward && (here[k] - backward.coordinates[k]) / -backward.step;
    const up = forward && (forward.coordinates[k] - here[k]) / forward.step;
    if (down !== null && up !== null && backward && forward) {
      // three-point slope for unequal steps, second order in both
      const a = -backward.step;
      const b = forward.step;
      tangent[k] += (b * down + a * up) / (a + b);
    } else tangent[k] += down ?? up ?? 0;
  }
  return tangent;
}

/** `moving` with atoms of equal kind exchanged so that each stands where `reference` has it; null where nearest atoms give no clear answer. */
function inPlace(moving: Coordinates, reference: Coordinates, kinds: ArrayLike<number>): Coordinates | null {
  const count = kinds.length;
  const result = new Float64Array(3 * count);
  const taken = new Uint8Array(count);
  for (let i = 0; i < count; i++) {
    let nearest = i;
    let least = Number.POSITIVE_INFINITY;
    for (let j = 0; j < count; j++) {
      if (kinds[j] !== kinds[i]) continue;
      const apart = Math.hypot(
        moving[3 * j] - reference[3 * i],
        moving[3 * j + 1] - reference[3 * i + 1],
        moving[3 * j + 2] - reference[3 * i + 2],
      );
      if (apart < least) {
        least = apart;
        nearest = j;
      }
    }
    if (taken[nearest]) return null;
    taken[nearest] = 1;
    result.set(moving.subarray(3 * nearest, 3 * nearest + 3), 3 * i);
  }
  return result;
}

/** Rotational constant (cm-1) of a reduced moment (amu angstrom^2): B = h / (8 pi^2 c I). */
export function rotationalConstant(moment: number): number {
  if (!(moment > 0)) throw new TordialError('rotor/moment', `a reduced moment of ${moment} amu angstrom^2: it must be positive`);
  return ROTATIONAL_WAVENUMBER / moment;
}

function momentAbout(x: Coordinates, masses: ArrayLike<number>, atoms: ArrayLike<number>, origin: Float64Array, u: Float64Array): number {
  let sum = 0;
  for (let n = 0; n < atoms.length; n++) {
    const r = [0, 1, 2].map((k) => x[3 * atoms[n] + k] - origin[k]);
    const along = dot(r, u);
    sum += masses[atoms[n]] * (dot(r, r) - along * along);
  }
  return sum;
}

function centreOf(x: Coordinates, masses: ArrayLike<number>, atoms: ArrayLike<number>): Float64Array {
  const centre = new Float64Array(3);
  let mass = 0;
  for (let n = 0; n < atoms.length; n++) {
    mass += masses[atoms[n]];
    for (let k = 0; k < 3; k++) centre[k] += masses[atoms[n]] * x[3 * atoms[n] + k];
  }
  return centre.map((value) => value / mass);
}

function position(x: Coordinates, atom: number): Float64Array {
  return x.slice(3 * atom, 3 * atom + 3);
}

function direction(x: Coordinates, [a, b]: readonly [number, number]): Float64Array {
  const u = Float64Array.from([0, 1, 2], (k) => x[3 * b + k] - x[3 * a + k]);
  const length = Math.sqrt(dot(u, u));
  if (!(length > 0)) throw new TordialError('rotor/axis', `atoms ${a} and ${b} lie on one spot and define no axis`, { atom: a });
  return u.map((value) => value / length);
}

/** Two unit vectors at right angles to u and to each other. */
function across(u: Float64Array): [Float64Array, Float64Array] {
  const least = Math.abs(u[0]) <= Math.abs(u[1]) && Math.abs(u[0]) <= Math.abs(u[2]) ? 0 : Math.abs(u[1]) <= Math.abs(u[2]) ? 1 : 2;
  const e = u.map((value, k) => (k === least ? 1 : 0) - value * u[least]);
  const length = Math.sqrt(dot(e, e));
  const first = e.map((value) => value / length);
  return [first, Float64Array.of(u[1] * first[2] - u[2] * first[1], u[2] * first[0] - u[0] * first[2], u[0] * first[1] - u[1] * first[0])];
}

function dot(a: ArrayLike<number>, b: ArrayLike<number>): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

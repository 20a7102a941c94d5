/**
 * The relaxed geometries that a scan has found, by grid angle, and how they lead into one another when the rotor is turned by a step.
 *
 * A branch is a chain of minima joined both ways. The lower envelope takes the lowest minimum at each angle; where it changes branch, the
 * lowest minima of two neighbouring angles are not joined, and there the profile has a kink.
 */
import type { Coordinates } from '@tordial/geometry';

export type Direction = 1 | -1;

/** A minimum with the rotor held at a grid angle. */
export interface HeldMinimum {
  /** Index of the grid angle. */
  readonly place: number;
  /** kcal/mol, and dE/dphi in kcal/mol/radian. */
  readonly energy: number;
  readonly torque: number;
  /** In the rotor's frame, angstrom. */
  readonly coordinates: Coordinates;
  /** Largest component of the gradient tangent to the constraint, kcal/mol/angstrom. */
  readonly gradientMax: number;
  readonly converged: boolean;
  /** What does not change when the geometry is moved, mirrored or its equivalent atoms are exchanged, angstrom^2. */
  readonly spread: readonly [number, number];
  /** The minimum that this one relaxes to after a step forwards or back; null where the branch cannot be followed, undefined until tried. */
  ahead: HeldMinimum | null | undefined;
  behind: HeldMinimum | null | undefined;
  /** The mirror image at the opposite angle, where that is the same molecule; the minimum itself when the two are one. */
  twin: HeldMinimum | null;
}

export interface Branches {
  /** Minima at each grid angle, in the order of discovery. */
  readonly at: HeldMinimum[][];
  /** Place of the opposite angle for each place; null when minima have no mirror images among the grid's. */
  readonly opposite: Int32Array | null;
  /** The mirror image of a geometry as the same molecule. */
  readonly image: (x: Coordinates) => Coordinates;
}

/** An empty map for a grid of `count` angles. */
export function branches(count: number, opposite: Int32Array | null, image: Branches['image'] = mirrored): Branches {
  return { at: Array.from({ length: count }, () => []), opposite, image };
}

/** Two relaxations that end this close together have found the same minimum, or a copy with equivalent atoms exchanged. */
const SAME_ENERGY = 5e-4;
const SAME_TORQUE = 0.05;
const SAME_SPREAD = 2e-3;

type Found = Omit<HeldMinimum, 'ahead' | 'behind' | 'twin' | 'spread'>;

/** The known minimum that equals the one found, or else that one, now known, together with its mirror image. */
export function enter(map: Branches, found: Found): HeldMinimum {
  const spread = spreadOf(found.coordinates);
  const known = lookUp(map, found, spread);
  if (known) return known;
  const minimum: HeldMinimum = { ...found, spread, ahead: undefined, behind: undefined, twin: null };
  map.at[found.place].push(minimum);
  if (!map.opposite) return minimum;

  const place = map.opposite[found.place];
  const image = { ...found, place, torque: -found.torque, coordinates: map.image(found.coordinates) };
  const same = lookUp(map, image, spread);
  if (same === minimum) {
    // its own mirror image: the torque vanishes by symmetry
    const symmetric = { ...minimum, torque: 0 };
    symmetric.twin = symmetric;
    map.at[place][map.at[place].length - 1] = symmetric;
    return symmetric;
  }
  const twin: HeldMinimum = same ?? { ...image, spread, ahead: undefined, behind: undefined, twin: null };
  if (!same) map.at[place].push(twin);
  minimum.twin = twin;
  twin.twin = minimum;
  return minimum;
}

function lookUp(map: Branches, found: Found, spread: readonly [number, number]): HeldMinimum | undefined {
  return map.at[found.place].find(
    (other) =>
      other.converged === found.converged &&
      Math.abs(other.energy - found.energy) < SAME_ENERGY &&
      Math.abs(other.torque - found.torque) < SAME_TORQUE &&
      Math.abs(other.spread[0] - spread[0]) < SAME_SPREAD * spread[0] &&
      Math.abs(other.spread[1] - spread[1]) < SAME_SPREAD * spread[1],
  );
}

/** Sums of the squared and of the fourth powers of distances from the centre. */
function spreadOf(x: Coordinates): [number, number] {
  const count = x.length / 3;
  const centre = [0, 0, 0];
  for (let k = 0; k < x.length; k++) centre[k % 3] += x[k] / count;
  let second = 0;
  let fourth = 0;
  for (let at = 0; at < x.length; at += 3) {
    const square = (x[at] - centre[0]) ** 2 + (x[at + 1] - centre[1]) ** 2 + (x[at + 2] - centre[2]) ** 2;
    second += square;
    fourth += square * square;
  }
  return [second, fourth];
}

/** The mirror image in the plane y = 0: the rotor's frame stays the rotor's frame, its angle changes sign. */
export function mirrored(x: Coordinates): Coordinates {
  const image = x.slice();
  for (let at = 1; at < image.length; at += 3) image[at] = -image[at];
  return image;
}

/** Where a minimum leads in a direction; undefined until tried. */
export function next(minimum: HeldMinimum, direction: Direction): HeldMinimum | null | undefined {
  return direction === 1 ? minimum.ahead : minimum.behind;
}

/** Notes that a minimum leads to another (or nowhere) in a direction, and its mirror image to that one's in the other. */
export function lead(from: HeldMinimum, direction: Direction, to: HeldMinimum | null): void {
  set(from, direction, to);
  if (from.twin && from.twin !== from) set(from.twin, -direction as Direction, to ? to.twin : null);
  else if (from.twin === from && next(from, -direction as Direction) === undefined) set(from, -direction as Direction, to ? to.twin : null);
}

function set(from: HeldMinimum, direction: Direction, to: HeldMinimum | null): void {
  if (direction === 1) from.ahead = to;
  else from.behind = to;
}

/** Whether the two are joined both ways, `to` being one step from `from` in the direction. */
export function joined(from: HeldMinimum, direction: Direction, to: HeldMinimum): boolean {
  return next(from, direction) === to && next(to, -direction as Direction) === from;
}

/** The lowest minimum at a place; of equal ones that which continues the branch of `neighbour`, the lowest one step behind, or comes closest to it. */
export function lowest(map: Branches, place: number, neighbour?: HeldMinimum): HeldMinimum | undefined {
  let best: HeldMinimum | undefined;
  for (const minimum of map.at[place]) {
    if (!best || minimum.energy < best.energy - SAME_ENERGY) best = minimum;
    else if (minimum.energy < best.energy + SAME_ENERGY && neighbour) {
      const gain = heightOver(neighbour, best) - heightOver(neighbour, minimum);
      if (gain > 0 || (gain === 0 && minimum.energy < best.energy)) best = minimum;
    } else if (minimum.energy < best.energy) best = minimum;
  }
  return best;
}

/** How far the branch of a minimum lies above the lowest minimum one step behind. */
function heightOver(neighbour: HeldMinimum, minimum: HeldMinimum): number {
  if (joined(neighbour, 1, minimum)) return 0;
  const { behind } = minimum;
  return behind && joined(minimum, -1, behind) ? Math.max(0, behind.energy - neighbour.energy) : Number.POSITIVE_INFINITY;
}

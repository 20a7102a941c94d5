/**
 * The stationary points of a profile, proved: wells relaxed without constraint to minima, barriers refined to first-order saddles, crossings of branches
 * replaced by the saddles on either side of them; the order of each counted on its Hessian, and the path down from each saddle followed to the
 * minima it joins. What turns out to be something else is said to be that.
 */
import {
  atomicMass,
  type Coordinates,
  degrees,
  isotopeMass,
  leastRmsd,
  type Molecule,
  type Note,
  neighboursOf,
  radians,
  superpose,
  TordialError,
  torsion as torsionAngle,
  wrapDegrees,
} from '@tordial/geometry';
import { mirrored } from '../branches.js';
import { type DrivenRotor, drivenRotor } from '../driven-rotor.js';
import { minimise, type Preconditioner } from '../minimise.js';
import { modelHessian } from '../model-hessian.js';
import type { Calculation } from '../potential.js';
import { relaxationAt } from '../relax-at.js';
import type { Torsion } from '../rotors/defining-torsion.js';
import { findRotors } from '../rotors/rotor.js';
import { invertedBetween, invertingMotion, type Motion, motionOf, turningMotion } from './motion.js';
import { pathDown } from './path-down.js';
import { dot, length, projectedModes, removeAlong, rigidMotions } from './projected-modes.js';
import { type StationaryStructure, stationaryPoint } from './saddle.js';
import { type Minimum, sameMinimum } from './same-minimum.js';

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

/** Displacement (angstrom, all coordinates together) that takes a structure off a ridge. */
const PUSH = 0.15;
/** A free relaxation that turns the rotor by more than this, degrees, has left its well. */
const LEFT = 20;
/** Degrees from a well within which another conformer of the other rotors still stands on its side of the barrier. */
const BASIN = 30;
/** Overlap with the turn of the rotor below which a saddle is another bond's. */
const TAKES_PART = 0.1;
/** Two minima whose rotor stands within this, degrees, are at one angle. */
const SAME_ANGLE = 5;
/** Degrees between the geometries of a branch that is followed past a crossing, and how far. */
const PAST = 5;
const FARTHEST_PAST = 90;
/** kcal/mol that a followed branch may fall short of the trapezoidal rule before it has been left. */
const LEAP = 0.3;
/** Degrees by which another rotor must differ between two minima to be turned, and the steps it is turned in. */
const TURNED = 25;
const TURN_STEP = 5;
/** Saddles that a way between two minima may pass. */
const MOST_LINKS = 4;
/** Degrees by which a saddle on the way may stand outside of the arc between the wells. */
const BESIDE = 30;
/** Saddles that are tried for one barrier beyond its own before the wells count as not joined. */
const MOST_TRIES = 4;
/** Energies and gradients that one barrier may cost before no further way is tried: a flexible molecule has more ways than can be followed. */
const MOST_EVALUATIONS = 6000;

interface Proof {
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

/**
 * Proves the stationary points of a profile as a calculation, for any potential. `molecule` with `profile.torsion` must be those that were scanned.
 * Throws as `drivenRotor` and `stationaryPoint` do.
 */
export function* proof(molecule: Molecule, profile: Candidates, options: ProofOptions = {}): Calculation<ProvedPoints> {
  const { stationaryPoints } = profile;
  const work: Proof = {
    molecule,
    rotor: drivenRotor(molecule, profile.torsion),
    masses: Float64Array.from(molecule.atomicNumbers, (element, i) =>
      molecule.isotopes[i] > 0 ? isotopeMass(element, molecule.isotopes[i]) : atomicMass(element),
    ),
    model: modelHessian(molecule),
    tolerance: options.tolerance ?? 1e-4,
    displacement: options.displacement,
    same: sameMinimum(molecule),
    notes: [],
    tries: 0,
    limit: 0,
    arc: { from: 0, width: 360 },
    evaluations: 0,
  };
  const points: ProvedPoint[] = [];
  let done = 0;
  // wells first: the paths down from the saddles are compared with them
  const wells: ProvedPoint[] = [];
  for (const [of, candidate] of stationaryPoints.entries()) {
    if (candidate.kind !== 'well') continue;
    const well: ProvedPoint = yield* provedWell(work, candidate, of, wells);
    wells.push(well);
    points[of] = well;
    options.onProgress?.(++done, stationaryPoints.length);
  }
  for (const [of, candidate] of stationaryPoints.entries()) {
    if (candidate.kind === 'well') continue;
    work.tries = MOST_TRIES;
    work.limit = work.evaluations + MOST_EVALUATIONS;
    const beside = wellsBeside(stationaryPoints, of).flatMap((index) => wells.filter((well) => well.of === index));
    if (beside.length > 0) work.arc = arcBetween(beside[0].angle, beside[1].angle);
    points[of] =
      candidate.kind === 'barrier'
        ? yield* provedBarrier(work, candidate, of, wells, beside)
        : yield* provedCrossing(work, profile, of, wells, beside);
    options.onProgress?.(++done, stationaryPoints.length);
  }
  return { points, notes: work.notes, evaluations: work.evaluations };
}

/** The wells before and after a barrier, by index; none where there is no well. */
function wellsBeside(points: readonly Candidate[], of: number): readonly number[] {
  const count = points.length;
  return [-1, 1].flatMap((direction) => {
    for (let n = 1; n <= count; n++) {
      const at = (of + n * direction + n * count) % count;
      if (points[at].kind === 'well') return [at];
    }
    return [];
  });
}

/** The arc from one angle up to another, degrees; the whole turn from a well to itself. */
function arcBetween(from: number, to: number): Proof['arc'] {
  const width = (((to - from) % 360) + 360) % 360;
  return { from, width: width < 1e-3 ? 360 : width };
}

/** Whether the rotor of a structure stands between the two wells, and not on the other way round. */
function isOnArc({ arc }: Proof, angle: number): boolean {
  const past = (((angle - arc.from) % 360) + 360) % 360;
  return past <= arc.width + BESIDE || past >= 360 - BESIDE;
}

function angleOf({ rotor: { torsion } }: Proof, x: Coordinates): number {
  return wrapDegrees(degrees(torsionAngle(x, ...torsion)));
}

function* minimumNear(work: Proof, start: Coordinates): Calculation<StationaryStructure> {
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

function* refined(work: Proof, start: Coordinates, order: number, follow: readonly Float64Array[]): Calculation<StationaryStructure> {
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

function displaced(x: Coordinates, direction: Float64Array, by: number): Coordinates {
  return x.map((value, k) => value + by * direction[k]);
}

function* provedWell(work: Proof, { angle, coordinates }: Candidate, of: number, known: readonly ProvedPoint[]): Calculation<ProvedPoint> {
  const found = yield* minimumNear(work, coordinates);
  const relaxedAngle = angleOf(work, found.coordinates);
  const same = known.filter((well) => work.same(well, found));
  const merged = same.some((well) => Math.abs(wrapDegrees(well.angle - relaxedAngle)) < SAME_ANGLE);
  const left = Math.abs(wrapDegrees(relaxedAngle - angle)) > LEFT;
  const verdict: Verdict = !found.converged ? 'not found' : found.order > 0 ? 'higher order' : merged || left ? 'merged' : 'minimum';
  if (verdict !== 'minimum')
    say(
      work,
      'stationary/well',
      `the well at ${angle.toFixed(1)} degrees is no minimum of its own: ${
        verdict === 'merged'
          ? `relaxed without constraint it goes to ${relaxedAngle.toFixed(1)} degrees`
          : verdict === 'not found'
            ? 'its relaxation did not converge'
            : `${found.order} eigenvalues of its Hessian stay negative`
      }`,
    );
  return {
    ...plain(work, found, of, 'well', coordinates),
    verdict,
    overlap: null,
    motion: null,
    ends: null,
    inverts: [],
    links: 0,
    sameAs: same.length > 0 ? (same[0].sameAs ?? same[0].of) : of,
  };
}

function plain(work: Proof, found: StationaryStructure, of: number, kind: Candidate['kind'], before: Coordinates) {
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

function say({ notes }: Proof, code: string, message: string): void {
  notes.push({ code, message });
}

/** Bottom of a path down. */
interface Bottom extends Minimum {
  readonly angle: number;
}

/** A first-order saddle with the bottoms of both paths, that towards smaller angles first. */
interface Link {
  readonly structure: StationaryStructure;
  readonly overlap: number;
  readonly motion: Motion;
  readonly bottoms: readonly [Bottom, Bottom];
}

/** The mode of the lowest eigenvalue, mass-weighted. */
function softest({ masses }: Proof, { hessian, coordinates }: StationaryStructure): Float64Array {
  return projectedModes(hessian, rigidMotions(coordinates, masses), masses).vectors[0];
}

function motionAt(
  work: Proof,
  { coordinates: x }: StationaryStructure,
  mode: Float64Array,
): { motion: Motion; overlap: number; turning: number } {
  const {
    molecule,
    masses,
    rotor: {
      sides,
      torsion: [, a, b],
    },
  } = work;
  const turning = dot(mode, turningMotion(x, a, b, sides.b, masses));
  return { motion: motionOf(molecule, [a, b], sides.b, x, mode, masses), overlap: Math.min(1, Math.abs(turning)), turning };
}

/** Follows both paths down from a first-order saddle. */
function* linkAt(work: Proof, structure: StationaryStructure): Calculation<Link | null> {
  if (!structure.converged || structure.order !== 1) return null;
  const mode = softest(work, structure);
  const { motion, overlap, turning } = motionAt(work, structure, mode);
  const bottoms: Bottom[] = [];
  for (const sign of turning > 0 ? [-1, 1] : [1, -1]) {
    const direction = mode.map((value) => sign * value);
    const path = yield* pathDown(structure.coordinates, structure.energy, structure.hessian, direction, work.masses);
    work.evaluations += path.evaluations;
    const { coordinates, energy } = yield* minimumNear(work, path.coordinates);
    bottoms.push({ coordinates, energy, angle: angleOf(work, coordinates) });
  }
  return { structure, motion, overlap, bottoms: [bottoms[0], bottoms[1]] };
}

/**
 * Whether a path's bottom is a well: the same minimum at the same angle, or one beside it that differs only by the mirror image or by an exchange of
 * equivalent atoms, such as the other gauche arrangement of a group that the rotor's position does not depend on.
 */
function isAt(work: Proof, p: Bottom, q: Bottom): boolean {
  const apart = Math.abs(wrapDegrees(p.angle - q.angle));
  if (apart >= LEFT) return false;
  if (work.same(p, q)) return true;
  return work.same(p, { energy: q.energy, coordinates: mirrored(q.coordinates) });
}

/**
 * The way from one minimum to another whose rotors or nitrogens differ: one saddle after another, each of which is proved to start where the one before
 * ended. Null where none is found.
 */
function* wayBetween(work: Proof, from: Bottom, to: Bottom, wells: readonly ProvedPoint[]): Calculation<Link[] | null> {
  const links: Link[] = [];
  let at = from;
  while (!isAt(work, at, to)) {
    if (links.length === MOST_LINKS) return null;
    let onward: Bottom | null = null;
    for (const start of yield* startsTowards(work, at, to)) {
      if (--work.tries < 0 || work.evaluations > work.limit) return null;
      const link: Link | null = yield* linkAt(work, yield* refined(work, start.x, 1, start.follow ? [start.follow] : []));
      if (!link) continue;
      const here = link.bottoms.findIndex((bottom) => isAt(work, bottom, at));
      if (here < 0 || !isOnArc(work, angleOf(work, link.structure.coordinates))) continue;
      const there = link.bottoms[1 - here];
      // nothing is gained by coming back, and a way over a third well belongs to other barriers
      if (isAt(work, there, at) || wells.some((well) => isAt(work, there, well) && !isAt(work, there, to))) continue;
      links.push(link);
      onward = there;
      break;
    }
    if (!onward) return null;
    at = onward;
  }
  return links;
}

/** Where to climb from a minimum towards another: over a nitrogen that inverts, or over the turn of the rotor that differs most, either way round. */
function* startsTowards(work: Proof, from: Bottom, to: Bottom): Calculation<Start[]> {
  const { molecule, rotor } = work;
  const [, a, b] = rotor.torsion;
  const starts: Start[] = invertedBetween(molecule, from.coordinates, to.coordinates).map((atom) => {
    const around = neighboursOf(molecule, atom);
    const x = flattened(from.coordinates, atom, around);
    return { x, follow: invertingMotion(x, atom, around) };
  });
  const differing = findRotors(molecule)
    .map((other) => {
      const far = other.sides[0].includes(a) && other.sides[0].includes(b) ? 1 : 0;
      const own = other.axis.includes(a) && other.axis.includes(b);
      const period = own ? 360 : 360 / other.symmetryNumbers[far];
      const turn = degrees(torsionAngle(to.coordinates, ...other.torsion) - torsionAngle(from.coordinates, ...other.torsion));
      return { other, own, period, turn: turn - period * Math.round(turn / period) };
    })
    .filter(({ own, turn }) => Math.abs(turn) > (own ? SAME_ANGLE : TURNED))
    .sort((p, q) => Math.abs(q.turn) - Math.abs(p.turn));
  for (const { other, turn, period } of differing)
    for (const direction of turn > 0 ? ([1, -1] as const) : ([-1, 1] as const)) {
      const start: Start | null = yield* over(work, drivenRotor(molecule, other.torsion), from.coordinates, direction, TURN_STEP, period);
      if (start) starts.push(start);
    }
  return starts;
}

/** A three-coordinate atom moved into the plane of its neighbours. */
function flattened(x: Coordinates, atom: number, [p, q, r]: Int32Array): Coordinates {
  const flat = x.slice();
  const u = [0, 1, 2].map((k) => x[3 * q + k] - x[3 * p + k]);
  const v = [0, 1, 2].map((k) => x[3 * r + k] - x[3 * p + k]);
  const n = [0, 1, 2].map((k) => u[(k + 1) % 3] * v[(k + 2) % 3] - u[(k + 2) % 3] * v[(k + 1) % 3]);
  const height = [0, 1, 2].reduce((sum, k) => sum + n[k] * (x[3 * atom + k] - x[3 * p + k]), 0) / dot(n, n);
  for (let k = 0; k < 3; k++) flat[3 * atom + k] -= height * n[k];
  return flat;
}

interface Start {
  readonly x: Coordinates;
  /** Direction to climb; the softest mode when null. */
  readonly follow: Float64Array | null;
}

/** Where the climb by turning a rotor leads; null where an angle within its torsion opens on the way. */
function* over(
  work: Proof,
  rotor: DrivenRotor,
  from: Coordinates,
  direction: 1 | -1,
  step: number,
  farthest: number,
): Calculation<Start | null> {
  try {
    return yield* climbed(work, rotor, from, direction, step, farthest);
  } catch (error) {
    if (error instanceof TordialError && error.code === 'scan/linear') return null;
    throw error;
  }
}

/** Turns a rotor step by step, all else relaxed, until it tops out or falls on another branch: where a saddle may be looked for. */
function* climbed(
  work: Proof,
  rotor: DrivenRotor,
  from: Coordinates,
  direction: 1 | -1,
  step: number,
  farthest: number,
): Calculation<Start | null> {
  const { sides, torsion } = rotor;
  const held = modelHessian(work.molecule, torsion);
  const begin = torsionAngle(from, ...torsion);
  let at = yield* relaxationAt(rotor, held, begin, from);
  work.evaluations += at.evaluations;
  for (let turned = step; turned <= farthest; turned += step) {
    const next = yield* relaxationAt(rotor, held, begin + direction * radians(turned), at.coordinates);
    work.evaluations += next.evaluations;
    const trapezoid = (direction * radians(step) * (at.torque + next.torque)) / 2;
    if (Math.abs(next.energy - at.energy - trapezoid) > LEAP) return { x: at.coordinates, follow: null };
    // a shallow minimum is left within the first step
    if (direction * next.torque <= 0 && (direction * at.torque > 0 || turned === step)) {
      const top = next.energy > at.energy ? next : at;
      return { x: top.coordinates, follow: turningMotion(top.coordinates, torsion[1], torsion[2], sides.b) };
    }
    at = next;
  }
  return null;
}

/** All saddles on the way from the well before to the well after over `first`; null where they are not joined. */
function* wayOver(
  work: Proof,
  first: Link,
  [before, after]: readonly ProvedPoint[],
  wells: readonly ProvedPoint[],
): Calculation<Link[] | null> {
  const [p, q] = first.bottoms;
  if (before === after) {
    const angle = angleOf(work, first.structure.coordinates);
    const opposite = wrapDegrees(p.angle - angle) * wrapDegrees(q.angle - angle) < 0;
    return opposite && isAt(work, p, before) && isAt(work, q, before) ? [first] : null;
  }
  const crossed = isAt(work, p, after) || isAt(work, q, before);
  const [near, far] = crossed ? [q, p] : [p, q];
  const head = yield* wayBetween(work, near, before, wells);
  if (!head) return null;
  const tail = yield* wayBetween(work, far, after, wells);
  return tail && [...head, first, ...tail];
}

function* provedBarrier(
  work: Proof,
  candidate: Candidate,
  of: number,
  wells: readonly ProvedPoint[],
  beside: readonly ProvedPoint[],
): Calculation<ProvedPoint> {
  const {
    sides,
    torsion: [, a, b],
  } = work.rotor;
  let found = yield* refined(work, candidate.coordinates, 1, [turningMotion(candidate.coordinates, a, b, sides.b)]);
  const first = found.order;
  // off a ridge there are saddles lower down; where the profile's own point lies on one, that is said
  for (let n = 0; n < 3 && found.converged && found.order > 1; n++) {
    const turn = turningMotion(found.coordinates, a, b, sides.b);
    const other = found.modes.vectors.slice(0, found.order).reduce((p, q) => (Math.abs(dot(q, turn)) < Math.abs(dot(p, turn)) ? q : p));
    found = yield* refined(work, displaced(found.coordinates, other, PUSH), 1, [turn]);
  }
  if (first > 1)
    say(
      work,
      'stationary/higher-order',
      `the barrier at ${candidate.angle.toFixed(1)} degrees is a stationary point of order ${first}${found.order === 1 ? `; the saddle beside it was taken, at ${angleOf(work, found.coordinates).toFixed(1)} degrees` : ''}`,
    );
  const link = yield* linkAt(work, found);
  const way: Link[] | null = link && beside.length > 0 ? yield* wayOver(work, link, beside, wells) : null;
  const assumed = link !== null && way === null && crossesOver(link, beside);
  const point = link ? ofWay(work, of, candidate, way ?? [link], way !== null || assumed, wells) : unproved(work, of, candidate, found);
  if (assumed) sayAssumed(work, candidate, point);
  else if (!way) say(work, 'stationary/barrier', `the barrier at ${candidate.angle.toFixed(1)} degrees ${inWords(point)}`);
  return point;
}

/**
 * Whether a saddle of this rotor leads from one well's side to the other's, though its paths end in other conformers there. That these and the wells
 * interconvert faster than the rotor turns is then an assumption, which is told.
 */
function crossesOver({ bottoms: [p, q], overlap }: Link, beside: readonly ProvedPoint[]): boolean {
  if (overlap < TAKES_PART || beside.length === 0 || beside[0] === beside[1]) return false;
  const near = (bottom: Bottom, well: ProvedPoint): boolean => Math.abs(wrapDegrees(bottom.angle - well.angle)) < BASIN;
  return (near(p, beside[0]) && near(q, beside[1])) || (near(q, beside[0]) && near(p, beside[1]));
}

function sayAssumed(work: Proof, { angle }: Candidate, point: ProvedPoint): void {
  const ends = (point.ends ?? []).map((end) => end.angle.toFixed(1)).join(' and ');
  say(
    work,
    'stationary/other-conformers',
    `the saddle taken for the maximum at ${angle.toFixed(1)} degrees joins other conformers of the wells beside it, at ${ends} degrees; that these interconvert with the wells faster than the rotor turns is assumed, not proved`,
  );
}

/** The highest saddle of a way, as the point that stands for it. */
function ofWay(
  work: Proof,
  of: number,
  candidate: Candidate,
  way: readonly Link[],
  joined: boolean,
  wells: readonly ProvedPoint[],
): ProvedPoint {
  const top = way.reduce((p, q) => (q.structure.energy > p.structure.energy ? q : p));
  const end = (bottom: Bottom): PathEnd => {
    const well = wells.find((other) => isAt(work, other, bottom));
    return { well: well ? well.of : null, angle: bottom.angle, energy: bottom.energy };
  };
  const [p, q] = top.bottoms;
  // wells that only another bond's turn joins are not parted by this rotor
  const own = top.overlap >= TAKES_PART || top.motion.kind === 'inversion';
  return {
    ...plain(work, top.structure, of, candidate.kind, candidate.coordinates),
    verdict: joined && own ? 'saddle' : 'other saddle',
    overlap: top.overlap,
    motion: top.motion,
    ends: [end(p), end(q)],
    inverts: invertedBetween(work.molecule, p.coordinates, q.coordinates),
    links: joined && own ? way.length : 0,
    sameAs: null,
  };
}

/** A structure that is no first-order saddle. */
function unproved(work: Proof, of: number, candidate: Candidate, found: StationaryStructure): ProvedPoint {
  const higher = found.converged && found.order > 1;
  const seen = higher ? motionAt(work, found, softest(work, found)) : null;
  return {
    ...plain(work, found, of, candidate.kind, candidate.coordinates),
    verdict: higher ? 'higher order' : 'not found',
    overlap: seen?.overlap ?? null,
    motion: seen?.motion ?? null,
    ends: null,
    inverts: [],
    links: 0,
    sameAs: null,
  };
}

function inWords({ verdict, order, ends, motion, converged }: ProvedPoint): string {
  if (!converged) return 'could not be refined to a stationary point';
  if (verdict === 'higher order') return `is a stationary point of order ${order}, no saddle`;
  if (verdict === 'not found') return 'has no negative eigenvalue when it is refined: it is no saddle';
  const where = (ends ?? []).map((end) => `${end.angle.toFixed(1)} degrees${end.well === null ? ' (no well of this profile)' : ''}`);
  return `is a saddle${motion ? motionInWords(motion) : ''} whose paths down end at ${where.join(' and ')}, not joined to the wells beside it`;
}

function motionInWords({ kind, atoms }: Motion): string {
  switch (kind) {
    case 'rotor':
      return ' of this rotor';
    case 'other rotor':
      return ` of turning about ${atoms.join('-')}`;
    case 'inversion':
      return ` of inversion at atom ${atoms.join()}`;
    case 'other':
      return '';
  }
}

/**
 * The saddle behind a crossing of branches. Each branch is followed past the crossing until it tops out or is left, which gives a start on either side;
 * a third one stands halfway between the branches, and the wells may be joined without turning this rotor at all. Of the ways that join the wells that with
 * the lowest highest saddle is taken.
 */
function* provedCrossing(
  work: Proof,
  profile: Candidates,
  of: number,
  wells: readonly ProvedPoint[],
  beside: readonly ProvedPoint[],
): Calculation<ProvedPoint> {
  const candidate = profile.stationaryPoints[of];
  const [left, right] = pointsBeside(profile, candidate.angle);
  const starts = [
    yield* over(work, work.rotor, left.coordinates, 1, PAST, FARTHEST_PAST),
    yield* over(work, work.rotor, right.coordinates, -1, PAST, FARTHEST_PAST),
    yield* halfway(work, left, right, candidate.angle),
  ].flatMap((start) => (start ? [start] : []));

  const joined: Link[][] = [];
  const crossing: Link[] = [];
  const others: ProvedPoint[] = [];
  if (beside.length > 0 && beside[0] !== beside[1]) {
    // the way there and the way back climb from different sides
    const way = (yield* wayBetween(work, beside[0], beside[1], wells)) ?? (yield* wayBetween(work, beside[1], beside[0], wells));
    if (way && way.length > 0) joined.push(way);
    work.tries = MOST_TRIES;
    work.limit = work.evaluations + MOST_EVALUATIONS;
  }
  for (const { x, follow } of starts) {
    if (others.length + crossing.length > 0 && work.evaluations > work.limit) break;
    const structure = yield* refined(work, x, 1, follow ? [follow] : []);
    const link = yield* linkAt(work, structure);
    const way: Link[] | null = link && beside.length > 0 ? yield* wayOver(work, link, beside, wells) : null;
    if (way) joined.push(way);
    else if (link && crossesOver(link, beside)) crossing.push(link);
    else others.push(link ? ofWay(work, of, candidate, [link], false, wells) : unproved(work, of, candidate, structure));
  }
  if (joined.length > 0) {
    const height = (way: readonly Link[]): number => Math.max(...way.map(({ structure }) => structure.energy));
    return ofWay(
      work,
      of,
      candidate,
      joined.reduce((p, q) => (height(q) < height(p) ? q : p)),
      true,
      wells,
    );
  }
  if (crossing.length > 0) {
    const lowest = crossing.reduce((p, q) => (q.structure.energy < p.structure.energy ? q : p));
    const point = ofWay(work, of, candidate, [lowest], true, wells);
    sayAssumed(work, candidate, point);
    return point;
  }
  const best =
    others.find(({ verdict }) => verdict === 'other saddle') ??
    others[0] ??
    unproved(work, of, candidate, yield* refined(work, candidate.coordinates, 1, []));
  say(
    work,
    'stationary/crossing',
    `no saddle that joins the wells on both sides was found behind the crossing at ${candidate.angle.toFixed(1)} degrees: the best candidate ${inWords(best)}`,
  );
  return best;
}

function pointsBeside({ points }: Candidates, angle: number): readonly [Candidates['points'][number], Candidates['points'][number]] {
  const behind = (point: { readonly angle: number }): number => (angle - point.angle + 720) % 360;
  const left = points.reduce((p, q) => (behind(q) < behind(p) ? q : p));
  return [left, points[(points.indexOf(left) + 1) % points.length]];
}

/** The geometry halfway between both branches at the crossing, to be climbed along their difference. */
function* halfway(
  work: Proof,
  left: Candidates['points'][number],
  right: Candidates['points'][number],
  angle: number,
): Calculation<Start | null> {
  const { rotor, molecule } = work;
  const held = modelHessian(molecule, rotor.torsion);
  const ends: Coordinates[] = [];
  for (const { coordinates } of [left, right]) {
    const relaxed = yield* relaxationAt(rotor, held, radians(angle), coordinates);
    work.evaluations += relaxed.evaluations;
    ends.push(relaxed.coordinates);
  }
  const other = superpose(ends[1], ends[0]).coordinates;
  const follow = other.map((value, k) => value - ends[0][k]);
  for (const motion of rigidMotions(ends[0])) removeAlong(follow, motion);
  const size = length(follow);
  if (!(size > 1e-3)) return null;
  const middle = ends[0].map((value, k) => (value + other[k]) / 2);
  return { x: middle, follow: follow.map((value) => value / size) };
}

/**
 * The search for the lower envelope: every branch of held minima that the starting conformers lead to is followed in both directions until it
 * closes; each angle is seeded from its neighbours, from mirror images, from inverted nitrogens and from other rotors turned, until nothing
 * falls any more. What is known already is not followed again: a start that only repeats it costs one relaxation.
 */
import { type Coordinates, degrees, radians, TordialError, wrapDegrees } from '@tordial/geometry';
import { type Branches, branches, type Direction, enter, type HeldMinimum, lead, lowest, next } from './branches.js';
import { intoRotorFrame, rotorAngle, turnTo } from './driven-rotor.js';
import { MEMORY } from './minimise.js';
import { modelHessian } from './model-hessian.js';
import { invertedNitrogens } from './nitrogen-inversion.js';
import type { Calculation } from './potential.js';
import type { Preconditioner } from './preconditioner.js';
import { predictedStart } from './predicted-start.js';
import { relaxationAt } from './relax-at.js';
import type { RingGuard } from './ring-torsion.js';
import { periodAbout } from './rotors/symmetry-number.js';
import { report, type ScanTask } from './scan-task.js';
import { forget, type SecantMemory, secantMemory } from './secant-memory.js';
import { type OtherRotor, otherRotors, turnedRotors, turnedTogether } from './turned-rotors.js';

/** A relaxed scan at work: the branches found so far, and what serves every relaxation. */
export interface Search {
  readonly scan: ScanTask;
  readonly preconditioner: Preconditioner;
  readonly memory: SecantMemory;
  readonly map: Branches;
  /** What makes the mirror image of a geometry the same molecule with the same energy; null where nothing does. */
  readonly mirror: ((x: Coordinates) => Coordinates) | null;
  /** Keeps a ring from being driven until it breaks; null outside rings. */
  readonly guard: RingGuard | null;
  /** Degrees after which the symmetry of the rotor's sides repeats the profile, nearly; 360 without symmetry. */
  readonly period: number;
}

/** A search that has found nothing yet. */
export function newSearch(scan: ScanTask, mirror: Search['mirror'], guard: RingGuard | null = null): Search {
  return {
    scan,
    preconditioner: modelHessian(scan.molecule, scan.rotor.inRing ? null : scan.rotor.torsion),
    memory: secantMemory(3 * scan.molecule.atomCount, MEMORY),
    map: branches(scan.angles.length, mirror ? oppositePlaces(scan.angles) : null, mirror ?? undefined),
    mirror,
    guard,
    period: scan.rotor.inRing ? 360 : periodAbout(scan.molecule, scan.rotor.torsion, scan.rotor.sides),
  };
}

/** Place of -phi for each place; null when the grid does not hold it. */
function oppositePlaces(angles: readonly number[]): Int32Array | null {
  const places = angles.map((angle) => angles.findIndex((other) => Math.abs(wrapDegrees(angle + other + 1e-9)) < 1e-6));
  return places.includes(-1) ? null : Int32Array.from(places);
}

/** A geometry relaxed with the rotor held. */
export interface RelaxedHeld {
  readonly energy: number;
  readonly torque: number;
  readonly coordinates: Coordinates;
  readonly gradientMax: number;
  readonly converged: boolean;
}

/** Relaxes a geometry with the rotor held at an angle (radian). */
export function* hold({ scan, preconditioner, memory, guard }: Search, angle: number, start: Coordinates): Calculation<RelaxedHeld> {
  scan.options.signal?.throwIfAborted();
  forget(memory);
  const { energy, torque, coordinates, gradientMax, converged, evaluations } = yield* relaxationAt(
    scan.rotor,
    preconditioner,
    angle,
    start,
    {
      memory,
      tolerance: scan.tolerance,
      maxEvaluations: scan.options.maxEvaluations,
    },
  );
  scan.evaluations += evaluations;
  guard?.check(coordinates, energy);
  intoRotorFrame(scan.rotor, coordinates);
  return { energy, torque, coordinates, gradientMax, converged };
}

/** Relaxes a geometry at a grid angle and enters what it finds. */
function* find(search: Search, place: number, start: Coordinates): Calculation<HeldMinimum> {
  const { scan, map } = search;
  const found = yield* hold(search, radians(scan.angles[place]), start);
  const minimum = enter(map, { place, ...found });
  report(scan, scan.angles[place], found.energy, inSight(search));
  return minimum;
}

/** What a geometry that is no good comes to: an angle within the torsion opens to a straight one, atoms fall together, a ring would break. */
const NO_GOOD = new Set(['scan/linear', 'scan/energy', 'scan/ring-broken']);

/** The same for a geometry that may be no good: null then. */
function* tryToFind(search: Search, place: number, start: Coordinates): Calculation<HeldMinimum | null> {
  try {
    return yield* find(search, place, start);
  } catch (error) {
    if (error instanceof TordialError && NO_GOOD.has(error.code)) return null;
    throw error;
  }
}

/** Steps that would be left if nothing new turned up: a guess that only the display needs. */
function inSight({ scan, map }: Search): number {
  const missing = map.at.filter((minima) => minima.length === 0).length;
  return scan.done + 1 + missing;
}

export function* startAt(search: Search, start: Coordinates): Calculation<HeldMinimum> {
  return yield* find(search, nearestPlace(search, start), start);
}

/** The grid angle nearest to a geometry's. */
export function nearestPlace({ scan: { rotor, angles } }: Search, x: Coordinates): number {
  const angle = degrees(rotorAngle(rotor, x));
  const apart = angles.map((other) => Math.abs(wrapDegrees(other - angle)));
  return apart.indexOf(Math.min(...apart));
}

/** Turns a minimum by one step and relaxes it; notes where it leads. */
function* follow(search: Search, from: HeldMinimum, direction: Direction): Calculation<HeldMinimum | null> {
  const { scan } = search;
  const place = neighbour(scan, from.place, direction);
  if (place === null) {
    lead(from, direction, null);
    return null;
  }
  const step = direction * radians(scan.step);
  const start = predictedStart(scan.rotor, from, direction, radians(scan.angles[place]));
  const to = yield* tryToFind(search, place, start);
  lead(from, direction, to);
  const back = -direction as Direction;
  if (to && next(to, back) === undefined && goesOn(from, to, step, search)) lead(to, back, from);
  return to;
}

/** The next place in a direction; null beyond the ends of a range. */
export function neighbour({ angles, closed }: ScanTask, place: number, direction: Direction): number | null {
  const count = angles.length;
  const after = place + direction;
  if (!closed && (after < 0 || after === count)) return null;
  return (after + count) % count;
}

/** Mismatch (kcal/mol) of the trapezoidal rule, and displacement (angstrom) of an atom, up to which a step has stayed on its branch beyond doubt. */
const SMOOTH_ENERGY = 0.03;
const SMOOTH_DISPLACEMENT = 0.3;

/** Whether two minima one step apart plainly belong to one branch, so that the way back need not be tried. */
export function goesOn(from: HeldMinimum, to: HeldMinimum, step: number, { scan }: Search): boolean {
  if (!from.converged || !to.converged) return false;
  const trapezoid = (step * (from.torque + to.torque)) / 2;
  if (Math.abs(to.energy - from.energy - trapezoid) > SMOOTH_ENERGY * (step / radians(10)) ** 2) return false;
  const turned = from.coordinates.slice();
  if (!scan.rotor.inRing) turnTo(scan.rotor, turned, radians(scan.angles[to.place]));
  intoRotorFrame(scan.rotor, turned);
  return turned.every((value, k) => Math.abs(value - to.coordinates[k]) < SMOOTH_DISPLACEMENT);
}

/** Follows a branch in one direction until it meets a part that has been followed before, or has gone round. */
export function* sweep(search: Search, from: HeldMinimum, direction: Direction): Calculation<void> {
  const once = search.scan.options.search === 'sweep' ? search.scan.angles.length - 1 : MOST_ROUNDS * search.scan.angles.length;
  let at: HeldMinimum | null = from;
  for (let n = 0; at && n < once && next(at, direction) === undefined; n++) at = yield* follow(search, at, direction);
}

/** One way round from the first start; the last point is joined to the first only if that plainly continues it. */
export function* singleSweep(search: Search): Calculation<void> {
  const first = yield* startAt(search, search.scan.starts[0]);
  yield* sweep(search, first, 1);
  if (!search.scan.closed) return yield* sweep(search, first, -1);
  const count = search.scan.angles.length;
  const last = search.map.at[(first.place - 1 + count) % count][0];
  if (!goesOn(last, first, radians(search.scan.step), search)) return;
  lead(last, 1, first);
  lead(first, -1, last);
}

/** A branch can need several turns of the rotor to close when another rotor is geared to it. */
const MOST_ROUNDS = 4;
/** Branches up to this far above the envelope (kcal/mol) are followed from both ends. */
const WINDOW = 2;
/** Other rotors are turned on at points this far apart, degrees: what that finds is followed to the points between. */
const TURN_EVERY = 30;
/** Rounds of turning other rotors after which only neighbours, mirror images and inversions seed: long chains would fold for ever. */
const TURNING_ROUNDS = 4;

/** Finds the lowest minimum at each angle. */
export function* searchEnvelope(search: Search): Calculation<void> {
  for (const start of search.scan.starts) {
    const first = yield* startAt(search, start);
    yield* sweep(search, first, 1);
    yield* sweep(search, first, -1);
  }
  const { molecule, rotor } = search.scan;
  const rotors = otherRotors(molecule, rotor);
  const stride = Math.max(1, Math.round(TURN_EVERY / search.scan.step));
  const seeded = new Set<HeldMinimum>();
  for (let round = 1; ; round++) {
    yield* close(search);
    const envelope = lowestOnEach(search);
    const fresh = [...envelope, ...nearEnvelope(search, envelope, stride)].filter((minimum) => !seeded.has(minimum));
    if (fresh.length === 0) return;
    for (const minimum of fresh) {
      seeded.add(minimum);
      const { place, twin, coordinates } = minimum;
      if (twin && twin !== minimum && seeded.has(twin)) continue;
      const turns = round <= TURNING_ROUNDS;
      const onEnvelope = envelope[place] === minimum;
      const well = onEnvelope && isWell(search, envelope, place);
      if (onEnvelope) for (const start of invertedNitrogens(molecule, rotor, coordinates)) yield* tryToFind(search, place, start);
      if (turns && well) for (const start of turnedRotors(rotors, coordinates)) yield* tryToFind(search, place, start);
      if (turns && (well || place % stride === 0))
        for (const start of yield* promising(search, rearranged(search, rotors.slice(0, REARRANGED), coordinates)))
          yield* tryToFind(search, place, start);
      // on a grid without opposite angles the mirror image is turned to the nearest one
      if (search.mirror && !search.map.opposite) yield* tryNearby(search, search.mirror(coordinates));
      for (const seed of periodSeeds(search, envelope, minimum)) yield* tryToFind(search, seed.place, seed.start);
    }
  }
}

/** Minima this little (kcal/mol) above the envelope are rearranged too, so many at each angle: two changes away may lie a lower branch. */
const NEAR = 1;
const MOST_NEAR = 2;

/** The minima next above the envelope at the angles where other rotors are turned. */
function nearEnvelope({ map }: Search, envelope: readonly HeldMinimum[], stride: number): HeldMinimum[] {
  return envelope.flatMap((lowestThere, place) =>
    place % stride !== 0
      ? []
      : map.at[place]
          .filter((minimum) => minimum !== lowestThere && minimum.energy < lowestThere.energy + NEAR)
          .sort((p, q) => p.energy - q.energy)
          .slice(0, MOST_NEAR),
  );
}

/** The nearest rotors are turned alone and together; of the geometries so made, the few of lowest energy are relaxed. */
const REARRANGED = 5;
const MOST_PROMISING = 5;

/** One, two and three rotors turned, and one and two about an inverted nitrogen. */
function rearranged({ scan: { molecule, rotor } }: Search, rotors: readonly OtherRotor[], x: Coordinates): Coordinates[] {
  const together = (start: Coordinates, counts: readonly number[]): Coordinates[] =>
    counts.flatMap((count) => turnedTogether(rotors, count, start));
  const inverted = invertedNitrogens(molecule, rotor, x);
  return [...together(x, [1, 2, 3]), ...inverted.flatMap((image) => together(image, [1, 2]))];
}

/** The few of these geometries whose energies, as they stand, are lowest: an energy costs a tenth of a relaxation. */
function* promising(search: Search, starts: readonly Coordinates[]): Calculation<Coordinates[]> {
  const { scan } = search;
  const question = { x: new Float64Array(3 * scan.rotor.atomCount), gradient: new Float64Array(3 * scan.rotor.atomCount) };
  const judged: { readonly start: Coordinates; readonly energy: number }[] = [];
  for (const start of starts) {
    question.x.set(start);
    const energy = yield question;
    scan.evaluations++;
    if (Number.isFinite(energy)) judged.push({ start, energy });
  }
  return judged
    .sort((p, q) => p.energy - q.energy)
    .slice(0, MOST_PROMISING)
    .map(({ start }) => start);
}

/** Whether no neighbour of a point of the envelope lies lower. */
function isWell({ scan }: Search, envelope: readonly HeldMinimum[], place: number): boolean {
  const lowerAt = (direction: Direction): boolean => {
    const beside = neighbour(scan, place, direction);
    return beside !== null && envelope[beside].energy < envelope[place].energy;
  };
  return !lowerAt(1) && !lowerAt(-1);
}

/** Tries a geometry at the grid angle nearest to its own, if there is one within a step. */
function* tryNearby(search: Search, start: Coordinates): Calculation<void> {
  const { rotor, angles, step } = search.scan;
  const place = nearestPlace(search, start);
  if (Math.abs(wrapDegrees(angles[place] - degrees(rotorAngle(rotor, start)))) <= step) yield* tryToFind(search, place, start);
}

/** Kcal/mol: what a relabelled copy must lie below the envelope to be worth a relaxation. */
const WORTHWHILE = 0.02;

/**
 * The minimum with the atoms of a symmetric side exchanged: nearly itself turned by the rotor's period. Where the envelope is higher there, that
 * is a branch not found yet.
 */
function periodSeeds(
  { scan, period }: Search,
  envelope: readonly HeldMinimum[],
  minimum: HeldMinimum,
): { readonly place: number; readonly start: Coordinates }[] {
  const places = Math.round(period / scan.step);
  if (!scan.closed || period >= 360 || Math.abs(places * scan.step - period) > 1e-9) return [];
  const seeds: { place: number; start: Coordinates }[] = [];
  for (let turn = places; turn < envelope.length; turn += places) {
    const place = (minimum.place + turn) % envelope.length;
    if (envelope[place].energy > minimum.energy + WORTHWHILE) seeds.push({ place, start: minimum.coordinates });
  }
  return seeds;
}

/** Follows every branch near the envelope both ways, lowest first, until each minimum there leads somewhere known. */
function* close(search: Search): Calculation<void> {
  const { map } = search;
  for (;;) {
    let best: HeldMinimum | null = null;
    let height = WINDOW;
    for (const minima of map.at) {
      const floor = Math.min(...minima.map((minimum) => minimum.energy));
      for (const minimum of minima) {
        if (minimum.ahead !== undefined && minimum.behind !== undefined) continue;
        if (minimum.energy - floor >= height) continue;
        best = minimum;
        height = minimum.energy - floor;
      }
    }
    if (!best) return;
    if (best.ahead === undefined) yield* follow(search, best, 1);
    if (best.behind === undefined) yield* follow(search, best, -1);
  }
}

/** The lowest minimum at each place. Throws `scan/unreached` when a place has none. */
export function lowestOnEach({ scan, map }: Search): HeldMinimum[] {
  const envelope: HeldMinimum[] = [];
  scan.angles.forEach((angle, place) => {
    const opposite = map.opposite ? map.opposite[place] : place;
    const twin = opposite < place ? envelope[opposite].twin : null;
    const best = twin ?? lowest(map, place, envelope[place - 1]);
    if (!best)
      throw new TordialError(
        'scan/unreached',
        `no start reaches ${angle} degrees: on the way an angle within the torsion opens beyond 175 degrees, or the energy is not finite`,
      );
    envelope.push(best);
  });
  return envelope;
}

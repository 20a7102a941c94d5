/**
 * One-dimensional scans: the energy of a molecule against the angle of one rotor.
 *
 * A relaxed scan follows every branch of held minima that its starting conformers lead to, in both directions and until it closes, and
 * re-seeds each angle from its neighbours, from mirror images and from inverted nitrogens until nothing falls any more. The profile is the
 * lower envelope: it has no hysteresis, and phi and phi + 360 degrees agree.
 */
import { type Coordinates, degrees, type Molecule, type Note, radians, TordialError, wrapDegrees } from '@tordial/geometry';
import { type Branches, branches, type Direction, enter, type HeldMinimum, joined, lead, lowest, mirrored, next } from './branches.js';
import { drive, driveAsync } from './drive.js';
import { checkBent, type DrivenRotor, drivenRotor, intoRotorFrame, rigidTorque, rotorAngle, turnTo } from './driven-rotor.js';
import { checkSizes, MEMORY, type Preconditioner } from './minimise.js';
import { modelHessian } from './model-hessian.js';
import { invertedNitrogens } from './nitrogen-inversion.js';
import type { Abortable, AsyncPotential, Calculation, Potential } from './potential.js';
import { predictedStart } from './predicted-start.js';
import { type BranchEnd, type CurvePoint, profileCurve } from './profile-curve.js';
import { refinedExtrema, type StationaryPoint } from './refined-extrema.js';
import { relaxationAt } from './relax-at.js';
import type { Torsion } from './rotors/defining-torsion.js';
import { forget, type SecantMemory, secantMemory } from './secant-memory.js';
import { otherRotors, turnedRotors } from './turned-rotors.js';

export interface ScanProgress {
  /** Steps done, and those in sight: `total` can grow or shrink as branches are found or turn out to be known. */
  readonly done: number;
  readonly total: number;
  /** The step just done: degrees, kcal/mol. */
  readonly angle: number;
  readonly energy: number;
}

export interface ScanOptions {
  /** Starting conformers, angstrom; each is turned to the nearest grid angle and followed from there. At least one. */
  readonly starts: readonly Coordinates[];
  /** `relaxed` (default) minimises everything else at each angle; `rigid` only turns the first start. */
  readonly kind?: 'relaxed' | 'rigid';
  /** Degrees between points, a divisor of 360; 10. */
  readonly step?: number;
  /** Degrees; -180. The grid is this plus multiples of the step. */
  readonly startAngle?: number;
  /** Largest component of the gradient tangent to the constraint, kcal/mol/angstrom; 1e-3. */
  readonly tolerance?: number;
  /** Evaluations that one relaxation may take; 1000. */
  readonly maxEvaluations?: number;
  /** `envelope` (default) searches for the lower envelope; `sweep` goes once round from the first start, upwards, and takes what it meets. */
  readonly search?: 'envelope' | 'sweep';
  readonly onProgress?: (progress: ScanProgress) => void;
  /** Stops the scan with the signal's reason. */
  readonly signal?: Abortable;
}

export interface ScanPoint extends CurvePoint {
  readonly converged: boolean;
  /** Largest component of the gradient tangent to the constraint, kcal/mol/angstrom; null for a rigid scan. */
  readonly residual: number | null;
  /** Angstrom, in the rotor's frame. */
  readonly coordinates: Coordinates;
}

/** A scan's result. Angles in degrees, energies in kcal/mol, torques in kcal/mol/radian, coordinates in angstrom. */
export interface Profile {
  readonly kind: 'relaxed' | 'rigid';
  readonly torsion: Torsion;
  readonly sides: DrivenRotor['sides'];
  readonly step: number;
  readonly startAngle: number;
  readonly tolerance: number;
  /** One a grid angle, ascending in [-180, 180). */
  readonly points: readonly ScanPoint[];
  /** Wells, barriers and crossings, ascending by angle. */
  readonly stationaryPoints: readonly StationaryPoint[];
  readonly notes: readonly Note[];
  /** Energies and gradients asked for. */
  readonly evaluations: number;
}

/**
 * A scan as a calculation, for any potential.
 *
 * Throws as `checkTorsion` does, `scan/linear` where an angle within the torsion is above 175 degrees, `scan/grid` for a step that does not divide 360 degrees
 * or a setting out of range, `scan/start` when there is no start or its size differs, `scan/energy` when a start has no finite energy,
 * `scan/unreached` when no start can be turned to one of the angles.
 */
export function* rotorScan(molecule: Molecule, torsion: Torsion, options: ScanOptions): Calculation<Profile> {
  const scan = prepare(molecule, torsion, options);
  return scan.kind === 'rigid' ? yield* rigidScan(scan) : yield* relaxedScan(scan);
}

/** Scans a rotor with a potential in this thread. Throws as `rotorScan`, and `potential/atoms` when the potential is for another number of atoms. */
export function scanRotor(molecule: Molecule, potential: Potential, torsion: Torsion, options: ScanOptions): Profile {
  for (const start of options.starts) checkSizes(molecule, potential, start);
  return drive(rotorScan(molecule, torsion, options), potential);
}

/** Scans a rotor with a potential that answers later. Rejects as `scanRotor` throws. */
export async function scanRotorAsync(
  molecule: Molecule,
  potential: AsyncPotential,
  torsion: Torsion,
  options: ScanOptions,
): Promise<Profile> {
  for (const start of options.starts) checkSizes(molecule, potential, start);
  return driveAsync(rotorScan(molecule, torsion, options), potential, options.signal);
}

/** What every part of one scan needs. */
interface Scan {
  readonly molecule: Molecule;
  readonly rotor: DrivenRotor;
  readonly kind: 'relaxed' | 'rigid';
  readonly options: ScanOptions;
  /** Grid angles, degrees, ascending in [-180, 180). */
  readonly angles: readonly number[];
  readonly step: number;
  readonly startAngle: number;
  readonly tolerance: number;
  readonly starts: readonly Coordinates[];
  readonly notes: Note[];
  done: number;
  evaluations: number;
}

function prepare(molecule: Molecule, torsion: Torsion, options: ScanOptions): Scan {
  const { kind = 'relaxed', step = 10, startAngle = -180, tolerance = 1e-3, starts } = options;
  const rotor = drivenRotor(molecule, torsion);
  const count = Math.round(360 / step);
  if (!(step > 0 && count >= 3 && Math.abs(count * step - 360) < 1e-9))
    throw new TordialError('scan/grid', `a step of ${step} degrees does not divide 360 into at least 3 parts; try 5, 10 or 15`);
  if (!Number.isFinite(startAngle)) throw new TordialError('scan/grid', `the start angle must be a number of degrees, not ${startAngle}`);
  if (!(tolerance > 0)) throw new TordialError('scan/grid', `the tolerance must be above 0, not ${tolerance}`);
  if (starts.length === 0) throw new TordialError('scan/start', 'a scan needs at least one starting geometry');
  for (const start of starts) {
    if (start.length !== 3 * molecule.atomCount)
      throw new TordialError('scan/start', `a start has ${start.length / 3} atoms and the molecule ${molecule.atomCount}`);
    checkBent(rotor, start);
  }
  const angles = Array.from({ length: count }, (_, n) => {
    const angle = wrapDegrees(startAngle + n * step);
    // a third of a degree and the like must not make 180 out of -180
    return angle > 180 - 1e-9 ? angle - 360 : angle;
  }).sort((p, q) => p - q);
  return {
    molecule,
    rotor,
    kind,
    options,
    angles,
    step,
    startAngle,
    tolerance,
    starts: starts.map((start) => {
      const framed = start.slice();
      intoRotorFrame(rotor, framed);
      return framed;
    }),
    notes: [],
    done: 0,
    evaluations: 0,
  };
}

function* rigidScan(scan: Scan): Calculation<Profile> {
  const { rotor, angles, options } = scan;
  const question = { x: scan.starts[0].slice(), gradient: new Float64Array(3 * rotor.atomCount) };
  const at = function* (angle: number): Calculation<Omit<ScanPoint, 'beyond' | 'before' | 'breakAfter'>> {
    options.signal?.throwIfAborted();
    question.x.set(scan.starts[0]);
    turnTo(rotor, question.x, radians(angle));
    const energy = yield question;
    scan.evaluations++;
    const torque = rigidTorque(rotor, question.x, question.gradient);
    if (!Number.isFinite(energy) || !Number.isFinite(torque))
      throw new TordialError(
        'scan/energy',
        `the potential gives no finite energy at ${angle} degrees: atoms may lie on one spot; use a relaxed scan`,
      );
    return { angle, energy, torque, converged: true, residual: null, coordinates: question.x.slice() };
  };
  const points: ScanPoint[] = [];
  for (const angle of angles) {
    const point = yield* at(angle);
    points.push({ ...point, breakAfter: false, beyond: null, before: null });
    report(scan, angle, point.energy, angles.length);
  }
  const stationaryPoints = yield* refinedExtrema(profileCurve(points), points, at, null);
  return finished(scan, points, stationaryPoints);
}

function finished(scan: Scan, points: readonly ScanPoint[], stationaryPoints: readonly StationaryPoint[]): Profile {
  const { kind, rotor, step, startAngle, tolerance, notes, evaluations } = scan;
  return { kind, torsion: rotor.torsion, sides: rotor.sides, step, startAngle, tolerance, points, stationaryPoints, notes, evaluations };
}

function report(scan: Scan, angle: number, energy: number, total: number): void {
  scan.done++;
  scan.options.onProgress?.({ done: scan.done, total: Math.max(total, scan.done), angle, energy });
}

/** A relaxed scan at work: the branches found so far, and what serves every relaxation. */
interface Search {
  readonly scan: Scan;
  readonly preconditioner: Preconditioner;
  readonly memory: SecantMemory;
  readonly map: Branches;
}

function* relaxedScan(scan: Scan): Calculation<Profile> {
  const { rotor, angles, options, molecule } = scan;
  const mirror = options.search !== 'sweep' && (yield* mirrorImagesAreAlike(scan));
  const search: Search = {
    scan,
    preconditioner: modelHessian(molecule, rotor.torsion),
    memory: secantMemory(3 * molecule.atomCount, MEMORY),
    map: branches(angles.length, mirror ? oppositePlaces(angles) : null),
  };
  if (options.search === 'sweep') yield* singleSweep(search);
  else yield* searchEnvelope(search);

  const envelope = lowestOnEach(search);
  const points = envelope.map((minimum, place) => scanPoint(search, envelope, minimum, place));
  for (const { angle, converged, residual } of points)
    if (!converged)
      scan.notes.push({
        code: 'scan/not-converged',
        message: `the point at ${angle} degrees did not converge: largest gradient component ${residual?.toPrecision(2)} kcal/mol/angstrom`,
      });
  const at = function* (angle: number, start: Coordinates): Calculation<Omit<ScanPoint, 'beyond' | 'before' | 'breakAfter'>> {
    const relaxed = yield* relaxed1(search, radians(angle), start);
    return { angle, ...relaxed, residual: relaxed.gradientMax };
  };
  const stationaryPoints = yield* refinedExtrema(profileCurve(points), points, at, mirror ? mirrored : null);
  return finished(scan, points, stationaryPoints);
}

/** Whether the mirror image of a geometry is the same molecule with the same energy, so that E(phi) = E(-phi). */
function* mirrorImagesAreAlike(scan: Scan): Calculation<boolean> {
  const { tetrahedral, axes } = scan.molecule.stereo;
  if ([...tetrahedral, ...axes].some(({ sign }) => sign !== 0)) return false;
  const length = 3 * scan.molecule.atomCount;
  const question = { x: scan.starts[0].slice(), gradient: new Float64Array(length) };
  const energy = yield question;
  question.x.set(mirrored(question.x));
  const image = yield question;
  scan.evaluations += 2;
  if (!(Math.abs(image - energy) > 1e-6 * (1 + Math.abs(energy)))) return true;
  scan.notes.push({
    code: 'scan/handed-potential',
    message: 'the potential gives mirror images different energies; the profile is searched without them',
  });
  return false;
}

/** Place of -phi for each place; null when the grid does not hold it. */
function oppositePlaces(angles: readonly number[]): Int32Array | null {
  const places = angles.map((angle) => angles.findIndex((other) => Math.abs(wrapDegrees(angle + other + 1e-9)) < 1e-6));
  return places.includes(-1) ? null : Int32Array.from(places);
}

interface RelaxedHeld {
  readonly energy: number;
  readonly torque: number;
  readonly coordinates: Coordinates;
  readonly gradientMax: number;
  readonly converged: boolean;
}

function* relaxed1({ scan, preconditioner, memory }: Search, angle: number, start: Coordinates): Calculation<RelaxedHeld> {
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
  intoRotorFrame(scan.rotor, coordinates);
  return { energy, torque, coordinates, gradientMax, converged };
}

/** Relaxes a geometry at a grid angle and enters what it finds. */
function* find(search: Search, place: number, start: Coordinates): Calculation<HeldMinimum> {
  const { scan, map } = search;
  const found = yield* relaxed1(search, radians(scan.angles[place]), start);
  const minimum = enter(map, { place, ...found });
  report(scan, scan.angles[place], found.energy, inSight(search));
  return minimum;
}

/** The same for a geometry that may be no good: null when an angle within the torsion opens to a straight one or atoms fall together. */
function* tryToFind(search: Search, place: number, start: Coordinates): Calculation<HeldMinimum | null> {
  try {
    return yield* find(search, place, start);
  } catch (error) {
    if (error instanceof TordialError && (error.code === 'scan/linear' || error.code === 'scan/energy')) return null;
    throw error;
  }
}

/** Steps that would be left if nothing new turned up: a guess that only the display needs. */
function inSight({ scan, map }: Search): number {
  const missing = map.at.filter((minima) => minima.length === 0).length;
  return scan.done + 1 + missing;
}

function* startAt(search: Search, start: Coordinates): Calculation<HeldMinimum> {
  const { rotor, angles } = search.scan;
  const angle = degrees(rotorAngle(rotor, start));
  let place = 0;
  angles.forEach((other, n) => {
    if (Math.abs(wrapDegrees(other - angle)) < Math.abs(wrapDegrees(angles[place] - angle))) place = n;
  });
  return yield* find(search, place, start);
}

/** Turns a minimum by one step and relaxes it; notes where it leads. */
function* follow(search: Search, from: HeldMinimum, direction: Direction): Calculation<HeldMinimum | null> {
  const { scan } = search;
  const count = scan.angles.length;
  const place = (from.place + direction + count) % count;
  const step = direction * radians(scan.step);
  const start = predictedStart(scan.rotor, from, direction, radians(scan.angles[place]));
  const to = yield* tryToFind(search, place, start);
  lead(from, direction, to);
  const back = -direction as Direction;
  if (to && next(to, back) === undefined && goesOn(from, to, step, search)) lead(to, back, from);
  return to;
}

/** Mismatch (kcal/mol) of the trapezoidal rule, and displacement (angstrom) of an atom, up to which a step has stayed on its branch beyond doubt. */
const SMOOTH_ENERGY = 0.03;
const SMOOTH_DISPLACEMENT = 0.3;

/** Whether two minima one step apart plainly belong to one branch, so that the way back need not be tried. */
function goesOn(from: HeldMinimum, to: HeldMinimum, step: number, { scan }: Search): boolean {
  if (!from.converged || !to.converged) return false;
  const trapezoid = (step * (from.torque + to.torque)) / 2;
  if (Math.abs(to.energy - from.energy - trapezoid) > SMOOTH_ENERGY * (step / radians(10)) ** 2) return false;
  const turned = from.coordinates.slice();
  turnTo(scan.rotor, turned, radians(scan.angles[to.place]));
  intoRotorFrame(scan.rotor, turned);
  return turned.every((value, k) => Math.abs(value - to.coordinates[k]) < SMOOTH_DISPLACEMENT);
}

/** Follows a branch in one direction until it meets a part that has been followed before, or has gone round. */
function* sweep(search: Search, from: HeldMinimum, direction: Direction): Calculation<void> {
  const once = search.scan.options.search === 'sweep' ? search.scan.angles.length - 1 : MOST_ROUNDS * search.scan.angles.length;
  let at: HeldMinimum | null = from;
  for (let n = 0; at && n < once && next(at, direction) === undefined; n++) at = yield* follow(search, at, direction);
}

/** One way round from the first start; the last point is joined to the first only if that plainly continues it. */
function* singleSweep(search: Search): Calculation<void> {
  const first = yield* startAt(search, search.scan.starts[0]);
  yield* sweep(search, first, 1);
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
/** The rotors next to the axis are turned on at points this far apart, degrees: what that finds is followed to the points between. */
const TURN_NEXT_EVERY = 30;

function* searchEnvelope(search: Search): Calculation<void> {
  for (const start of search.scan.starts) {
    const first = yield* startAt(search, start);
    yield* sweep(search, first, 1);
    yield* sweep(search, first, -1);
  }
  const { molecule, rotor } = search.scan;
  const rotors = otherRotors(molecule, rotor);
  const next = rotors.filter(({ distance }) => distance === 0);
  const stride = Math.max(1, Math.round(TURN_NEXT_EVERY / search.scan.step));
  const seeded = new Set<HeldMinimum>();
  for (;;) {
    yield* close(search);
    const envelope = lowestOnEach(search);
    const fresh = envelope.filter((minimum) => !seeded.has(minimum));
    if (fresh.length === 0) return;
    for (const minimum of fresh) {
      seeded.add(minimum);
      if (minimum.twin && minimum.twin !== minimum && seeded.has(minimum.twin)) continue;
      const turning = isWell(envelope, minimum.place) ? rotors : minimum.place % stride === 0 ? next : [];
      for (const start of [...invertedNitrogens(molecule, rotor, minimum.coordinates), ...turnedRotors(turning, minimum.coordinates)])
        yield* tryToFind(search, minimum.place, start);
    }
  }
}

/** Whether no neighbour of a point of the envelope lies lower. */
function isWell(envelope: readonly HeldMinimum[], place: number): boolean {
  const count = envelope.length;
  const { energy } = envelope[place];
  return energy <= envelope[(place + 1) % count].energy && energy <= envelope[(place - 1 + count) % count].energy;
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
function lowestOnEach({ scan, map }: Search): HeldMinimum[] {
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

function scanPoint(search: Search, envelope: readonly HeldMinimum[], minimum: HeldMinimum, place: number): ScanPoint {
  const count = envelope.length;
  const after = envelope[(place + 1) % count];
  const before = envelope[(place - 1 + count) % count];
  const breakAfter = !joined(minimum, 1, after);
  // at an angle that is its own opposite, a minimum and its mirror image share the energy: either may lead on
  const { twin } = minimum;
  const other = twin && twin !== minimum && twin.place === place && !joined(twin, 1, after) ? twin : null;
  const ahead = breakAfter ? continuation(minimum, 1) : null;
  const otherAhead = breakAfter && other ? continuation(other, 1) : null;
  const leads = otherAhead && (!ahead || otherAhead.energy < ahead.energy - 1e-9) ? other : null;
  return {
    angle: search.scan.angles[place],
    energy: minimum.energy,
    torque: minimum.torque,
    converged: minimum.converged,
    residual: minimum.gradientMax,
    coordinates: minimum.coordinates,
    breakAfter,
    beyond: leads ? otherAhead : ahead,
    before: joined(before, 1, minimum) ? null : continuation(minimum, -1),
    ...(leads ? { torqueAfter: leads.torque } : {}),
  };
}

/** Where a minimum's branch is one step on, if it goes on. */
function continuation(minimum: HeldMinimum, direction: Direction): BranchEnd | null {
  const other = next(minimum, direction);
  return other && joined(minimum, direction, other) ? { energy: other.energy, torque: other.torque } : null;
}

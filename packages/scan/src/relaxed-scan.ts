/** Relaxed scans: from the minima that a search has found to the profile. */
import { type Coordinates, radians } from '@tordial/geometry';
import { type Direction, type HeldMinimum, joined, next } from './branches.js';
import { keepsStereo } from './conformers.js';
import { goesOn, hold, lowestOnEach, newSearch, type RelaxedHeld, type Search, searchEnvelope, singleSweep } from './envelope-search.js';
import { copiedPoints, copiedStationaryPoints } from './periodic-copies.js';
import type { Calculation } from './potential.js';
import { type Profile, profileOf, type ScanPoint } from './profile.js';
import { type BranchEnd, profileCurve } from './profile-curve.js';
import { refinedExtrema } from './refined-extrema.js';
import { searchInRing } from './ring-scan.js';
import type { ScanTask } from './scan-task.js';
import { symmetryImage } from './symmetry-image.js';

/** Searches for the lower envelope, or sweeps once, and refines the profile's extrema. */
export function* relaxedScan(asked: ScanTask): Calculation<Profile> {
  const sweeps = asked.options.search === 'sweep';
  const image = sweeps ? null : yield* imageOfSameEnergy(asked);
  const search = asked.rotor.inRing ? yield* searchInRing(asked, image) : newSearch(asked, image);
  const { scan } = search;
  if (sweeps) yield* singleSweep(search);
  else yield* searchEnvelope(search);

  const envelope = lowestOnEach(search);
  const smooth: boolean[] = [];
  for (let place = 0; place < envelope.length; place++) smooth.push(yield* isSmoothAfter(search, envelope, place));
  const points = envelope.map((_, place) => scanPoint(search, envelope, smooth, place));
  for (const { angle, converged, residual } of points)
    if (!converged)
      scan.notes.push({
        code: 'scan/not-converged',
        message: `the point at ${angle} degrees did not converge: largest gradient component ${residual?.toPrecision(2)} kcal/mol/angstrom`,
      });
  noteLostConfiguration(scan, points);
  const at = function* (angle: number, start: Coordinates): Calculation<Omit<ScanPoint, 'beyond' | 'before' | 'breakAfter'>> {
    const relaxed = yield* hold(search, radians(angle), start);
    return { angle, ...relaxed, residual: relaxed.gradientMax };
  };
  const mirror = search.map.opposite ? search.map.image : null;
  const stationaryPoints = yield* refinedExtrema(profileCurve(points, { open: !scan.closed }), points, at, mirror);
  if (scan.period === null) return profileOf(scan, points, stationaryPoints);
  noteCopies(scan, scan.period, points);
  return profileOf(scan, copiedPoints(scan, scan.period, points), copiedStationaryPoints(scan, scan.period, points, stationaryPoints));
}

/** A potential without a term for it, or a ring driven hard, may let a stereocentre or an axis turn over: such a point is of another molecule. */
function noteLostConfiguration({ molecule, notes }: ScanTask, points: readonly ScanPoint[]): void {
  // double bonds may be what is driven
  const held = { ...molecule, stereo: { ...molecule.stereo, doubleBonds: [] } };
  const lost = points.filter(({ coordinates }) => !keepsStereo(held, coordinates)).map(({ angle }) => angle);
  if (lost.length > 0)
    notes.push({
      code: 'scan/stereo',
      message: `the potential does not hold the stated configuration: lost at ${lost.join(', ')} degrees, where the points are of another molecule`,
    });
}

function noteCopies(scan: ScanTask, period: number, points: readonly ScanPoint[]): void {
  const [first, last] = [points[1], points[points.length - 2]];
  const gap = Math.abs(last.energy - first.energy);
  scan.notes.push({
    code: 'scan/periodic',
    message:
      `only ${first.angle} to ${last.angle} degrees were scanned, and a step beyond; the rest is copied by the rotor's period of ${period} degrees, the rotor turned rigidly. ` +
      `Driving one atom of a symmetric group does not make a relaxed profile exactly periodic: the copies are approximate (the two ends of the period differ by ${gap.toFixed(3)} kcal/mol)`,
  });
}

/** What makes the mirror image of a geometry the same molecule with the same energy, so that E(phi) = E(-phi); null where nothing does. */
function* imageOfSameEnergy(scan: ScanTask): Calculation<((x: Coordinates) => Coordinates) | null> {
  const mirror = symmetryImage(scan.molecule, scan.rotor);
  if (!mirror) return null;
  const length = 3 * scan.molecule.atomCount;
  const question = { x: scan.starts[0].slice(), gradient: new Float64Array(length) };
  const energy = yield question;
  question.x.set(mirror(question.x));
  const image = yield question;
  scan.evaluations += 2;
  if (!(Math.abs(image - energy) > 1e-6 * (1 + Math.abs(energy)))) return mirror;
  scan.notes.push({
    code: 'scan/handed-potential',
    message: 'the potential gives mirror images different energies; the profile is searched without them',
  });
  return null;
}

/**
 * Whether one branch leads from the lowest minimum at a place to the next one. Where the two are far apart although each relaxes to the other,
 * both are held half-way: on one branch they are the same there.
 */
function* isSmoothAfter(search: Search, envelope: readonly HeldMinimum[], place: number): Calculation<boolean> {
  const { scan } = search;
  if (!scan.closed && place === envelope.length - 1) return true;
  const left = envelope[place];
  const right = envelope[(place + 1) % envelope.length];
  if (!joined(left, 1, right)) return false;
  if (scan.options.search === 'sweep' || goesOn(left, right, radians(scan.step), search)) return true;
  const half = radians(scan.angles[place] + scan.step / 2);
  const fromLeft: RelaxedHeld = yield* hold(search, half, left.coordinates);
  const fromRight: RelaxedHeld = yield* hold(search, half, right.coordinates);
  return Math.abs(fromLeft.energy - fromRight.energy) < SAME && Math.abs(fromLeft.torque - fromRight.torque) < 100 * SAME;
}

/** Energies (kcal/mol) of one minimum reached from two sides. */
const SAME = 5e-4;

function scanPoint(search: Search, envelope: readonly HeldMinimum[], smooth: readonly boolean[], place: number): ScanPoint {
  const count = envelope.length;
  const minimum = envelope[place];
  const after = envelope[(place + 1) % count];
  const before = (place - 1 + count) % count;
  const breakAfter = !smooth[place];
  // at an angle that is its own opposite, a minimum and its mirror image share the energy: either may lead on
  const { twin } = minimum;
  const other = twin && twin !== minimum && twin.place === place && !joined(twin, 1, after) ? twin : null;
  const ahead = breakAfter ? continuation(minimum, 1, after) : null;
  const otherAhead = breakAfter && other ? continuation(other, 1, after) : null;
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
    before: smooth[before] ? null : continuation(minimum, -1, envelope[before]),
    ...(leads ? { torqueAfter: leads.torque } : {}),
  };
}

/** Where a minimum's branch is one step on, if it goes on there beside the envelope's. */
function continuation(minimum: HeldMinimum, direction: Direction, neighbour: HeldMinimum): BranchEnd | null {
  const other = next(minimum, direction);
  return other && other !== neighbour && joined(minimum, direction, other) ? { energy: other.energy, torque: other.torque } : null;
}

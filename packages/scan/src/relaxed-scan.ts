/** Relaxed scans: from the minima that a search has found to the profile. */
import { type Coordinates, radians } from '@tordial/geometry';
import { type Direction, type HeldMinimum, joined, mirrored, next } from './branches.js';
import { hold, lowestOnEach, newSearch, type Search, searchEnvelope, singleSweep } from './envelope-search.js';
import type { Calculation } from './potential.js';
import { type Profile, profileOf, type ScanPoint } from './profile.js';
import { type BranchEnd, profileCurve } from './profile-curve.js';
import { refinedExtrema } from './refined-extrema.js';
import type { ScanTask } from './scan-task.js';

/** Searches for the lower envelope, or sweeps once, and refines the profile's extrema. */
export function* relaxedScan(scan: ScanTask): Calculation<Profile> {
  const sweeps = scan.options.search === 'sweep';
  const search = newSearch(scan, !sweeps && (yield* mirrorImagesAreAlike(scan)));
  if (sweeps) yield* singleSweep(search);
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
    const relaxed = yield* hold(search, radians(angle), start);
    return { angle, ...relaxed, residual: relaxed.gradientMax };
  };
  const stationaryPoints = yield* refinedExtrema(profileCurve(points), points, at, search.map.opposite ? mirrored : null);
  return profileOf(scan, points, stationaryPoints);
}

/** Whether the mirror image of a geometry is the same molecule with the same energy, so that E(phi) = E(-phi). */
function* mirrorImagesAreAlike(scan: ScanTask): Calculation<boolean> {
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

/** Rigid scans: one geometry whose rotor is turned, everything else frozen. */
import { radians, TordialError } from '@tordial/geometry';
import { rigidTorque, turnTo } from './driven-rotor.js';
import type { Calculation } from './potential.js';
import { type Profile, profileOf, type ScanPoint } from './profile.js';
import { profileCurve } from './profile-curve.js';
import { refinedExtrema } from './refined-extrema.js';
import { report, type ScanTask } from './scan-task.js';

/** Turns the first start through the grid. Throws `scan/energy` where the energy is not finite. */
export function* rigidScan(scan: ScanTask): Calculation<Profile> {
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
  const stationaryPoints = yield* refinedExtrema(profileCurve(points, { open: !scan.closed }), points, at, null);
  return profileOf(scan, points, stationaryPoints);
}

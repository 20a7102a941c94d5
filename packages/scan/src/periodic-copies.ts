/** One scanned period, copied to the rest of the turn. */
import { radians, wrapDegrees } from '@tordial/geometry';
import { type DrivenRotor, intoRotorFrame, turnTo } from './driven-rotor.js';
import type { ScanPoint } from './profile.js';
import type { StationaryPoint } from './refined-extrema.js';
import { fullTurn, type ScanTask } from './scan-task.js';

/**
 * Points of the full turn from those of one period and a step beyond either end. The geometry of a copy is that of its original with the rotor
 * turned rigidly by whole periods: exact at its angle, not relaxed anew.
 */
export function copiedPoints({ rotor, startAngle, step }: ScanTask, period: number, scanned: readonly ScanPoint[]): ScanPoint[] {
  const originals = scanned.slice(1, -2);
  const from = originals[0].angle;
  return fullTurn(startAngle, step).map((angle) => {
    const place = Math.round((angle - from - period * Math.floor((angle - from + 1e-6) / period)) / step) % originals.length;
    const original = originals[place];
    if (Math.abs(wrapDegrees(angle - original.angle)) < 1e-6) return { ...original, angle };
    return { ...original, angle, copyOf: original.angle, coordinates: turnedTo(rotor, original.coordinates, angle) };
  });
}

/** Stationary points of the full turn from those of the same points; one that is seen at both ends of the period counts once. */
export function copiedStationaryPoints(
  { rotor, step }: ScanTask,
  period: number,
  scanned: readonly ScanPoint[],
  refined: readonly StationaryPoint[],
): StationaryPoint[] {
  const [from, to] = [scanned[1].angle, scanned[scanned.length - 2].angle];
  const near = refined.filter(({ angle }) => angle > from - step / 2 && angle < to + step / 2);
  const once = near.filter(
    ({ kind, angle }, n) => !near.slice(0, n).some((other) => other.kind === kind && Math.abs(angle - other.angle - period) < step / 2),
  );
  return Array.from({ length: Math.round(360 / period) }, (_, n) => n * period)
    .flatMap((turn) =>
      once.map((point) => {
        const angle = wrapDegrees(point.angle + turn);
        return turn === 0 ? { ...point, angle } : { ...point, angle, coordinates: turnedTo(rotor, point.coordinates, angle) };
      }),
    )
    .sort((p, q) => p.angle - q.angle);
}

function turnedTo(rotor: DrivenRotor, x: Float64Array, angle: number): Float64Array {
  const turned = x.slice();
  turnTo(rotor, turned, radians(angle));
  intoRotorFrame(rotor, turned);
  return turned;
}

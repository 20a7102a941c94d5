/** Whether a profile can carry the numbers that follow from it. */
import { TordialError } from '@tordial/geometry';
import {
  type BranchEnd,
  isOpen,
  PROFILE_SCHEMA,
  type ProfileCurve,
  type ProfileDocument,
  type ProfilePoint,
  profileCurve,
} from '@tordial/scan';
import { kcalPer } from './energy-unit.js';

/** Widest gap between neighbouring points, degrees, whatever the step. */
const WIDEST_GAP = 45;
/** Largest jump (kcal/mol) at which two branches still count as meeting, and what the torques may add up to round a smooth turn. */
const JUMP = 1;

/** The part of a profile document that its curve is made of; anybody's angles, energies and torques in that form will do. */
export type ProfilePoints = Pick<ProfileDocument, 'points' | 'unit'>;

/**
 * The curve of a profile in kcal/mol, after checking that it may be read as one closed curve.
 *
 * Throws `profile/schema` for a document of another kind or version, `profile/value` for a value that is no number, `profile/not-converged` for
 * points that did not converge, `profile/not-covered` for a gap in the turn, `profile/not-closed` where going round does not come back to
 * the same energy.
 */
export function soundCurve(document: ProfileDocument): ProfileCurve {
  if (document.schema !== PROFILE_SCHEMA)
    throw new TordialError('profile/schema', `a document of schema '${document.schema}': this version reads ${PROFILE_SCHEMA}`);
  if (isOpen(document))
    throw new TordialError(
      'profile/not-covered',
      'the profile covers a range of angles only: what follows from it needs the full turn; its wells and barriers stand in stationaryPoints',
    );
  const { points } = document;
  for (const { angle, energy, torque } of points)
    if (!Number.isFinite(angle) || !Number.isFinite(energy) || !Number.isFinite(torque))
      throw new TordialError(
        'profile/value',
        `the point at ${angle} degrees has the energy ${energy} and the torque ${torque}: scan it again`,
      );
  const open = points.filter((point) => !point.converged);
  if (open.length > 0)
    throw new TordialError(
      'profile/not-converged',
      `${open.length} of ${points.length} points did not converge (${listed(open)}): scan again with more evaluations or a looser tolerance`,
    );
  const loose = document.stationaryPoints.filter((point) => point.kind !== 'crossing' && !point.converged);
  if (loose.length > 0)
    throw new TordialError(
      'profile/not-converged',
      `the ${loose[0].kind} at ${loose[0].angle} degrees did not converge: scan again with a finer step or more evaluations`,
    );
  requireFullTurn(points, document.settings.step);
  const curve = curveOfPoints(document);
  requireClosed(curve);
  return curve;
}

/** The curve through a document's points in kcal/mol above its lowest point or well, unchecked. */
export function curveOfPoints({ points, unit }: ProfilePoints): ProfileCurve {
  const factor = kcalPer(unit);
  const zero = points.length > 0 ? points[0].energy - points[0].relativeEnergy : 0;
  const branch = (end: BranchEnd | null): BranchEnd | null => end && { energy: (end.energy - zero) * factor, torque: end.torque * factor };
  return profileCurve(
    points.map(({ angle, relativeEnergy, torque, breakAfter, beyond, before, torqueAfter }) => ({
      angle,
      energy: relativeEnergy * factor,
      torque: torque * factor,
      breakAfter,
      beyond: branch(beyond),
      before: branch(before),
      torqueAfter: torqueAfter === undefined ? undefined : torqueAfter * factor,
    })),
  );
}

function requireFullTurn(points: readonly ProfilePoint[], step: number): void {
  const widest = Math.min(WIDEST_GAP, step > 0 ? 1.5 * step : WIDEST_GAP);
  points.forEach(({ angle }, n) => {
    const next = n + 1 < points.length ? points[n + 1].angle : points[0].angle + 360;
    if (next - angle > widest)
      throw new TordialError(
        'profile/not-covered',
        `no point between ${angle} and ${n + 1 < points.length ? next : next - 360} degrees: scan the full turn, with a step of at most ${WIDEST_GAP} degrees`,
      );
  });
}

function requireClosed({ points, pieces }: ProfileCurve): void {
  let work = 0;
  let smooth = true;
  for (const [n, piece] of pieces.entries()) {
    if (piece.side === 'both') {
      const width = widthAfter(points, piece.point);
      const next = points[(piece.point + 1) % points.length];
      const { torque, torqueAfter = torque } = points[piece.point];
      work += ((torqueAfter + next.torque) * width) / 2;
      continue;
    }
    smooth = false;
    const following = pieces[(n + 1) % pieces.length];
    if (piece.side !== 'left' || following.side !== 'right' || following.point !== piece.point) continue;
    const jump = Math.abs(cubic(piece.coefficients, piece.to) - cubic(following.coefficients, following.from));
    if (jump > JUMP)
      throw new TordialError(
        'profile/not-closed',
        `the energy jumps by ${jump.toFixed(2)} kcal/mol after ${points[piece.point].angle} degrees: scan again for the lower envelope, with more conformers`,
      );
  }
  const range = Math.max(...points.map((p) => p.energy)) - Math.min(...points.map((p) => p.energy));
  if (smooth && Math.abs(work) > Math.max(JUMP, 0.1 * range))
    throw new TordialError(
      'profile/not-closed',
      `the driving torques add up to ${work.toFixed(2)} kcal/mol round the turn instead of 0: the profile does not close on itself; scan again for the lower envelope`,
    );
}

function widthAfter(points: ProfileCurve['points'], n: number): number {
  const next = n + 1 < points.length ? points[n + 1].angle : points[0].angle + 360;
  return ((next - points[n].angle) * Math.PI) / 180;
}

function cubic([c0, c1, c2, c3]: readonly [number, number, number, number], t: number): number {
  return c0 + t * (c1 + t * (c2 + t * c3));
}

function listed(points: readonly ProfilePoint[]): string {
  const shown = points.slice(0, 6).map(({ angle }) => angle);
  return `${shown.join(', ')}${points.length > shown.length ? ' ...' : ''} degrees`;
}

/**
 * The periodic curve through a profile: cubic Hermite pieces between neighbouring points, from their energies and torques.
 *
 * Where neighbours lie on different branches no piece joins them: each branch is continued from its own side and the curve is the lower of the
 * two, with a kink where they cross. Source of the interpolation: C. Hermite, J. reine angew. Math. 84, 70 (1878).
 */
import { radians, TordialError, wrapDegrees } from '@tordial/geometry';

export interface BranchEnd {
  /** kcal/mol; kcal/mol/radian. */
  readonly energy: number;
  readonly torque: number;
}

/** What the curve needs of a point; any unit of energy, as long as energies and torques (per radian) share it. */
export interface CurvePoint {
  /** Degrees. */
  readonly angle: number;
  readonly energy: number;
  readonly torque: number;
  /** The next point (cyclic) lies on another branch. */
  readonly breakAfter: boolean;
  /** Across a break: this point's branch at the next point's angle, and at the previous one's, where known. */
  readonly beyond: BranchEnd | null;
  readonly before: BranchEnd | null;
  /** Slope of the branch that leads on to the next point, where two branches of one energy meet at this very angle; the torque when left out. */
  readonly torqueAfter?: number;
}

/** One smooth stretch of the curve: E = c0 + c1 t + c2 t^2 + c3 t^3 with t from 0 to 1 between two points, of which it covers `from` to `to`. */
export interface CurvePiece {
  /** Index of the point at t = 0; the next one (cyclic) is at t = 1. */
  readonly point: number;
  readonly coefficients: readonly [number, number, number, number];
  readonly from: number;
  readonly to: number;
  /** The points whose branch it belongs to. */
  readonly side: 'both' | 'left' | 'right';
}

export interface CurveExtremum {
  readonly kind: 'well' | 'barrier' | 'crossing';
  /** Degrees in [-180, 180). */
  readonly angle: number;
  readonly energy: number;
  /** Second derivative, energy per radian^2; 0 for a crossing. */
  readonly curvature: number;
  /** Index of the point at or before it, and where between it and the next one, 0 to 1. */
  readonly point: number;
  readonly fraction: number;
  readonly side: CurvePiece['side'];
}

export interface ProfileCurve {
  readonly points: readonly CurvePoint[];
  readonly pieces: readonly CurvePiece[];
  /** Wells alternate with barriers and crossings, ascending by angle. */
  readonly extrema: readonly CurveExtremum[];
}

/** A well shallower than this, in the unit of the energies, is rounding. */
const FLAT = 2e-3;

/** The curve through points ascending by angle that go round once. Throws `profile/points` when there are fewer than 3 or they do not ascend. */
export function profileCurve(points: readonly CurvePoint[]): ProfileCurve {
  const last = points.length - 1;
  if (
    points.length < 3 ||
    points.some(({ angle }, n) => n > 0 && !(angle > points[n - 1].angle)) ||
    points[last].angle - points[0].angle >= 360
  )
    throw new TordialError('profile/points', 'a profile needs at least 3 points whose angles ascend within one turn');
  const pieces = points.flatMap((_, n) => piecesAfter(points, n));
  return { points, pieces, extrema: extremaOf(points, pieces) };
}

/** Width (radian) of the interval after point n. */
function widthAfter(points: readonly CurvePoint[], n: number): number {
  return radians(n + 1 < points.length ? points[n + 1].angle - points[n].angle : points[0].angle + 360 - points[n].angle);
}

function hermite(left: BranchEnd, right: BranchEnd, width: number): CurvePiece['coefficients'] {
  const rise = right.energy - left.energy;
  const s0 = width * left.torque;
  const s1 = width * right.torque;
  return [left.energy, s0, 3 * rise - 2 * s0 - s1, s0 + s1 - 2 * rise];
}

function piecesAfter(points: readonly CurvePoint[], n: number): CurvePiece[] {
  const count = points.length;
  const left = { ...points[n], torque: points[n].torqueAfter ?? points[n].torque };
  const right = points[(n + 1) % count];
  const width = widthAfter(points, n);
  if (!left.breakAfter) return [{ point: n, coefficients: hermite(left, right, width), from: 0, to: 1, side: 'both' }];

  const l = hermite(left, left.beyond ?? continued(points, n, width, 1), width);
  const r = hermite(right.before ?? continued(points, (n + 1) % count, width, -1), right, width);
  const at = crossing(l, r);
  return [
    { point: n, coefficients: l, from: 0, to: at, side: 'left' },
    { point: n, coefficients: r, from: at, to: 1, side: 'right' },
  ];
}

/** Where the branch of point n would be after `width` radian: with the curvature it has between n and its neighbour on the other side. */
function continued(points: readonly CurvePoint[], n: number, width: number, direction: 1 | -1): BranchEnd {
  const count = points.length;
  const { energy, torque } = points[n];
  const other = (n - direction + count) % count;
  const interval = direction === 1 ? other : n;
  const curvature = points[interval].breakAfter ? 0 : (direction * (torque - points[other].torque)) / widthAfter(points, interval);
  const step = direction * width;
  return { energy: energy + torque * step + (curvature * step * step) / 2, torque: torque + curvature * step };
}

/** Where the left branch, the lower one at t = 0, comes to lie above the right one. */
function crossing(l: CurvePiece['coefficients'], r: CurvePiece['coefficients']): number {
  const above = (t: number) => polynomial(l, t) - polynomial(r, t);
  if (above(0) >= 0) return 0;
  if (above(1) <= 0) return 1;
  let low = 0;
  let high = 1;
  for (let n = 0; n < 60; n++) {
    const middle = (low + high) / 2;
    if (above(middle) < 0) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

function polynomial([c0, c1, c2, c3]: CurvePiece['coefficients'], t: number): number {
  return c0 + t * (c1 + t * (c2 + t * c3));
}

function derivative([, c1, c2, c3]: CurvePiece['coefficients'], t: number): number {
  return c1 + t * (2 * c2 + 3 * t * c3);
}

/** Energy of the curve at an angle (degrees). */
export function energyAt(curve: ProfileCurve, angle: number): number {
  const { piece, t } = locate(curve, angle);
  return polynomial(piece.coefficients, t);
}

/** Slope of the curve at an angle (degrees), energy per radian. */
export function torqueAt(curve: ProfileCurve, angle: number): number {
  const { piece, t } = locate(curve, angle);
  return derivative(piece.coefficients, t) / widthAfter(curve.points, piece.point);
}

function locate({ points, pieces }: ProfileCurve, angle: number): { piece: CurvePiece; t: number } {
  if (!Number.isFinite(angle)) throw new TordialError('profile/angle', `an angle must be a number of degrees, not ${angle}`);
  const first = points[0].angle;
  const turned = first + ((((angle - first) % 360) + 360) % 360);
  let low = 0;
  let high = points.length;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (points[middle].angle <= turned) low = middle;
    else high = middle;
  }
  const t = radians(turned - points[low].angle) / widthAfter(points, low);
  let at = 0;
  let end = pieces.length;
  while (end - at > 1) {
    const middle = (at + end) >> 1;
    if (pieces[middle].point < low || (pieces[middle].point === low && pieces[middle].from <= t)) at = middle;
    else end = middle;
  }
  return { piece: pieces[at], t };
}

function extremaOf(points: readonly CurvePoint[], pieces: readonly CurvePiece[]): CurveExtremum[] {
  const found: CurveExtremum[] = [];
  const add = (kind: CurveExtremum['kind'], { point, side, coefficients }: CurvePiece, t: number, curvature: number) => {
    const width = widthAfter(points, point);
    const angle = wrapDegrees(points[point].angle + (t * width * 180) / Math.PI);
    found.push({ kind, angle, energy: polynomial(coefficients, t), curvature: curvature / width ** 2, point, fraction: t, side });
  };
  pieces.forEach((piece, n) => {
    const [, c1, c2, c3] = piece.coefficients;
    for (const t of roots(3 * c3, 2 * c2, c1)) {
      if (t < piece.from || t >= piece.to) continue;
      const curvature = 2 * c2 + 6 * c3 * t;
      if (curvature !== 0) add(curvature > 0 ? 'well' : 'barrier', piece, t, curvature);
    }
    // the branch changes within an interval, or at a point where two of one energy meet
    const following = pieces[(n + 1) % pieces.length];
    const within = piece.side === 'left';
    if (!within && points[following.point].torqueAfter === undefined) return;
    const falls = within ? derivative(following.coefficients, piece.to) : derivative(following.coefficients, 0);
    if (derivative(piece.coefficients, piece.to) > 0 && falls < 0) add('crossing', within ? piece : following, within ? piece.to : 0, 0);
  });
  return alternating(found.sort((p, q) => p.angle - q.angle));
}

/** Real roots of a t^2 + b t + c, ascending. */
function roots(a: number, b: number, c: number): number[] {
  if (a === 0) return b === 0 ? [] : [-c / b];
  const square = b * b - 4 * a * c;
  if (square < 0) return [];
  const q = -(b + (b < 0 ? -1 : 1) * Math.sqrt(square)) / 2;
  return (q === 0 ? [0] : [q / a, c / q]).sort((s, t) => s - t);
}

/** Leaves out ripples that are no deeper than rounding, until wells and maxima take turns. */
function alternating(extrema: CurveExtremum[]): CurveExtremum[] {
  const kept = [...extrema];
  const isWell = (n: number) => kept[n].kind === 'well';
  for (;;) {
    let drop: number[] = [];
    for (let n = 0; n < kept.length && kept.length > 1 && drop.length === 0; n++) {
      const m = (n + 1) % kept.length;
      if (isWell(n) === isWell(m)) drop = [kept[n].energy > kept[m].energy === isWell(n) ? n : m];
      else if (Math.abs(kept[n].energy - kept[m].energy) < FLAT) drop = [n, m];
    }
    if (drop.length === 0) return kept;
    for (const n of drop.sort((p, q) => q - p)) kept.splice(n, 1);
  }
}

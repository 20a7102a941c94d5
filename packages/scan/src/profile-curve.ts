/**
 * The curve through a profile, periodic or over a range: cubic Hermite pieces between neighbouring points, from their energies and torques.
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
  /** The curve ends at its first and last point instead of going round. */
  readonly open: boolean;
  /** Wells alternate with barriers and crossings, ascending by angle. */
  readonly extrema: readonly CurveExtremum[];
}

/** A well shallower than this, in the unit of the energies, is rounding. */
const FLAT = 2e-3;
/** Energies that differ by no more than this are the same. */
const ALIKE = 1e-6;
/** A place just after a point, as a part of the interval. */
const NEXT_TO = 1e-3;

/**
 * The curve through points ascending by angle that go round once, or that cover a range (`open`: angles are then those of the points, not
 * brought into one turn). Throws `profile/points` when there are fewer than 3 or they do not ascend.
 */
export function profileCurve(points: readonly CurvePoint[], { open = false } = {}): ProfileCurve {
  const last = points.length - 1;
  if (
    points.length < 3 ||
    points.some(({ angle }, n) => n > 0 && !(angle > points[n - 1].angle)) ||
    points[last].angle - points[0].angle >= 360
  )
    throw new TordialError('profile/points', 'a profile needs at least 3 points whose angles ascend within one turn');
  const pieces = points.flatMap((_, n) => (open && n === last ? [] : piecesAfter(points, n, open)));
  return { points, pieces, open, extrema: alternating(allExtrema({ points, pieces, open }), open) };
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

function piecesAfter(points: readonly CurvePoint[], n: number, open: boolean): CurvePiece[] {
  const count = points.length;
  const left = { ...points[n], torque: points[n].torqueAfter ?? points[n].torque };
  const right = points[(n + 1) % count];
  const width = widthAfter(points, n);
  if (!left.breakAfter) return [{ point: n, coefficients: hermite(left, right, width), from: 0, to: 1, side: 'both' }];

  const l = hermite(left, left.beyond ?? alongside(right, left, right.before, width) ?? continued(points, n, width, 1, open), width);
  const r = hermite(
    right.before ?? alongside(left, right, left.beyond, width) ?? continued(points, (n + 1) % count, width, -1, open),
    right,
    width,
  );
  const at = crossing(l, r);
  return [
    { point: n, coefficients: l, from: 0, to: at, side: 'left' },
    { point: n, coefficients: r, from: at, to: 1, side: 'right' },
  ];
}

/** Branches whose energies differ by less than this across an interval run alongside each other, in the unit of the energies. */
const CLOSE = 0.2;

/**
 * Where the branch of `there` would be at the point `here`, given the branch of `here` at `there`: the two are taken to run alongside each other when
 * they are close. It is not below `here`, which is on the lower one. Undefined when the branch of `here` is unknown or far.
 */
function alongside(here: BranchEnd, there: BranchEnd, hereAtThere: BranchEnd | null, width: number): BranchEnd | undefined {
  if (!hereAtThere) return undefined;
  const gap = there.energy - hereAtThere.energy;
  // branches of different slopes cross and part
  if (Math.abs(gap) + Math.abs(there.torque - hereAtThere.torque) * width > CLOSE) return undefined;
  return { energy: here.energy + Math.max(0, gap), torque: here.torque + there.torque - hereAtThere.torque };
}

/** Where the branch of point n would be after `width` radian: with the curvature it has between n and its neighbour on the other side. */
function continued(points: readonly CurvePoint[], n: number, width: number, direction: 1 | -1, open: boolean): BranchEnd {
  const count = points.length;
  const { energy, torque } = points[n];
  const other = (n - direction + count) % count;
  const interval = direction === 1 ? other : n;
  const alone = points[interval].breakAfter || (open && interval === count - 1);
  const curvature = alone ? 0 : (direction * (torque - points[other].torque)) / widthAfter(points, interval);
  const step = direction * width;
  return { energy: energy + torque * step + (curvature * step * step) / 2, torque: torque + curvature * step };
}

/** Where the left branch, the lower one at t = 0, comes to lie above the right one. */
function crossing(l: CurvePiece['coefficients'], r: CurvePiece['coefficients']): number {
  const above = (t: number) => polynomial(l, t) - polynomial(r, t);
  // branches of one energy at the left point: the one that falls more is the lower one after it
  const begin = Math.abs(above(0)) <= ALIKE && derivative(l, 0) < derivative(r, 0) ? NEXT_TO : 0;
  if (above(begin) >= 0) return 0;
  if (above(1) <= 0) return 1;
  let low = begin;
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

/** Energy of the curve at an angle (degrees). Throws `profile/angle` beyond the ends of an open curve. */
export function energyAt(curve: ProfileCurve, angle: number): number {
  const { piece, t } = locate(curve, angle);
  return polynomial(piece.coefficients, t);
}

/** Slope of the curve at an angle (degrees), energy per radian. Throws as `energyAt`. */
export function torqueAt(curve: ProfileCurve, angle: number): number {
  const { piece, t } = locate(curve, angle);
  return derivative(piece.coefficients, t) / widthAfter(curve.points, piece.point);
}

function locate({ points, pieces, open }: ProfileCurve, angle: number): { piece: CurvePiece; t: number } {
  if (!Number.isFinite(angle)) throw new TordialError('profile/angle', `an angle must be a number of degrees, not ${angle}`);
  const first = points[0].angle;
  const last = points[points.length - 1].angle;
  if (open && !(angle >= first && angle <= last))
    throw new TordialError('profile/angle', `the profile covers ${first} to ${last} degrees, not ${angle}`);
  if (open && angle === last) return { piece: pieces[pieces.length - 1], t: 1 };
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

/** Every extremum, ripples included, ascending by angle. */
export function allExtrema({ points, pieces, open }: Pick<ProfileCurve, 'points' | 'pieces' | 'open'>): CurveExtremum[] {
  const found: CurveExtremum[] = [];
  const add = (kind: CurveExtremum['kind'], { point, side, coefficients }: CurvePiece, t: number, curvature: number) => {
    const width = widthAfter(points, point);
    const reached = points[point].angle + (t * width * 180) / Math.PI;
    const angle = open ? reached : wrapDegrees(reached);
    found.push({ kind, angle, energy: polynomial(coefficients, t), curvature: curvature / width ** 2, point, fraction: t, side });
  };
  pieces.forEach((piece, n) => {
    const [, c1, c2, c3] = piece.coefficients;
    for (const t of roots(3 * c3, 2 * c2, c1)) {
      // a point's own extremum counts even where its branch is taken to end at once
      if (t < piece.from || (t >= piece.to && t !== 0)) continue;
      const curvature = 2 * c2 + 6 * c3 * t;
      if (curvature !== 0) add(curvature > 0 ? 'well' : 'barrier', piece, t, curvature);
    }
    // the branch changes within an interval, or at a point where two of one energy meet
    if (open && n + 1 === pieces.length) return;
    const following = pieces[(n + 1) % pieces.length];
    const within = piece.side === 'left';
    if (!within && points[following.point].torqueAfter === undefined) return;
    const falls = within ? derivative(following.coefficients, piece.to) : derivative(following.coefficients, 0);
    if (derivative(piece.coefficients, piece.to) > 0 && falls < 0) add('crossing', within ? piece : following, within ? piece.to : 0, 0);
  });
  return completed(
    found.sort((p, q) => p.angle - q.angle),
    points,
    open,
  );
}

/**
 * Two wells have a maximum between them and two maxima a well. Where the curve does not show it, because it jumps from branch to branch, the
 * highest or lowest point between the two stands for it.
 */
function completed(extrema: readonly CurveExtremum[], points: readonly CurvePoint[], open: boolean): CurveExtremum[] {
  const missing: CurveExtremum[] = [];
  extrema.forEach((extremum, n) => {
    const m = (n + 1) % extrema.length;
    const other = extrema[m];
    const isWell = extremum.kind === 'well';
    if ((open && m === 0) || isWell !== (other.kind === 'well')) return;
    const wraps = m <= n;
    const between = [...points.keys()].filter((k) => {
      const { angle } = points[k];
      return wraps ? angle > extremum.angle || angle < other.angle : angle > extremum.angle && angle < other.angle;
    });
    const sign = isWell ? 1 : -1;
    const best = between.reduce((p, q) => (sign * points[q].energy > sign * points[p].energy ? q : p), between[0]);
    if (best === undefined || sign * points[best].energy <= Math.max(sign * extremum.energy, sign * other.energy) + FLAT) return;
    missing.push(isWell ? { ...standIn(points, best), kind: 'crossing' } : nearWell(points, best, open));
  });
  return [...extrema, ...missing].sort((p, q) => p.angle - q.angle);
}

function standIn(points: readonly CurvePoint[], point: number): CurveExtremum {
  const { angle, energy } = points[point];
  return { kind: 'well', angle, energy, curvature: 0, point, fraction: 0, side: 'both' };
}

/** A well beside a grid point, on the side that its torque points away from. */
function nearWell(points: readonly CurvePoint[], n: number, open: boolean): CurveExtremum {
  const { torque } = points[n];
  const before = torque > 0;
  const point = before ? (n - 1 + points.length) % points.length : n;
  if (torque === 0 || (open && (before ? n === 0 : n === points.length - 1))) return standIn(points, n);
  const width = widthAfter(points, point);
  return { ...standIn(points, n), point, fraction: before ? 0.9 : 0.1, curvature: Math.abs(torque) / (0.1 * width) };
}

/** Real roots of a t^2 + b t + c, ascending. */
function roots(a: number, b: number, c: number): number[] {
  if (a === 0) return b === 0 ? [] : [-c / b];
  const square = b * b - 4 * a * c;
  if (square < 0) return [];
  const q = -(b + (b < 0 ? -1 : 1) * Math.sqrt(square)) / 2;
  return (q === 0 ? [0] : [q / a, c / q]).sort((s, t) => s - t);
}

/**
 * Leaves out what is no deeper than rounding, shallowest first, until wells and maxima take turns: of two wells with next to nothing between
 * them the lower one stays, and of two alike (mirror images about 0, say) the one at the larger angle.
 */
export function alternating<T extends { readonly kind: CurveExtremum['kind']; readonly energy: number }>(
  extrema: readonly T[],
  open: boolean,
): T[] {
  const kept = [...extrema];
  for (;;) {
    const drop = shallowest(kept, open);
    if (drop.length === 0) return kept;
    for (const n of drop.sort((p, q) => q - p)) kept.splice(n, 1);
  }
}

/** Places of the neighbours that differ least: both if they are well and maximum and differ by rounding, the worse one if they are of a kind. */
function shallowest(extrema: readonly { readonly kind: CurveExtremum['kind']; readonly energy: number }[], open: boolean): number[] {
  let drop: number[] = [];
  let least = FLAT;
  if (extrema.length < 2) return drop;
  extrema.forEach(({ kind, energy }, n) => {
    const m = (n + 1) % extrema.length;
    if (open && m === 0) return;
    const other = extrema[m];
    const isWell = kind === 'well';
    if (isWell === (other.kind === 'well')) {
      if (least < 0) return;
      // a well wants to be low, a maximum high; alike, the first one goes
      const better = isWell ? other.energy - energy : energy - other.energy;
      drop = [better > ALIKE ? m : n];
      least = -1;
    } else if (Math.abs(energy - other.energy) < least - ALIKE) {
      drop = [n, m];
      least = Math.abs(energy - other.energy);
    }
  });
  return drop;
}

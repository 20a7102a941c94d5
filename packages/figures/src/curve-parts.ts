import { type CurvePiece, type ProfileDocument, profileCurve } from '@tordial/scan';
import { coordinate } from './svg.js';

/** A cubic Bezier segment of energy over angle (degrees): its four control points are evenly spaced in the angle, so that it is a cubic in it. */
export interface CurveSegment {
  readonly from: number;
  readonly to: number;
  readonly energies: readonly [number, number, number, number];
}

export interface CurveParts {
  /** Runs over the turn or the range that are smooth within, each of segments that follow on each other; a new one begins where the branch changes. */
  readonly smooth: readonly (readonly CurveSegment[])[];
  /** Where a branch is not known beyond its last point: its estimated continuation to the next branch. */
  readonly estimated: readonly CurveSegment[];
  /** Where the curve goes over from one branch to another. */
  readonly changes: readonly { readonly angle: number; readonly energy: number }[];
}

/** Branches whose curves come this near to each other at the end of an interval meet there, unit of the energies. */
const TOUCHING = 1e-3;

/**
 * The curve of a profile cut for drawing over [-180, 180], or over the range of an `open` one, relative energies. No smooth run goes over a change of branch: each branch ends where
 * it meets the next one, and branches that do not meet are joined by a straight line. Throws what `profileCurve` throws for points that make no
 * curve.
 */
export function curveParts(points: ProfileDocument['points'], { open = false } = {}): CurveParts {
  const { pieces } = profileCurve(points, { open });
  const wrapped = (segment: CurveSegment): CurveSegment[] => (open ? [segment] : withinTurn(segment));
  const zero = points[0].energy - points[0].relativeEnergy;
  const smooth: (CurveSegment & { readonly begins: boolean })[] = [];
  const estimated: CurveSegment[] = [];
  const changes: { angle: number; energy: number }[] = [];
  pieces.forEach((piece, n) => {
    const start = points[piece.point];
    const next = points[(piece.point + 1) % points.length];
    const from = start.angle;
    const to = next.angle > from ? next.angle : next.angle + 360;
    const whole = (one: CurvePiece): CurveSegment => ({ from, to, energies: controls(one, zero) });
    if (piece.side === 'both') smooth.push({ ...whole(piece), begins: false });
    if (piece.side !== 'left') return;

    const other = pieces[n + 1];
    const angle = from + (to - from) * piece.to;
    const energy = segmentEnergy(whole(piece), angle);
    if (Math.abs(energy - segmentEnergy(whole(other), angle)) > TOUCHING) {
      estimated.push(straight(from, start.relativeEnergy, to, next.relativeEnergy));
      return;
    }
    changes.push({ angle: angle > 180 && !open ? angle - 360 : angle, energy });
    if (piece.to > 0) {
      const left = clipped(whole(piece), 0, piece.to);
      if (start.beyond) smooth.push({ ...left, begins: false });
      else estimated.push(left);
    }
    if (other.from < 1) {
      const right = clipped(whole(other), other.from, 1);
      if (next.before) smooth.push({ ...right, begins: true });
      else estimated.push(right);
    }
  });
  const breaks = new Set(changes.map(({ angle }) => angle));
  const runs: CurveSegment[][] = [];
  let reached = Number.NaN;
  for (const { begins, ...segment } of smooth
    .flatMap((one) => wrapped(one).map((part, m) => ({ ...part, begins: one.begins && m === 0 })))
    .sort((p, q) => p.from - q.from)) {
    if (segment.from === reached && !begins && !breaks.has(segment.from)) runs[runs.length - 1].push(segment);
    else runs.push([segment]);
    reached = segment.to;
  }
  return { smooth: runs, estimated: estimated.flatMap(wrapped), changes };
}

/** Energy of a segment at an angle within it. */
export function segmentEnergy({ from, to, energies: [a, b, c, d] }: CurveSegment, angle: number): number {
  const t = (angle - from) / (to - from);
  const s = 1 - t;
  return s * s * s * a + 3 * s * s * t * b + 3 * s * t * t * c + t * t * t * d;
}

/** The path of a run of segments, on given scales (px). */
export function curvePath(run: readonly CurveSegment[], x: (angle: number) => number, y: (energy: number) => number): string {
  const at = (angle: number, energy: number): string => `${coordinate(x(angle))} ${coordinate(y(energy))}`;
  const curves = run.map(({ from, to, energies: [, b, c, d] }) => {
    const third = (to - from) / 3;
    return `C ${at(from + third, b)} ${at(to - third, c)} ${at(to, d)}`;
  });
  return `M ${at(run[0].from, run[0].energies[0])} ${curves.join(' ')}`;
}

/** Power basis to Bezier control points. */
function controls({ coefficients: [c0, c1, c2, c3] }: CurvePiece, zero: number): CurveSegment['energies'] {
  const start = c0 - zero;
  return [start, start + c1 / 3, start + (2 * c1 + c2) / 3, start + c1 + c2 + c3];
}

/** A jump from one branch to another that it never meets. */
function straight(from: number, start: number, to: number, end: number): CurveSegment {
  const third = (end - start) / 3;
  return { from, to, energies: [start, start + third, end - third, end] };
}

/** The part of a segment between two fractions of it. */
function clipped(segment: CurveSegment, from: number, to: number): CurveSegment {
  const head = to < 1 ? split(segment, to)[0] : segment;
  return from > 0 ? split(head, from / to)[1] : head;
}

/** A segment that runs over 180 appears at both edges. */
function withinTurn(segment: CurveSegment): CurveSegment[] {
  if (segment.to <= 180) return [segment];
  if (segment.from >= 180) return [shifted(segment)];
  const [before, after] = split(segment, (180 - segment.from) / (segment.to - segment.from));
  return [{ ...before, to: 180 }, shifted({ ...after, from: 180 })];
}

function shifted(segment: CurveSegment): CurveSegment {
  return { ...segment, from: segment.from - 360, to: segment.to - 360 };
}

/** De Casteljau's subdivision at the fraction t. */
function split({ from, to, energies: [a, b, c, d] }: CurveSegment, t: number): [CurveSegment, CurveSegment] {
  const at = from + t * (to - from);
  const mix = (p: number, q: number): number => p + t * (q - p);
  const [ab, bc, cd] = [mix(a, b), mix(b, c), mix(c, d)];
  const [abc, bcd] = [mix(ab, bc), mix(bc, cd)];
  const middle = mix(abc, bcd);
  return [
    { from, to: at, energies: [a, ab, abc, middle] },
    { from: at, to, energies: [middle, bcd, cd, d] },
  ];
}

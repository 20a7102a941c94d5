import { type CurvePiece, type ProfileDocument, profileCurve } from '@tordial/scan';

/** A cubic Bezier segment of energy over angle (degrees): its four control points are evenly spaced in the angle, so that it is a cubic in it. */
export interface CurveSegment {
  readonly from: number;
  readonly to: number;
  readonly energies: readonly [number, number, number, number];
}

export interface CurveParts {
  /** Smooth runs over [-180, 180], each of segments that follow on each other. */
  readonly smooth: readonly (readonly CurveSegment[])[];
  /** Each branch continued from its last point to where it meets the next one: estimates, not scanned. */
  readonly continued: readonly CurveSegment[];
}

/**
 * The curve of a profile cut for drawing over [-180, 180], relative energies. No smooth run goes over a change of branch; there both branches are
 * continued to where they meet, and those that do not meet are joined by a straight line. Throws what `profileCurve` throws for points that make no
 * curve.
 */
export function curveParts(points: ProfileDocument['points']): CurveParts {
  const { pieces } = profileCurve(points);
  const zero = points[0].energy - points[0].relativeEnergy;
  const smooth: CurveSegment[] = [];
  const continued: CurveSegment[] = [];
  for (const piece of pieces) {
    const start = points[piece.point];
    const next = points[(piece.point + 1) % points.length];
    const from = start.angle;
    const to = next.angle > from ? next.angle : next.angle + 360;
    const segment = clipped({ from, to, energies: controls(piece, zero) }, piece.from, piece.to);
    const meet = piece.side === 'left' ? piece.to > 0 && piece.to < 1 : piece.from > 0 && piece.from < 1;
    if (piece.side === 'both') smooth.push(segment);
    else if (meet) continued.push(segment);
    else if (piece.side === 'left') continued.push(straight(from, start.relativeEnergy, to, next.relativeEnergy));
  }
  const runs: CurveSegment[][] = [];
  let reached = Number.NaN;
  for (const segment of smooth.flatMap(wrapped).sort((p, q) => p.from - q.from)) {
    if (segment.from === reached) runs[runs.length - 1].push(segment);
    else runs.push([segment]);
    reached = segment.to;
  }
  return { smooth: runs, continued: continued.flatMap(wrapped) };
}

/** Energy of a segment at an angle within it. */
export function segmentEnergy({ from, to, energies: [a, b, c, d] }: CurveSegment, angle: number): number {
  const t = (angle - from) / (to - from);
  const s = 1 - t;
  return s * s * s * a + 3 * s * s * t * b + 3 * s * t * t * c + t * t * t * d;
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
function wrapped(segment: CurveSegment): CurveSegment[] {
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

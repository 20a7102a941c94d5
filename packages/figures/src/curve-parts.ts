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
 * The curve of a profile cut for drawing over [-180, 180]. No smooth run goes over a change of branch; there both branches are continued to the
 * crossing that the document gives, else to where the continued curves meet; branches that do not meet are joined by a straight line. Throws what `profileCurve` throws for points that make no curve.
 */
export function curveParts({ points, stationaryPoints }: Pick<ProfileDocument, 'points' | 'stationaryPoints'>): CurveParts {
  const { pieces } = profileCurve(
    points.map(({ relativeEnergy, ...point }) => ({ ...point, energy: relativeEnergy, beyond: null, before: null })),
  );
  const smooth: CurveSegment[] = [];
  const continued: CurveSegment[] = [];
  for (const piece of pieces) {
    const start = points[piece.point].angle;
    const next = points[(piece.point + 1) % points.length];
    const end = next.angle > start ? next.angle : next.angle + 360;
    const segment = clipped({ from: start, to: end, energies: controls(piece) }, piece.from, piece.to);
    if (piece.side === 'both') smooth.push(segment);
    else {
      const crossing = stationaryPoints
        .filter(({ kind }) => kind === 'crossing')
        .map(({ angle, relativeEnergy }) => ({ angle: angle < start ? angle + 360 : angle, energy: relativeEnergy }))
        .find(({ angle }) => angle > start && angle < end);
      const meet = piece.side === 'left' ? piece.to > 0 && piece.to < 1 : piece.from > 0 && piece.from < 1;
      if (!crossing && meet) continued.push(segment);
      else if (!crossing) {
        if (piece.side === 'left') continued.push(straight(start, points[piece.point].relativeEnergy, end, next.relativeEnergy));
      } else if (piece.side === 'left') continued.push(parabola(start, points[piece.point], crossing.angle, crossing.energy));
      else continued.push(parabola(end, next, crossing.angle, crossing.energy));
    }
  }
  const runs: CurveSegment[][] = [];
  let reached = Number.NaN;
  for (const segment of smooth.flatMap(wrapped).sort((p, q) => p.from - q.from)) {
    if (segment.from === reached) runs[runs.length - 1].push(segment);
    else runs.push([segment]);
    reached = segment.to;
  }
  return { smooth: runs, continued: continued.filter(({ from, to }) => to > from).flatMap(wrapped) };
}

/** Energy of a segment at an angle within it. */
export function segmentEnergy({ from, to, energies: [a, b, c, d] }: CurveSegment, angle: number): number {
  const t = (angle - from) / (to - from);
  const s = 1 - t;
  return s * s * s * a + 3 * s * s * t * b + 3 * s * t * t * c + t * t * t * d;
}

/** Power basis to Bezier control points. */
function controls({ coefficients: [c0, c1, c2, c3] }: CurvePiece): CurveSegment['energies'] {
  return [c0, c0 + c1 / 3, c0 + (2 * c1 + c2) / 3, c0 + c1 + c2 + c3];
}

/** A jump from one branch to another that it never meets. */
function straight(from: number, start: number, to: number, end: number): CurveSegment {
  const third = (end - start) / 3;
  return { from, to, energies: [start, start + third, end - third, end] };
}

/** The parabola that leaves a point with its slope and goes through another one, raised to a cubic. */
function parabola(
  start: number,
  point: { readonly relativeEnergy: number; readonly torque: number },
  end: number,
  energy: number,
): CurveSegment {
  const middle = point.relativeEnergy + (point.torque * ((end - start) * Math.PI)) / 360;
  const energies: CurveSegment['energies'] = [
    point.relativeEnergy,
    (point.relativeEnergy + 2 * middle) / 3,
    (energy + 2 * middle) / 3,
    energy,
  ];
  return start < end
    ? { from: start, to: end, energies }
    : { from: end, to: start, energies: [energies[3], energies[2], energies[1], energies[0]] };
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

import type { ProfilePoint } from '@tordial/scan';

/** A cubic Bezier segment of energy over angle (degrees): four control points whose angles are evenly spaced, so that it is a cubic in the angle. */
export interface CurveSegment {
  readonly from: number;
  readonly to: number;
  readonly energies: readonly [number, number, number, number];
}

const RADIANS = Math.PI / 180;

/**
 * The periodic curve through a profile's points over [-180, 180]: cubic Hermite pieces from energies and driving torques, as smooth runs of segments.
 * A new run begins after each point that is marked `breakAfter`, and at -180.
 */
export function curvePieces(points: readonly Pick<ProfilePoint, 'angle' | 'relativeEnergy' | 'torque' | 'breakAfter'>[]): CurveSegment[][] {
  const segments: CurveSegment[] = [];
  points.forEach((point, n) => {
    if (point.breakAfter) return;
    const next = points[(n + 1) % points.length];
    const from = point.angle;
    const to = n + 1 === points.length ? next.angle + 360 : next.angle;
    const third = ((to - from) * RADIANS) / 3;
    const [p, q] = [point.relativeEnergy, next.relativeEnergy];
    const segment: CurveSegment = { from, to, energies: [p, p + point.torque * third, q - next.torque * third, q] };
    if (to <= 180) segments.push(segment);
    else {
      // the segment that runs over the edge appears at both ends
      const [before, after] = split(segment, 180);
      segments.push(before);
      segments.unshift({ ...after, from: -180, to: after.to - 360 });
    }
  });
  const runs: CurveSegment[][] = [];
  let end = Number.NaN;
  for (const segment of segments) {
    if (segment.from === end) runs[runs.length - 1].push(segment);
    else runs.push([segment]);
    end = segment.to;
  }
  return runs;
}

/** De Casteljau's subdivision. */
function split({ from, to, energies: [a, b, c, d] }: CurveSegment, at: number): [CurveSegment, CurveSegment] {
  const t = (at - from) / (to - from);
  const mix = (p: number, q: number): number => p + t * (q - p);
  const [ab, bc, cd] = [mix(a, b), mix(b, c), mix(c, d)];
  const [abc, bcd] = [mix(ab, bc), mix(bc, cd)];
  const middle = mix(abc, bcd);
  return [
    { from, to: at, energies: [a, ab, abc, middle] },
    { from: at, to, energies: [middle, bcd, cd, d] },
  ];
}

/** Energy of a segment at an angle within it. */
export function segmentEnergy({ from, to, energies: [a, b, c, d] }: CurveSegment, angle: number): number {
  const t = (angle - from) / (to - from);
  const s = 1 - t;
  return s * s * s * a + 3 * s * s * t * b + 3 * s * t * t * c + t * t * t * d;
}

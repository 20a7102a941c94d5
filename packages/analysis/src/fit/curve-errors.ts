/** How far a curve is from the reference it should follow: everywhere, and at its wells and barriers. */
import { wrapDegrees } from '@tordial/geometry';

/** Energy at an angle (degrees). */
export interface CurveSample {
  readonly angle: number;
  readonly energy: number;
}

export interface ExtremumError {
  readonly kind: 'well' | 'barrier';
  /** Of the reference: degrees, and its energy above the reference's lowest well. */
  readonly angle: number;
  readonly energy: number;
  /** The curve's own: null where it has none of the kind within 45 degrees. */
  readonly found: { readonly angle: number; readonly energy: number } | null;
}

export interface CurveErrors {
  /** Root-mean-square and largest difference, both curves shifted to the same mean. */
  readonly rmsd: number;
  readonly largest: number;
  readonly largestAt: number;
  /** Of the differences of found wells and barriers, each above its own curve's lowest well; null without any. */
  readonly meanWellError: number | null;
  readonly meanBarrierError: number | null;
  readonly extrema: readonly ExtremumError[];
}

const NEAR = 45;
/** Wells shallower than this, kcal/mol, are rounding. */
const FLAT = 0.02;

/** Compares a curve with a reference at the same angles (any order, one energy unit). */
export function curveErrors(reference: readonly CurveSample[], curve: readonly CurveSample[]): CurveErrors {
  const count = reference.length;
  const shift = reference.reduce((sum, { energy }, i) => sum + curve[i].energy - energy, 0) / count;
  const differences = reference.map(({ energy }, i) => curve[i].energy - energy - shift);
  const worst = differences.reduce((best, value, i) => (Math.abs(value) > Math.abs(differences[best]) ? i : best), 0);
  const theirs = extremaOf(curve);
  const extrema = extremaOf(reference).map((extremum): ExtremumError => {
    const near = theirs
      .filter(({ kind, angle }) => kind === extremum.kind && Math.abs(wrapDegrees(angle - extremum.angle)) <= NEAR)
      .sort((p, q) => Math.abs(wrapDegrees(p.angle - extremum.angle)) - Math.abs(wrapDegrees(q.angle - extremum.angle)))[0];
    return { ...extremum, found: near ? { angle: near.angle, energy: near.energy } : null };
  });
  const mean = (kind: 'well' | 'barrier'): number | null => {
    const errors = extrema.flatMap((e) => (e.kind === kind && e.found ? [Math.abs(e.found.energy - e.energy)] : []));
    return errors.length > 0 ? errors.reduce((sum, value) => sum + value, 0) / errors.length : null;
  };
  return {
    rmsd: Math.sqrt(differences.reduce((sum, value) => sum + value * value, 0) / count),
    largest: Math.abs(differences[worst]),
    largestAt: reference[worst].angle,
    meanWellError: mean('well'),
    meanBarrierError: mean('barrier'),
    extrema,
  };
}

/**
 * Wells and barriers of sampled energies, each refined by the parabola through three neighbouring points, energies above the lowest well. A half turn from
 * 0 to 180 degrees counts as the half of a symmetric whole; any other open range has no extrema at its ends.
 */
export function extremaOf(samples: readonly CurveSample[]): { kind: 'well' | 'barrier'; angle: number; energy: number }[] {
  const points = wholeTurn(samples);
  const count = points.length;
  if (count < 3) return [];
  const found: { kind: 'well' | 'barrier'; angle: number; energy: number }[] = [];
  points.forEach((point, i) => {
    const [before, after] = [points[(i + count - 1) % count], points[(i + 1) % count]];
    const back = (((point.angle - before.angle) % 360) + 360) % 360;
    const ahead = (((after.angle - point.angle) % 360) + 360) % 360;
    if (back > 90 || ahead > 90) return;
    const [fall, rise] = [point.energy - before.energy, after.energy - point.energy];
    const isWell = fall < 0 && rise >= 0;
    if (!isWell && !(fall > 0 && rise <= 0)) return;
    // parabola through the three: slope and curvature at the middle one, per degree
    const slope = ((rise / ahead) * back + (fall / back) * ahead) / (back + ahead);
    const curvature = (2 * (rise / ahead - fall / back)) / (back + ahead);
    const step = curvature === 0 ? 0 : -slope / curvature;
    found.push({ kind: isWell ? 'well' : 'barrier', angle: wrapDegrees(point.angle + step), energy: point.energy + (slope * step) / 2 });
  });
  const kept = withoutRipples(found);
  const lowest = Math.min(...kept.filter(({ kind }) => kind === 'well').map(({ energy }) => energy), ...points.map(({ energy }) => energy));
  return kept.map((extremum) => ({ ...extremum, energy: extremum.energy - lowest }));
}

function wholeTurn(samples: readonly CurveSample[]): CurveSample[] {
  const wrapped = samples.map(({ angle, energy }) => ({ angle: wrapDegrees(angle), energy }));
  const angles = samples.map(({ angle }) => Math.abs(angle === -180 ? 180 : angle));
  const half =
    Math.min(...angles) < 1e-6 &&
    Math.max(...angles) > 180 - 1e-6 &&
    new Set(wrapped.map(({ angle }) => (angle === -180 ? 0 : Math.sign(angle)))).size === 2;
  const mirrored = half
    ? wrapped.filter(({ angle }) => angle !== -180 && angle !== 0).map(({ angle, energy }) => ({ angle: -angle, energy }))
    : [];
  const sorted = [...wrapped, ...mirrored].sort((p, q) => p.angle - q.angle);
  return sorted.filter(({ angle }, i) => i === 0 || angle - sorted[i - 1].angle > 1e-6);
}

function withoutRipples<T extends { kind: 'well' | 'barrier'; energy: number }>(extrema: readonly T[]): T[] {
  const kept = [...extrema];
  for (;;) {
    const at = kept.findIndex((extremum, i) => {
      const next = kept[(i + 1) % kept.length];
      return kept.length > 2 && extremum.kind !== next.kind && Math.abs(extremum.energy - next.energy) < FLAT;
    });
    if (at < 0) return kept;
    kept.splice(at === kept.length - 1 ? 0 : at + 1, 1);
    kept.splice(Math.min(at, kept.length - 1), 1);
  }
}

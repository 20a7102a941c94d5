import { describe, expect, it } from 'vitest';
import { curveParts, segmentEnergy } from './curve-parts.js';

const UNUSED = { energy: 0, converged: true, residual: 0, coordinates: [] };

/** cos(2 phi) and its slope: the cubic Hermite error over a step h is at most h^4 max|f''''| / 384. */
function points(step: number, start: number, breaks: readonly number[] = []) {
  return Array.from({ length: 360 / step }, (_, n) => {
    const angle = start + n * step;
    const phi = (angle * Math.PI) / 180;
    return { ...UNUSED, angle, relativeEnergy: Math.cos(2 * phi), torque: -2 * Math.sin(2 * phi), breakAfter: breaks.includes(n) };
  });
}

describe('curveParts', () => {
  it.each([-180, -175, -173.5])('covers [-180, 180] in one run and follows a known curve (first point at %s)', (start) => {
    const step = 10;
    const { smooth, continued } = curveParts({ points: points(step, start), stationaryPoints: [] });
    expect(smooth).toHaveLength(1);
    expect(continued).toHaveLength(0);
    const [run] = smooth;
    expect(run[0].from).toBe(-180);
    expect(run[run.length - 1].to).toBe(180);
    const bound = ((step * Math.PI) / 180) ** 4 * (16 / 384);
    for (const segment of run)
      for (let t = 0; t <= 1; t += 0.125) {
        const angle = segment.from + t * (segment.to - segment.from);
        expect(Math.abs(segmentEnergy(segment, angle) - Math.cos((2 * angle * Math.PI) / 180))).toBeLessThanOrEqual(bound * 1.0001);
      }
  });

  it('draws nothing smooth across a change of branch', () => {
    expect(ranges(curveParts({ points: points(10, -180, [5, 20]), stationaryPoints: [] }).smooth)).toEqual([
      [-180, -130],
      [-120, 20],
      [30, 180],
    ]);
    expect(ranges(curveParts({ points: points(10, -175, [35]), stationaryPoints: [] }).smooth)).toEqual([[-175, 175]]);
  });

  it('continues both branches to the crossing that the document gives, with the slopes of their last points', () => {
    const all = points(10, -175, [8, 35]);
    const crossing = (angle: number, relativeEnergy: number) => ({
      kind: 'crossing' as const,
      angle,
      energy: 0,
      relativeEnergy,
      coordinates: [],
    });
    const { continued } = curveParts({ points: all, stationaryPoints: [crossing(-178, 1.4), crossing(-88, -0.5)] });
    const [left, right] = continued.filter(({ from }) => from > -100 && from < -80);
    expect([left.from, left.to, right.from, right.to]).toEqual([-95, -88, -88, -85]);
    expect(segmentEnergy(left, -88)).toBeCloseTo(-0.5, 12);
    expect(segmentEnergy(right, -88)).toBeCloseTo(-0.5, 12);
    const slope = (segmentEnergy(right, -85) - segmentEnergy(right, -85 - 1e-6)) / ((1e-6 * Math.PI) / 180);
    expect(slope).toBeCloseTo(all[9].torque, 4);
    // over the edge: from 175 to the crossing at 182, which is -178, and back to 185
    expect(continued.filter(({ from, to }) => from >= 175 || to <= -175).map(({ from, to }) => [from, to])).toEqual([
      [175, 180],
      [-180, -178],
      [-178, -175],
    ]);
  });

  it('continues branches to where they meet when no crossing is given', () => {
    // two branches of slope +1 and -1 about -90, one kcal/mol/radian: they meet half-way
    const kinked = points(10, -175).map((point) => {
      const energy = Math.max(0, 1 - Math.abs(point.angle + 90) / 30);
      return {
        ...point,
        relativeEnergy: energy,
        torque: energy > 0 ? -Math.sign(point.angle + 90) * (6 / Math.PI) : 0,
        breakAfter: point.angle === -95,
      };
    });
    const { continued } = curveParts({ points: kinked, stationaryPoints: [] });
    expect(continued).toHaveLength(2);
    expect(continued[0].to).toBeCloseTo(-90, 6);
    expect(continued[1].from).toBeCloseTo(-90, 6);
    expect(segmentEnergy(continued[0], continued[0].to)).toBeCloseTo(1, 6);
  });
});

it('joins branches that never meet by a straight line', () => {
  const jump = points(10, -180).map((point) => ({
    ...point,
    relativeEnergy: point.angle < 0 ? 0 : 2,
    torque: 0,
    breakAfter: point.angle === -10 || point.angle === 170,
  }));
  const { continued } = curveParts({ points: jump, stationaryPoints: [] });
  expect(continued.map(({ from, to, energies }) => [from, to, energies[0], energies[3]])).toEqual([
    [-10, 0, 0, 2],
    [170, 180, 2, 0],
  ]);
});

function ranges(runs: readonly (readonly { from: number; to: number }[])[]): [number, number][] {
  return runs.map((run) => [run[0].from, run[run.length - 1].to]);
}

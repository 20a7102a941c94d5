import { describe, expect, it } from 'vitest';
import { curveParts, segmentEnergy } from './curve-parts.js';

/** Absolute energies are these above the relative ones. */
const ZERO = 40;
const UNUSED = { converged: true, residual: 0, coordinates: [], beyond: null, before: null };

/** cos(2 phi) and its slope: the cubic Hermite error over a step h is at most h^4 max|f''''| / 384. */
function points(step: number, start: number, breaks: readonly number[] = []) {
  return Array.from({ length: 360 / step }, (_, n) => {
    const angle = start + n * step;
    const phi = (angle * Math.PI) / 180;
    return {
      ...UNUSED,
      angle,
      energy: ZERO + Math.cos(2 * phi),
      relativeEnergy: Math.cos(2 * phi),
      torque: -2 * Math.sin(2 * phi),
      breakAfter: breaks.includes(n),
    };
  });
}

describe('curveParts', () => {
  it.each([-180, -175, -173.5])('covers [-180, 180] in one run and follows a known curve (first point at %s)', (start) => {
    const step = 10;
    const { smooth, estimated } = curveParts(points(step, start));
    expect(smooth).toHaveLength(1);
    expect(estimated).toHaveLength(0);
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
    expect(ranges(curveParts(points(10, -180, [5, 20])).smooth)).toEqual([
      [-180, -130],
      [-120, 20],
      [30, 180],
    ]);
    expect(ranges(curveParts(points(10, -175, [35])).smooth)).toEqual([[-175, 175]]);
  });

  it('follows both branches to their crossing where the scan knows them beyond the break', () => {
    // two parabolas, 0.01 (phi + 100)^2 and 0.01 (phi + 80)^2 in degrees, cross at -90; the first holds up to -95, the second from -85
    const slope = (angle: number, centre: number) => (0.02 * (angle - centre) * 180) / Math.PI;
    const branch = (angle: number, centre: number) => ({ energy: ZERO + 0.01 * (angle - centre) ** 2, torque: slope(angle, centre) });
    const crossing = points(10, -175).map((point) => {
      const centre = point.angle < -90 ? -100 : -80;
      const energy = 0.01 * (point.angle - centre) ** 2;
      return {
        ...point,
        energy: ZERO + energy,
        relativeEnergy: energy,
        torque: slope(point.angle, centre),
        breakAfter: point.angle === -95,
        beyond: point.angle === -95 ? branch(-85, -100) : null,
        before: point.angle === -85 ? branch(-95, -80) : null,
      };
    });
    const { smooth, estimated, changes } = curveParts(crossing);
    expect(estimated).toEqual([]);
    expect(changes).toHaveLength(1);
    expect(changes[0].angle).toBeCloseTo(-90, 9);
    expect(changes[0].energy).toBeCloseTo(1, 9);
    expect(smooth).toHaveLength(2);
    const left = smooth[0][smooth[0].length - 1];
    const right = smooth[1][0];
    expect(left.from).toBe(-95);
    expect(left.to).toBeCloseTo(-90, 9);
    expect(right.from).toBeCloseTo(-90, 9);
    expect(right.to).toBe(-85);
    for (const angle of [-94, -92, -90]) expect(segmentEnergy(left, angle)).toBeCloseTo(0.01 * (angle + 100) ** 2, 9);
    for (const angle of [-90, -88, -86]) expect(segmentEnergy(right, angle)).toBeCloseTo(0.01 * (angle + 80) ** 2, 9);
  });

  it('continues branches to where they meet when no crossing is given', () => {
    // two branches of slope +1 and -1 about -90, one kcal/mol/radian: they meet half-way
    const kinked = points(10, -175).map((point) => {
      const energy = Math.max(0, 1 - Math.abs(point.angle + 90) / 30);
      return {
        ...point,
        energy: ZERO + energy,
        relativeEnergy: energy,
        torque: energy > 0 ? -Math.sign(point.angle + 90) * (6 / Math.PI) : 0,
        breakAfter: point.angle === -95,
      };
    });
    const { smooth, estimated, changes } = curveParts(kinked);
    expect(ranges(smooth)).toEqual([
      [-180, -95],
      [-85, 180],
    ]);
    expect(changes).toHaveLength(1);
    expect(estimated).toHaveLength(2);
    expect(estimated[0].to).toBeCloseTo(-90, 6);
    expect(estimated[1].from).toBeCloseTo(-90, 6);
    expect(segmentEnergy(estimated[0], estimated[0].to)).toBeCloseTo(1, 6);
  });
});

it('joins branches that never meet by a straight line', () => {
  const jump = points(10, -180).map((point) => ({
    ...point,
    energy: point.angle < 0 ? ZERO : ZERO + 2,
    relativeEnergy: point.angle < 0 ? 0 : 2,
    torque: 0,
    breakAfter: point.angle === -10 || point.angle === 170,
  }));
  const { estimated, changes } = curveParts(jump);
  expect(changes).toEqual([]);
  expect(estimated.map(({ from, to, energies }) => [from, to, energies[0], energies[3]])).toEqual([
    [-10, 0, 0, 2],
    [170, 180, 2, 0],
  ]);
});

function ranges(runs: readonly (readonly { from: number; to: number }[])[]): [number, number][] {
  return runs.map((run) => [run[0].from, run[run.length - 1].to]);
}

it('keeps an open curve open: one run from its first to its last point, also beyond 180', () => {
  for (const shift of [0, 240]) {
    const range = points(10, -180)
      .slice(6, 19)
      .map((point) => ({ ...point, angle: point.angle + shift }));
    const { smooth, estimated, changes } = curveParts(range, { open: true });
    expect([smooth.length, estimated.length, changes.length]).toEqual([1, 0, 0]);
    expect([smooth[0][0].from, smooth[0][11].to]).toEqual([-120 + shift, 0 + shift]);
    expect(smooth[0]).toHaveLength(12);
  }
});

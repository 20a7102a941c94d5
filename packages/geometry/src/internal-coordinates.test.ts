import { describe, expect, it } from 'vitest';
import { angle, degrees, distance, radians, torsion, torsionGradient, wrapDegrees, wrapRadians } from './internal-coordinates.js';

/** Front atom at 12 o'clock, rear atom at `clock` degrees clockwise from it, seen from j (nearer the viewer) to k. */
function newman(clock: number): Float64Array {
  // the viewer looks along +z with +y up, so that right is z cross y = -x
  const a = radians(clock);
  const up = [0, 1, 0];
  const right = [-1, 0, 0];
  const rear = [0, 1, 2].map((n) => Math.cos(a) * up[n] + Math.sin(a) * right[n]);
  return Float64Array.of(0, 1, -0.4, 0, 0, 0, 0, 0, 1.5, rear[0], rear[1], 1.9);
}

describe('torsion angle', () => {
  // sign rule: IUPAC, Basic terminology of stereochemistry (1996), "torsion angle": clockwise from front to rear is positive
  it.each([0, 30, 60, 90, 120, 179.9999, -0.0001, -60, -120, -179])('is %d degrees for a rear bond turned so much clockwise', (clock) => {
    expect(degrees(torsion(newman(clock), 0, 1, 2, 3))).toBeCloseTo(clock, 9);
  });
  it('is the same read from the other end, and changes sign in the mirror', () => {
    const x = newman(47);
    expect(torsion(x, 3, 2, 1, 0)).toBeCloseTo(torsion(x, 0, 1, 2, 3), 14);
    const mirrored = x.map((value, n) => (n % 3 === 0 ? -value : value));
    expect(torsion(mirrored, 0, 1, 2, 3)).toBeCloseTo(-radians(47), 14);
  });
  it('takes pi, never -pi, and never -0', () => {
    const flat = Float64Array.of(0, 1, 0, 0, 0, 0, 0, 0, 1, -0, -1, 1);
    expect(torsion(flat, 0, 1, 2, 3)).toBe(Math.PI);
    expect(Object.is(torsion(Float64Array.of(0, 1, 0, 0, 0, 0, 0, 0, 1, -0, 1, 1), 0, 1, 2, 3), -0)).toBe(false);
  });
  it('of hydrogen peroxide from its published r0 geometry is 111.5 degrees', () => {
    // r(OO) 1.475, r(OH) 0.950, angle 94.8, torsion 111.5: Redington, Olson and Cross, J. Chem. Phys. 36, 1311 (1962), from memory
    const theta = radians(94.8);
    const phi = radians(111.5);
    const x = Float64Array.of(
      0.95 * Math.sin(theta),
      0,
      0.95 * Math.cos(theta),
      0,
      0,
      0,
      0,
      0,
      1.475,
      0.95 * Math.sin(theta) * Math.cos(phi),
      0.95 * Math.sin(theta) * Math.sin(phi),
      1.475 - 0.95 * Math.cos(theta),
    );
    expect(degrees(torsion(x, 0, 1, 2, 3))).toBeCloseTo(111.5, 10);
    expect(distance(x, 1, 2)).toBeCloseTo(1.475, 12);
    expect(degrees(angle(x, 1, 2, 3))).toBeCloseTo(94.8, 10);
  });
  it('stays finite where three atoms lie on a line', () => {
    const x = Float64Array.of(0, 0, -1, 0, 0, 0, 0, 0, 1, 1, 0, 2);
    const out = new Float64Array(12).fill(Number.NaN);
    torsionGradient(x, 0, 1, 2, 3, out);
    expect(torsion(x, 0, 1, 2, 3)).toBe(0);
    expect([...out.slice(0, 3)].every((value) => value === 0)).toBe(true);
    expect(out.every(Number.isFinite)).toBe(true);
    torsionGradient(new Float64Array(12), 0, 1, 2, 3, out);
    expect(out.every((value) => value === 0)).toBe(true);
  });
});

describe('torsion gradient', () => {
  const step = 1e-5;
  const turned = (clock: number) => newman(clock).map((value, n) => value + 0.13 * Math.sin(7 * n + 1));
  it.each([0, 1e-7, 33, 90, 150, 180, -75, -179.99999])('equals central differences of the angle at about %d degrees', (clock) => {
    for (const x of [newman(clock), turned(clock)]) {
      const gradient = new Float64Array(12);
      torsionGradient(x, 0, 1, 2, 3, gradient);
      for (let n = 0; n < 12; n++) {
        const ahead = x.slice();
        const behind = x.slice();
        ahead[n] += step;
        behind[n] -= step;
        const slope = wrapRadians(torsion(ahead, 0, 1, 2, 3) - torsion(behind, 0, 1, 2, 3)) / (2 * step);
        expect(gradient[n]).toBeCloseTo(slope, 7);
      }
    }
  });
  it('neither moves nor turns the whole', () => {
    const x = turned(70);
    const g = new Float64Array(12);
    torsionGradient(x, 0, 1, 2, 3, g);
    for (let k = 0; k < 3; k++) {
      expect(g[k] + g[3 + k] + g[6 + k] + g[9 + k]).toBeCloseTo(0, 13);
      const [p, q] = [(k + 1) % 3, (k + 2) % 3];
      let moment = 0;
      for (let i = 0; i < 12; i += 3) moment += x[i + p] * g[i + q] - x[i + q] * g[i + p];
      expect(moment).toBeCloseTo(0, 13);
    }
  });
});

describe('angles', () => {
  it('are accurate at 0 and 180 degrees, where an arc cosine is not', () => {
    const bent = (a: number) => Float64Array.of(1, 0, 0, 0, 0, 0, 2 * Math.cos(a), 2 * Math.sin(a), 0);
    for (const a of [1e-9, 0.5, Math.PI - 1e-9]) expect(Math.abs(angle(bent(a), 0, 1, 2) - a)).toBeLessThan(1e-15);
  });
  it('wrap to half-open ranges', () => {
    expect([180, -180, 540, 181, -181, 0, 720, 359.5].map(wrapDegrees)).toEqual([-180, -180, -180, -179, 179, 0, 0, -0.5]);
    expect(wrapDegrees(-180 - 1e-14)).toBeLessThan(180);
    expect(wrapRadians(-Math.PI)).toBe(Math.PI);
    expect(wrapRadians(Math.PI)).toBe(Math.PI);
    expect(wrapRadians(3 * Math.PI)).toBeCloseTo(Math.PI, 14);
    expect(wrapRadians(4)).toBeCloseTo(4 - 2 * Math.PI, 14);
    expect(Object.is(wrapRadians(-0), 0)).toBe(true);
  });
});

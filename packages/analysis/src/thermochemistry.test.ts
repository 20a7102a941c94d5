import { radians } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { hinderedRotor } from './hindered-rotor/hindered-rotor.js';
import { constantSeries, seriesOfBarriers } from './hindered-rotor/periodic-series.js';
import {
  eastRadomMoment,
  inertia,
  kineticMoment,
  pathTangent,
  pitzerGwinnMoment,
  rigidTangent,
  rotationalConstant,
} from './hindered-rotor/reduced-moment.js';
import { rigidRotorHarmonicOscillator } from './rrho.js';
import { externalSymmetry } from './symmetry-number.js';
import { modeAlong, vibrations, zeroPointEnergy } from './vibrations.js';

const [H, C, N, O] = [1.008, 12.011, 14.007, 15.999];
const T = 298.15;

/** X3Y-YX3 of D3d or of any torsion angle: C at 0 and 1, then three H on each; r in angstrom, angle H-C-C in degrees. */
function ethane(torsion = 60, rCC = 1.535, rCH = 1.094, hcc = 111.2): Float64Array {
  const x = [0, 0, 0, 0, 0, rCC];
  const out = rCH * Math.sin(radians(hcc));
  const along = -rCH * Math.cos(radians(hcc));
  for (const k of [0, 120, 240]) x.push(out * Math.cos(radians(k)), out * Math.sin(radians(k)), -along);
  for (const k of [0, 120, 240]) x.push(out * Math.cos(radians(k + torsion)), out * Math.sin(radians(k + torsion)), rCC + along);
  return Float64Array.from(x);
}
const ETHANE_MASSES = [C, C, H, H, H, H, H, H];
const ETHANE_NUMBERS = [6, 6, 1, 1, 1, 1, 1, 1];
// T. Shimanouchi, Tables of Molecular Vibrational Frequencies, NSRDS-NBS 39 (1972), from memory; the torsion is the first one
const ETHANE_FREQUENCIES = [289, 2954, 1388, 995, 2896, 1379, 2969, 2969, 1468, 1468, 1190, 1190, 2985, 2985, 1469, 1469, 822, 822];

describe('external symmetry numbers (Herzberg 1945, table of point groups)', () => {
  it.each([
    ['ethane D3d', ethane(60), ETHANE_NUMBERS, 6, false],
    ['ethane D3h', ethane(0), ETHANE_NUMBERS, 6, false],
    ['ethane D3', ethane(35), ETHANE_NUMBERS, 6, true],
    ['carbon dioxide Dinfh', Float64Array.of(0, 0, 0, 0, 0, 1.16, 0, 0, -1.16), [6, 8, 8], 2, false],
    ['hydrogen cyanide Cinfv', Float64Array.of(0, 0, 0, 0, 0, 1.16, 0, 0, -1.06), [6, 7, 1], 1, false],
    ['methane Td', Float64Array.of(0, 0, 0, 0.6, 0.6, 0.6, -0.6, -0.6, 0.6, -0.6, 0.6, -0.6, 0.6, -0.6, -0.6), [6, 1, 1, 1, 1], 12, false],
    ['water C2v', Float64Array.of(0, 0, 0, 0.76, 0, 0.59, -0.76, 0, 0.59), [8, 1, 1], 2, false],
    ['bent HOF Cs', Float64Array.of(0, 0, 0, 0.9, 0, 0.2, -0.5, 0, 1.3), [8, 1, 9], 1, false],
    [
      'benzene D6h',
      Float64Array.from(
        [1.39, 2.48].flatMap((r) => [0, 60, 120, 180, 240, 300].flatMap((k) => [r * Math.cos(radians(k)), r * Math.sin(radians(k)), 0])),
      ),
      [6, 6, 6, 6, 6, 6, 1, 1, 1, 1, 1, 1],
      12,
      false,
    ],
  ])('%s', (_, x, numbers, symmetryNumber, chiral) => {
    expect(externalSymmetry(x, numbers)).toEqual({ symmetryNumber, chiral });
  });
});

describe('vibrations', () => {
  it('of a diatomic are sqrt(k / mu) / (2 pi c): hydrogen chloride 2991 cm-1 from 5.163 mdyn/angstrom (Herzberg, from memory)', () => {
    const k = 5.163 * 143.9325;
    const hessian = new Float64Array(36);
    hessian[14] = k;
    hessian[35] = k;
    hessian[17] = -k;
    hessian[32] = -k;
    const { frequencies } = vibrations(hessian, Float64Array.of(0, 0, 0, 0, 0, 1.2746), [1.00782503, 34.96885268]);
    expect(frequencies.length).toBe(1);
    expect(Math.abs(frequencies[0] - 2991)).toBeLessThan(1);
    expect(zeroPointEnergy(frequencies) * 349.755).toBeCloseTo(frequencies[0] / 2, 1);
  });

  it('of a linear triatomic follow its closed forms, with 4 modes: sqrt(k/m), sqrt(k (1/m + 2/M)) and the bend', () => {
    // stretch k for each bond along z, bend b on the angle: forces d theta = (x1 - 2 x0 + x2) / r
    const k = 2000;
    const b = 100;
    const r = 1.16;
    const hessian = new Float64Array(81);
    const add = (vector: number[], force: number): void => {
      for (let i = 0; i < 9; i++) for (let j = 0; j < 9; j++) hessian[9 * i + j] += force * vector[i] * vector[j];
    };
    add([0, 0, -1, 0, 0, 1, 0, 0, 0], k);
    add([0, 0, 1, 0, 0, 0, 0, 0, -1], k);
    add([-2, 0, 0, 1, 0, 0, 1, 0, 0], b / r ** 2);
    add([0, -2, 0, 0, 1, 0, 0, 1, 0], b / r ** 2);
    const { frequencies } = vibrations(hessian, Float64Array.of(0, 0, 0, 0, 0, r, 0, 0, -r), [C, O, O]);
    const wave = (lambda: number): number => 108.5914 * Math.sqrt(lambda);
    const bend = wave((b / r ** 2) * (2 / O + 4 / C));
    const expected = [bend, bend, wave(k / O), wave(k * (1 / O + 2 / C))].sort((p, q) => p - q);
    expect(frequencies.length).toBe(4);
    expected.forEach((value, n) => {
      expect(frequencies[n]).toBeCloseTo(value, 2);
    });
  });

  it('show an imaginary frequency as negative, find the torsion by its motion, and refuse a Hessian that is none', () => {
    const x = ethane();
    // curvature along the mass-weighted torsion alone, negative: everything else flat
    const tangent = rigidTangent(x, [0, 1], [1, 5, 6, 7]);
    const hessian = new Float64Array(24 * 24);
    const weights = Float64Array.from({ length: 24 }, (_, i) => ETHANE_MASSES[Math.floor(i / 3)]);
    for (let i = 0; i < 24; i++) for (let j = 0; j < 24; j++) hessian[24 * i + j] = -5 * tangent[i] * weights[i] * tangent[j] * weights[j];
    const result = vibrations(hessian, x, ETHANE_MASSES);
    expect(result.frequencies.length).toBe(18);
    expect(result.frequencies[0]).toBeLessThan(-50);
    expect(result.frequencies.slice(1).every((nu) => Math.abs(nu) < 0.5)).toBe(true);
    expect(modeAlong(result, x, ETHANE_MASSES, tangent)).toEqual({ mode: 0, overlap: expect.closeTo(1, 6) });
    expect(() => vibrations(new Float64Array(9), x, ETHANE_MASSES)).toThrow(/576 are needed/);
    hessian[1] += 100;
    expect(() => vibrations(hessian, x, ETHANE_MASSES)).toThrow(/not symmetric/);
  });
});

// what the tolerances leave is centrifugal stretching, vibration-rotation coupling and, for water, the quantum correction of rotation
describe('ideal-gas entropies at 298.15 K and 1 bar (CODATA key values, Cox, Wagman, Medvedev 1989, from memory)', () => {
  it.each([
    ['argon', Float64Array.of(0, 0, 0), [39.95], [], 1, 154.846, 0.01],
    ['nitrogen', Float64Array.of(0, 0, 0, 0, 0, 1.0977), [N, N], [2330], 2, 191.609, 0.06],
    ['carbon dioxide', Float64Array.of(0, 0, 0, 0, 0, 1.1621, 0, 0, -1.1621), [C, O, O], [667.4, 667.4, 1333, 2349], 2, 213.785, 0.1],
    ['water', Float64Array.of(0, 0, 0, 0.7575, 0, 0.5871, -0.7575, 0, 0.5871), [O, H, H], [1595, 3657, 3756], 2, 188.835, 0.2],
  ])('%s', (_, coordinates, masses, frequencies, symmetryNumber, entropy, tolerance) => {
    const result = rigidRotorHarmonicOscillator({ coordinates, masses, frequencies, symmetryNumber }, T);
    expect(Math.abs(result.entropy - entropy)).toBeLessThan(tolerance);
  });

  it('obeys its own closed forms: monatomic Cp = 5R/2, H = 5RT/2, G = H - TS, and pressure by -R ln p', () => {
    const argon = { coordinates: Float64Array.of(0, 0, 0), masses: [39.95], frequencies: [], symmetryNumber: 1 };
    const result = rigidRotorHarmonicOscillator(argon, T);
    expect(result.heatCapacity).toBeCloseTo(20.7862, 4);
    expect(result.enthalpy * 4.184).toBeCloseTo(6.197, 3);
    expect(result.gibbsCorrection).toBeCloseTo(result.enthalpy - (T * result.entropy) / 4184, 10);
    expect(rigidRotorHarmonicOscillator(argon, T, 1e6).entropy - result.entropy).toBeCloseTo(-8.314462618 * Math.log(10), 8);
  });

  it('refuses imaginary frequencies, temperatures of zero and pressures of none', () => {
    const water = {
      coordinates: Float64Array.of(0, 0, 0, 0.76, 0, 0.59, -0.76, 0, 0.59),
      masses: [O, H, H],
      frequencies: [-200, 3657, 3756],
      symmetryNumber: 2,
    };
    expect(() => rigidRotorHarmonicOscillator(water, T)).toThrow(/imaginary/);
    expect(() => rigidRotorHarmonicOscillator(water, 0)).toThrow(/above 0 K/);
    expect(() => rigidRotorHarmonicOscillator(water, T, 0)).toThrow(/pressure/);
  });
});

describe('ethane', () => {
  const sides = [
    [0, 2, 3, 4],
    [1, 5, 6, 7],
  ] as const;

  it('has one reduced moment by all three ways: half of the top', () => {
    const x = ethane();
    const top = 3 * H * (1.094 * Math.sin(radians(111.2))) ** 2;
    expect(pitzerGwinnMoment(x, ETHANE_MASSES, [0, 1], sides[1])).toBeCloseTo(top / 2, 9);
    expect(eastRadomMoment(x, ETHANE_MASSES, sides)).toBeCloseTo(top / 2, 9);
    expect(kineticMoment(x, ETHANE_MASSES, rigidTangent(x, [0, 1], sides[1]))).toBeCloseTo(top / 2, 9);
  });

  it('has S = 229 +- 1 and Cp = 52.5 +- 1 J/mol/K with V3 = 1024 cm-1 (handbook values, from memory)', () => {
    const coordinates = ethane();
    const constant = constantSeries(rotationalConstant(eastRadomMoment(coordinates, ETHANE_MASSES, sides)));
    const { rows, fundamental } = hinderedRotor({ potential: seriesOfBarriers([0, 0, 1024]), constant, symmetryNumber: 3 }, [T]);
    expect(Math.abs((fundamental ?? 0) - 289)).toBeLessThan(4);
    const { symmetryNumber } = externalSymmetry(coordinates, ETHANE_NUMBERS);
    const result = rigidRotorHarmonicOscillator(
      { coordinates, masses: ETHANE_MASSES, frequencies: ETHANE_FREQUENCIES, symmetryNumber },
      T,
      1e5,
      [{ mode: 0, rotor: rows[0].quantum }],
    );
    expect(Math.abs(result.entropy - 229)).toBeLessThan(1);
    expect(Math.abs(result.heatCapacity - 52.5)).toBeLessThan(1);
  });
});

describe('reduced moments', () => {
  /** Methanol, r0-like structure: C, O, three H on carbon, the hydroxyl H. */
  function methanol(torsion = 180): Float64Array {
    const x = [0, 0, 0, 0, 0, 1.425];
    for (const k of [0, 120, 240]) x.push(1.03 * Math.cos(radians(k)), 1.03 * Math.sin(radians(k)), -0.36);
    x.push(0.91 * Math.cos(radians(torsion)), 0.91 * Math.sin(radians(torsion)), 1.425 + 0.29);
    return Float64Array.from(x);
  }
  const masses = [C, O, H, H, H, H];
  const sides = [
    [0, 2, 3, 4],
    [1, 5],
  ] as const;

  it('of a symmetric top on a bent frame: the exact kinetic moment is that of Pitzer and Gwinn, whichever side turns', () => {
    const x = methanol();
    const expected = pitzerGwinnMoment(x, masses, [0, 1], sides[0]);
    expect(kineticMoment(x, masses, rigidTangent(x, [0, 1], sides[1]))).toBeCloseTo(expected, 8);
    expect(kineticMoment(x, masses, rigidTangent(x, [1, 0], sides[0]))).toBeCloseTo(expected, 8);
    // methanol's B is 27.6 cm-1
    expect(Math.abs(rotationalConstant(expected) - 27.6)).toBeLessThan(1);
    expect(() => pitzerGwinnMoment(x, masses, [0, 1], sides[1])).toThrow(/not symmetric/);
  });

  it('do not depend on where the molecule lies', () => {
    const x = methanol(70);
    const tangent = rigidTangent(x, [0, 1], sides[1]);
    const turned = new Float64Array(x.length);
    const turnedTangent = new Float64Array(x.length);
    for (let i = 0; i < 6; i++) {
      const [a, b, c] = x.slice(3 * i, 3 * i + 3);
      turned.set([c + 3, a - 1, b + 2], 3 * i);
      // the path as seen from a frame that turns and drifts along with it
      const [p, q, r] = tangent.slice(3 * i, 3 * i + 3);
      turnedTangent.set([r + 0.5 - 0.7 * (a - 1), p + 0.7 * (c + 3), q - 0.2], 3 * i);
    }
    expect(kineticMoment(turned, masses, turnedTangent)).toBeCloseTo(kineticMoment(x, masses, tangent), 8);
    expect(eastRadomMoment(turned, masses, sides)).toBeCloseTo(eastRadomMoment(x, masses, sides), 10);
  });

  it('along a rigid path are the rigid ones, also from points 15 degrees apart in frames of their own', () => {
    const path = Array.from({ length: 24 }, (_, n) => {
      const angle = -180 + 15 * n;
      const x = methanol(angle);
      const c = Math.cos(n);
      const s = Math.sin(n);
      for (let i = 0; i < x.length; i += 3) [x[i], x[i + 1]] = [c * x[i] - s * x[i + 1] + n, s * x[i] + c * x[i + 1]];
      return { angle: radians(angle), coordinates: x };
    });
    const expected = pitzerGwinnMoment(methanol(), masses, [0, 1], sides[0]);
    for (const i of [0, 5, 23])
      expect(kineticMoment(path[i].coordinates, masses, pathTangent(path, i, masses, [0, 1], sides[1]))).toBeCloseTo(expected, 7);
  });

  it('along a path of mirror images, whose methyl hydrogens have changed places, are the same once these are put back', () => {
    const path = Array.from({ length: 24 }, (_, n) => {
      const x = methanol(Math.abs(-180 + 15 * n));
      return { angle: radians(-180 + 15 * n), coordinates: n < 12 ? x.map((value, k) => (k % 3 === 1 ? -value : value)) : x };
    });
    const kinds = [0, 1, 2, 2, 2, 3];
    const expected = pitzerGwinnMoment(methanol(), masses, [0, 1], sides[0]);
    const at = (i: number, labels?: number[]): number =>
      kineticMoment(path[i].coordinates, masses, pathTangent(path, i, masses, [0, 1], sides[1], labels));
    for (const i of [0, 1, 11, 12, 23]) expect(at(i, kinds)).toBeCloseTo(expected, 7);
    expect(at(12)).toBeGreaterThan(2 * expected);
  });

  it('along a path that also stretches gain the stretching: m (dr/dphi)^2 of the reduced mass', () => {
    // the C-O distance breathes as r = 1.425 + 0.05 cos 3 phi: largest slope 0.15 angstrom a radian at phi = 30 degrees
    const at = (degree: number): Float64Array => {
      const x = methanol(degree);
      for (const i of [1, 5]) x[3 * i + 2] += 0.05 * Math.cos(radians(3 * degree));
      return x;
    };
    const path = Array.from({ length: 360 }, (_, n) => ({ angle: radians(n - 180), coordinates: at(n - 180) }));
    const i = 210;
    const tangent = pathTangent(path, i, masses, [0, 1], sides[1]);
    const rigid = kineticMoment(path[i].coordinates, masses, rigidTangent(path[i].coordinates, [0, 1], sides[1]));
    const a = C + 3 * H;
    const b = O + H;
    const gained = kineticMoment(path[i].coordinates, masses, tangent) - rigid;
    // stretching along the bond turns the bent frame a little too: the pure stretch is an upper bound, close by
    expect(gained).toBeGreaterThan(0.85 * ((a * b) / (a + b)) * 0.15 ** 2);
    expect(gained).toBeLessThan(1.0001 * ((a * b) / (a + b)) * 0.15 ** 2);
  });

  it('of a top without mass off the axis are refused', () => {
    expect(() => pitzerGwinnMoment(methanol(), masses, [0, 1], [1])).toThrow(/no atom off the axis/);
    expect(inertia(Float64Array.of(0, 0, 0, 0, 0, 2), [1, 1]).moments[2]).toBeCloseTo(2, 12);
    expect(() => rotationalConstant(0)).toThrow(/positive/);
  });
});

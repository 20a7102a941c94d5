import { describe, expect, it } from 'vitest';
import { addAngleBending, angleBending, linearAngleBending } from './angle-bending.js';
import { addBondStretching, bondStretching } from './bond-stretching.js';
import { type EnergyAndGradient, gradientError, uniform } from './gradient-check.fixture.js';
import { addOutOfPlane, outOfPlane } from './out-of-plane.js';
import { addStretchBend, stretchBend } from './stretch-bend.js';
import { addTorsions, torsion } from './torsion.js';

const DEGREE = Math.PI / 180;
const offsets = (atom: number) => Int32Array.of(3 * atom);

// one interaction each over the atoms 0, 1, 2, 3 in the order of its columns; the constants are of usual size
const bonds = { i: offsets(0), j: offsets(1), length: Float64Array.of(1.508), force: Float64Array.of(4.258) };
const angles = {
  i: offsets(0), j: offsets(1), k: offsets(2),
  angle: Float64Array.of(110.549), force: Float64Array.of(0.636), linear: Uint8Array.of(0),
};
const linearAngles = { ...angles, angle: Float64Array.of(180), force: Float64Array.of(0.474), linear: Uint8Array.of(1) };
const couplings = {
  i: offsets(0), j: offsets(1), k: offsets(2),
  length_ij: Float64Array.of(1.508), length_kj: Float64Array.of(1.093), angle: Float64Array.of(110.549),
  force_ij: Float64Array.of(0.227), force_kj: Float64Array.of(0.07),
};
const wilson = { i: offsets(0), j: offsets(1), k: offsets(2), l: offsets(3), force: Float64Array.of(0.141) };
const torsions = {
  i: offsets(0), j: offsets(1), k: offsets(2), l: offsets(3),
  v1: Float64Array.of(1.662), v2: Float64Array.of(6.152), v3: Float64Array.of(-0.058),
};

const terms: [string, EnergyAndGradient][] = [
  ['bond stretching', (x, gradient) => addBondStretching(bonds, x, gradient)],
  ['angle bending', (x, gradient) => addAngleBending(angles, x, gradient)],
  ['linear angle bending', (x, gradient) => addAngleBending(linearAngles, x, gradient)],
  ['stretch-bend', (x, gradient) => addStretchBend(couplings, x, gradient)],
  ['out-of-plane', (x, gradient) => addOutOfPlane(wilson, x, gradient)],
  ['torsion', (x, gradient) => addTorsions(torsions, x, gradient)],
];

/** i, j, k, l with j at the origin: i-j and j-k of given lengths, angle and dihedral angle in degrees. */
function chain(angle: number, dihedral: number): Float64Array {
  const [a, d] = [angle * DEGREE, dihedral * DEGREE];
  return Float64Array.of(1.53 * Math.cos(a), 1.53 * Math.sin(a), 0, 0, 0, 0, 1.5, 0, 0, 1.87, 1.04 * Math.cos(d), 1.04 * Math.sin(d));
}

/** j at the origin, i and k in a plane with it, l turned out of that plane by chi degrees. */
function pyramid(chi: number): Float64Array {
  const c = chi * DEGREE;
  return Float64Array.of(-0.7, 1.3, 0, 0, 0, 0, -0.8, -1.2, 0, 1.4 * Math.cos(c), 0, 1.4 * Math.sin(c));
}

/** Turned out of the axes and shifted, so that no component vanishes by accident. */
function tilted(x: Float64Array): Float64Array {
  const [c, s] = [Math.cos(0.7), Math.sin(0.7)];
  const [e, t] = [Math.cos(-1.1), Math.sin(-1.1)];
  const out = new Float64Array(x.length);
  for (let n = 0; n < x.length; n += 3) {
    const u = c * x[n] - s * x[n + 1], v = s * x[n] + c * x[n + 1];
    out[n] = u + 0.3;
    out[n + 1] = e * v - t * x[n + 2] - 0.2;
    out[n + 2] = t * v + e * x[n + 2] + 0.5;
  }
  return out;
}

describe('the scalar functions of the bonded terms', () => {
  // the formulas of J. Comput. Chem. 17, 490 (1996) worked out by hand for round deviations
  it('stretches a bond', () => {
    expect(bondStretching(0.1, 5)).toBeCloseTo(143.9325 * 2.5 * 0.01 * (1 - 0.2 + (7 / 3) * 0.01), 12);
    expect(bondStretching(0, 5)).toBe(0);
  });
  it('bends an angle, softer when it opens', () => {
    expect(angleBending(10, 0.8)).toBeCloseTo(0.043844 * 0.4 * 100 * (1 - 0.06981), 3);
    expect(angleBending(10, 0.8)).toBeLessThan(angleBending(-10, 0.8));
    expect(linearAngleBending(-1, 0.5)).toBe(0);
    expect(linearAngleBending(0, 0.5)).toBeCloseTo(71.96625, 10);
  });
  it('couples stretching and bending with the sign of the product', () => {
    expect(stretchBend(0.02, -0.01, 3, 0.2, 0.1)).toBeCloseTo(2.5121 * (0.004 - 0.001) * 3, 12);
  });
  it('bends out of the plane alike on both sides', () => {
    expect(outOfPlane(10, 0.2)).toBeCloseTo(0.43844, 4);
    expect(outOfPlane(-10, 0.2)).toBe(outOfPlane(10, 0.2));
  });
  it.each([0, 30, 60, 90, 117, 180, 270])('sums the Fourier series at %d degrees', (degrees) => {
    const phi = degrees * DEGREE;
    const series = 0.5 * (0.7 * (1 + Math.cos(phi)) - 1.1 * (1 - Math.cos(2 * phi)) + 0.3 * (1 + Math.cos(3 * phi)));
    expect(torsion(Math.cos(phi), 0.7, -1.1, 0.3)).toBeCloseTo(series, 12);
  });
});

describe('the loops of the bonded terms', () => {
  it('measure the geometry that they are given', () => {
    const gradient = new Float64Array(12);
    const x = tilted(chain(104, 37));
    expect(addBondStretching(bonds, x, gradient)).toBeCloseTo(bondStretching(1.53 - 1.508, 4.258), 10);
    expect(addAngleBending(angles, x, gradient)).toBeCloseTo(angleBending(104 - 110.549, 0.636), 10);
    expect(addAngleBending(linearAngles, x, gradient)).toBeCloseTo(linearAngleBending(Math.cos(104 * DEGREE), 0.474), 10);
    expect(addStretchBend(couplings, x, gradient)).toBeCloseTo(stretchBend(1.53 - 1.508, 1.5 - 1.093, 104 - 110.549, 0.227, 0.07), 10);
    expect(addTorsions(torsions, x, gradient)).toBeCloseTo(torsion(Math.cos(37 * DEGREE), 1.662, 6.152, -0.058), 10);
    expect(addOutOfPlane(wilson, tilted(pyramid(23)), gradient)).toBeCloseTo(outOfPlane(23, 0.141), 10);
  });

  const geometries: [string, Float64Array][] = [
    ...[40, 90, 110, 150, 175, 179, 179.9, 179.99].map((angle): [string, Float64Array] => [`an angle of ${angle}`, chain(angle, 75)]),
    ...[0, 1e-6, 1e-3, 0.1, 60, 90, 179.9, 179.999999, 180, -180, -0.01, -97].map(
      (dihedral): [string, Float64Array] => [`a dihedral angle of ${dihedral}`, chain(112, dihedral)],
    ),
    ...[0, 1e-6, 1e-3, 0.1, 20, 60, 85, -40, -1e-5].map((chi): [string, Float64Array] => [`a Wilson angle of ${chi}`, pyramid(chi)]),
  ];

  describe.each(terms)('%s', (_name, evaluate) => {
    it.each(geometries)('has the gradient of its energy at %s degrees', (_place, geometry) => {
      // a step far below the distance to the kink that a straight angle is
      const { worst, finite } = gradientError(evaluate, tilted(geometry), 2e-6);
      expect(finite).toBe(true);
      expect(worst).toBeLessThan(1);
    });

    it('has the gradient of its energy anywhere', () => {
      const random = uniform(7);
      let worst = 0;
      for (let n = 0; n < 200; n++) {
        const x = Float64Array.from(chain(109, 60), (value) => value + 0.4 * random());
        worst = Math.max(worst, gradientError(evaluate, x).worst);
      }
      expect(worst).toBeLessThan(1);
    });

    it('neither pushes nor turns the molecule as a whole', () => {
      const x = tilted(chain(100, 50));
      const gradient = new Float64Array(12);
      evaluate(x, gradient);
      for (let axis = 0; axis < 3; axis++) {
        const [p, q] = [(axis + 1) % 3, (axis + 2) % 3];
        let force = 0, torque = 0;
        for (let n = 0; n < 12; n += 3) {
          force += gradient[n + axis];
          torque += x[n + p] * gradient[n + q] - x[n + q] * gradient[n + p];
        }
        expect(Math.abs(force)).toBeLessThan(1e-12);
        expect(Math.abs(torque)).toBeLessThan(1e-12);
      }
    });

    it.each([
      ['an exactly straight angle', Float64Array.of(-1.5, 0, 0, 0, 0, 0, 1.5, 0, 0, 1.9, 1, 0)],
      ['a folded angle', Float64Array.of(1.5, 0, 0, 0, 0, 0, 1.4, 0, 0, 1.9, 1, 0)],
      ['four atoms in a line', Float64Array.of(-1.5, 0, 0, 0, 0, 0, 1.5, 0, 0, 3, 0, 0)],
      ['a bond upright on the plane', Float64Array.of(-0.7, 1.3, 0, 0, 0, 0, -0.8, -1.2, 0, 0, 0, 1.4)],
      ['two atoms on one spot', Float64Array.of(0, 0, 0, 0, 0, 0, 1.5, 0, 0, 1.9, 1, 0)],
    ])('stays finite at %s', (_place, x) => {
      const { finite } = gradientError(evaluate, x);
      expect(finite).toBe(true);
    });
  });
});

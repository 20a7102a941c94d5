import { radians, torsion, torsionGradient } from '@tordial/geometry';
import { expect, test } from 'vitest';
import { alkane, modelPotential, tetrahedral } from './chain.fixture.js';
import { drivenRotor, heldAt, intoRotorFrame, rigidTorque, rotorAngle, turnSide, turnTo } from './driven-rotor.js';

const molecule = alkane([0, 1, 2, 3, 4]);
const potential = modelPotential(molecule);

test('turns to an angle with the smaller side', () => {
  for (const atoms of [
    [0, 1, 2, 3],
    [3, 2, 1, 0],
  ] as const) {
    const rotor = drivenRotor(molecule, atoms);
    const x = tetrahedral(molecule, 2.8);
    const turned = x.slice();
    turnTo(rotor, turned, radians(33));
    expect(rotorAngle(rotor, turned)).toBeCloseTo(radians(33), 12);
    // atoms 2 to 5 of the chain and their hydrogens are the larger side
    for (const atom of [2, 3, 4, 5]) for (let k = 0; k < 3; k++) expect(turned[3 * atom + k]).toBe(x[3 * atom + k]);
  }
});

test('gives the torque of a rigid turn, by central differences of the energy', () => {
  const rotor = drivenRotor(molecule, [1, 2, 3, 4]);
  const x = tetrahedral(molecule, 2.2);
  const gradient = new Float64Array(x.length);
  potential.evaluate(x, gradient);
  const at = (shift: number) => {
    const turned = x.slice();
    turnTo(rotor, turned, rotorAngle(rotor, x) + shift);
    return potential.evaluate(turned);
  };
  expect(Math.abs(rigidTorque(rotor, x, gradient) - (at(1e-4) - at(-1e-4)) / 2e-4)).toBeLessThan(1e-5);
});

test('reduces a gradient to that of the energy after retraction, by central differences', () => {
  const rotor = drivenRotor(molecule, [1, 2, 3, 4]);
  const constraint = heldAt(rotor, radians(50));
  const x = tetrahedral(molecule, 2.2);
  constraint.retract(x);
  const reduced = new Float64Array(x.length);
  potential.evaluate(x, reduced);
  const raw = reduced.slice();
  const residual = constraint.reduce(x, reduced);
  const after = (k: number, shift: number) => {
    const moved = x.slice();
    moved[k] += shift;
    constraint.retract(moved);
    return potential.evaluate(moved);
  };
  for (let k = 0; k < x.length; k++) expect(Math.abs(reduced[k] - (after(k, 1e-5) - after(k, -1e-5)) / 2e-5)).toBeLessThan(1e-4);

  // the residual is what remains of the gradient across dphi/dx
  const slope = new Float64Array(12);
  torsionGradient(x, 1, 2, 3, 4, slope);
  const whole = new Float64Array(x.length);
  [1, 2, 3, 4].forEach((atom, p) => {
    whole.set(slope.subarray(3 * p, 3 * p + 3), 3 * atom);
  });
  const along = raw.reduce((sum, value, k) => sum + value * whole[k], 0) / whole.reduce((sum, value) => sum + value * value, 0);
  expect(residual).toBeCloseTo(Math.max(...raw.map((value, k) => Math.abs(value - along * whole[k]))), 10);
});

test('keeps side a of turned copies still in its frame, and side b once the turn is taken back', () => {
  const rotor = drivenRotor(molecule, [0, 1, 2, 3]);
  const x = tetrahedral(molecule, 2.9);
  const first = x.slice();
  intoRotorFrame(rotor, first);
  expect(rotorAngle(rotor, first)).toBeCloseTo(rotorAngle(rotor, x), 12);
  const turned = x.slice();
  turnTo(rotor, turned, rotorAngle(rotor, x) + 0.7);
  intoRotorFrame(rotor, turned);
  turnSide(rotor, turned, -0.7);
  turned.forEach((value, k) => {
    expect(value).toBeCloseTo(first[k], 10);
  });
  const [, a, b] = rotor.torsion;
  expect(Math.max(...first.subarray(3 * a, 3 * a + 3).map(Math.abs))).toBe(0);
  expect(first[3 * b]).toBeCloseTo(0, 12);
  expect(torsion(first, ...rotor.torsion)).toBeCloseTo(torsion(x, ...rotor.torsion), 12);
});

import { expect, it } from 'vitest';
import * as constants from './constants.js';

it('agrees with the CODATA conversion factors', () => {
  // NIST reference on constants, units and uncertainty, CODATA 2018, from memory
  expect(constants.GAS_CONSTANT).toBeCloseTo(8.31446261815324, 12);
  expect(constants.BOLTZMANN_WAVENUMBER).toBeCloseTo(0.6950348, 8);
  expect(constants.ATTEMPTS_PER_KELVIN / 2.083661912e10).toBeCloseTo(1, 9);
  // 1 kcal/mol = 349.755 cm-1; B of 1 amu A^2 is 16.8576 cm-1 (usual handbook values, from memory)
  expect(constants.WAVENUMBER_PER_KCAL).toBeCloseTo(349.755, 3);
  expect(constants.ROTATIONAL_WAVENUMBER).toBeCloseTo(16.8576, 3);
  // harmonic: 1 mdyn/A on 1 amu is 1302.79 cm-1 (G. Herzberg 1945, from memory), and 1 mdyn/A = 143.9325 kcal/mol/A^2
  expect(constants.WAVENUMBER_OF_FORCE * Math.sqrt(143.9325)).toBeCloseTo(1302.79, 1);
});

import { describe, expect, it } from 'vitest';
import { atomicMass, atomicNumberOf, covalentRadius, elementSymbol, isotopeMass, valenceElectrons } from './elements.js';

describe('elements', () => {
  it('translates symbols both ways for all 118 elements', () => {
    for (let z = 1; z <= 118; z++) expect(atomicNumberOf(elementSymbol(z))).toBe(z);
    expect([elementSymbol(1), elementSymbol(35), elementSymbol(118)]).toEqual(['H', 'Br', 'Og']);
    expect([atomicNumberOf('CL'), atomicNumberOf('Xx'), elementSymbol(0), elementSymbol(119)]).toEqual([0, 0, '?', '?']);
  });
  it('has the standard atomic weights', () => {
    // CIAAW 2021 abridged values
    expect([1, 6, 7, 8, 16, 17, 35, 53].map(atomicMass)).toEqual([1.008, 12.011, 14.007, 15.999, 32.06, 35.45, 79.904, 126.9]);
    expect(atomicMass(92)).toBeCloseTo(238.03, 2);
    expect(atomicMass(0)).toBe(0);
  });
  it('has isotope masses, and falls back to the mass number', () => {
    // AME2020
    expect(isotopeMass(1, 2)).toBeCloseTo(2.0141018, 6);
    expect(isotopeMass(6, 13)).toBeCloseTo(13.0033548, 5);
    expect(isotopeMass(92, 235)).toBe(235);
    expect(isotopeMass(6, 0)).toBe(12.011);
  });
  it('has covalent radii', () => {
    // Cordero et al., Dalton Trans. 2832 (2008), table 2
    expect([1, 6, 7, 8, 9, 15, 16, 17, 35, 53].map(covalentRadius)).toEqual([0.31, 0.76, 0.71, 0.66, 0.57, 1.07, 1.05, 1.02, 1.2, 1.39]);
    expect(covalentRadius(96)).toBe(1.69);
  });
  it('knows main-group valence electrons', () => {
    expect([1, 5, 6, 7, 8, 9, 10, 14, 15, 16, 17, 26, 30, 31, 35, 50, 53].map(valenceElectrons)).toEqual([
      1, 3, 4, 5, 6, 7, 8, 4, 5, 6, 7, 0, 0, 3, 7, 4, 7,
    ]);
  });
});

import { describe, expect, it } from 'vitest';
import { BOLTZMANN_WAVENUMBER, GAS_CONSTANT } from '../constants.js';
import { hinderedRotor } from './hindered-rotor.js';
import { constantSeries, seriesOfBarriers, seriesOfFunction } from './periodic-series.js';
import { quantumThermodynamics } from './thermodynamics.js';

const methylOn = (V3: number, B: number) => ({ potential: seriesOfBarriers([0, 0, V3]), constant: constantSeries(B), symmetryNumber: 3 });

describe('published rotors', () => {
  it('methanol: V3 = 373.5 and B = 27.65 cm-1 split the ground state by 9.11 +- 0.05 cm-1 (microwave value 9.12, from memory)', () => {
    const { splitting, periodicity } = hinderedRotor(methylOn(373.5, 27.65), [298.15]);
    expect(periodicity).toBe(3);
    expect(Math.abs((splitting ?? 0) - 9.11)).toBeLessThan(0.05);
  });

  it('ethane: V3 = 1024 cm-1 gives a fundamental of 289 +- 4 cm-1 (Raman and infrared value, from memory)', () => {
    // B from r(CC) 1.535, r(CH) 1.094 angstrom, HCC 111.2 degrees (electron diffraction, from memory): I = 3/2 m_H r^2 sin^2
    const moment = 1.5 * 1.00794 * (1.094 * Math.sin((111.2 * Math.PI) / 180)) ** 2;
    const { fundamental } = hinderedRotor(methylOn(1024, 16.857629 / moment), [298.15]);
    expect(Math.abs((fundamental ?? 0) - 289)).toBeLessThan(4);
  });
});

describe('thermodynamic functions', () => {
  it('of a free rotor are classical: S = R (1/2 + ln Q), Cp = R/2', () => {
    const B = 0.5;
    const T = 400;
    const { rows } = hinderedRotor({ potential: constantSeries(0), constant: constantSeries(B), symmetryNumber: 2 }, [T]);
    const Q = Math.sqrt((Math.PI * BOLTZMANN_WAVENUMBER * T) / B) / 2;
    expect(rows[0].quantum.partitionFunction / Q).toBeCloseTo(1, 7);
    expect(rows[0].quantum.entropy).toBeCloseTo(GAS_CONSTANT * (0.5 + Math.log(Q)), 5);
    expect(rows[0].quantum.heatCapacity).toBeCloseTo(GAS_CONSTANT / 2, 4);
    expect(rows[0].classical.entropy).toBeCloseTo(rows[0].quantum.entropy, 5);
    expect(rows[0].harmonic).toBeNull();
  });

  it('of a stiff rotor are those of one oscillator (Planck-Einstein), the symmetry number undoing the copies', () => {
    const T = 298.15;
    const rotor = methylOn(2e5, 1);
    const { rows, wells } = hinderedRotor(rotor, [T]);
    const u = wells[0].quantum / (BOLTZMANN_WAVENUMBER * T);
    expect(wells[0].quantum).toBeCloseTo(3 * Math.sqrt(2e5), 6);
    const einstein = GAS_CONSTANT * u ** 2 * (Math.exp(u) / (Math.exp(u) - 1) ** 2);
    const entropy = GAS_CONSTANT * (u / (Math.exp(u) - 1) - Math.log(1 - Math.exp(-u)));
    expect(rows[0].harmonic?.heatCapacity).toBeCloseTo(einstein, 9);
    expect(rows[0].harmonic?.entropy).toBeCloseTo(entropy, 9);
    expect(Math.abs(rows[0].quantum.entropy - entropy)).toBeLessThan(0.02);
    expect(Math.abs(rows[0].quantum.heatCapacity - einstein)).toBeLessThan(0.05);
  });

  it('classical: the integral is the Bessel function I0 (Q = sqrt(pi kT/B) exp(-z) I0(z), z = V/2kT)', () => {
    // I0(1) = 1.2660658778 (Abramowitz and Stegun, table 9.8)
    const T = 300;
    const kT = BOLTZMANN_WAVENUMBER * T;
    const { rows } = hinderedRotor({ potential: seriesOfBarriers([0, 0, 2 * kT]), constant: constantSeries(6), symmetryNumber: 1 }, [T]);
    expect(rows[0].classical.partitionFunction / (Math.sqrt((Math.PI * kT) / 6) * Math.exp(-1) * 1.2660658778)).toBeCloseTo(1, 9);
  });

  it.each([
    [1024, 10.7, 1.01],
    [700, 5, 1.01],
    [1500, 6, 1.01],
    // methanol's barrier is hardly higher than one quantum: towards a free rotor the approximation errs by u / (2 sinh(u/2)), 4 % at u = 1
    [373.5, 27.65, 1.5],
  ])(
    'Pitzer-Gwinn is within 2 %% of the quantum sum when kT exceeds the quantum (V3 %s, B %s cm-1, from kT = %s quanta)',
    (V3, B, least) => {
      const quantum = 3 * Math.sqrt(V3 * B);
      const temperatures = [least, 2, 3].map((factor) => (factor * quantum) / BOLTZMANN_WAVENUMBER);
      for (const { quantum: exact, pitzerGwinn } of hinderedRotor(methylOn(V3, B), temperatures).rows)
        expect(Math.abs((pitzerGwinn?.partitionFunction ?? 0) / exact.partitionFunction - 1)).toBeLessThan(0.02);
    },
  );

  it('are derivatives of one another: Cp = T dS/dT, H - H0 from S', () => {
    const rotor = {
      potential: seriesOfBarriers([500, 100, 1200]),
      constant: seriesOfFunction((phi) => 3 + Math.cos(phi)),
      symmetryNumber: 1,
    };
    const [a, b, c] = hinderedRotor(rotor, [299, 300, 301]).rows;
    for (const way of ['quantum', 'classical', 'harmonic', 'pitzerGwinn'] as const) {
      const [low, mid, high] = [a[way], b[way], c[way]];
      if (!low || !mid || !high) throw new Error('a hindered rotor has all four');
      expect((300 * (high.entropy - low.entropy)) / 2).toBeCloseTo(mid.heatCapacity, 3);
      expect(((high.enthalpy - low.enthalpy) * 4184) / 2).toBeCloseTo(mid.heatCapacity, 3);
    }
  });

  it('need levels high enough for the temperature', () => {
    expect(() => quantumThermodynamics([0, 100, 200], 1, 298.15)).toThrow(/ask for more/);
    expect(() => hinderedRotor(methylOn(1000, 5), [0])).toThrow(/above 0 K/);
    expect(() => hinderedRotor({ ...methylOn(1000, 5), symmetryNumber: 0 }, [300])).toThrow(/whole number/);
  });
});

describe('tunnelling', () => {
  it('a mirror pair of wells beside a lower one: doublets of the pair, singles of the other', () => {
    // V1 lifts the two gauche wells; even in phi, so that they are mirror images
    const { multiplets } = hinderedRotor(
      { potential: seriesOfBarriers([-400, 0, -1300]), constant: constantSeries(2), symmetryNumber: 1 },
      [300],
    );
    const [lowest, second, third] = multiplets;
    expect(lowest.wells).toEqual([expect.closeTo(-Math.PI, 6)]);
    expect(lowest.levels.length).toBe(1);
    const pair = [second, third].find((state) => state.wells.length === 2);
    expect(pair?.quantumNumber).toBe(0);
    expect(pair?.levels.length).toBe(2);
    expect(pair?.wells[0]).toBeCloseTo(-(pair?.wells[1] ?? 0), 9);
    expect(pair?.splitting).toBeLessThan(1);
  });

  it('splits less the higher the barrier is', () => {
    const splittings = [400, 800, 1200].map((V3) => hinderedRotor(methylOn(V3, 10), [100]).splitting ?? 0);
    expect(splittings[0] / splittings[1]).toBeGreaterThan(5);
    expect(splittings[1] / splittings[2]).toBeGreaterThan(5);
  });
});

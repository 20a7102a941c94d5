import { describe, expect, it } from 'vitest';
import { barrierFromCoalescence, coalescenceRate, coalescenceTemperature, frequencyDifference } from './coalescence.js';
import { barrierOfRate, eyringRate, eyringRates, temperatureOfRate } from './eyring.js';
import { exchangeHalfLife, parallelRate, racemisationHalfLife, timeToExcess } from './half-life.js';
import { meetsOki, OKI_HALF_LIFE, okiBarrier, okiTemperature } from './oki.js';
import { stabilityClass } from './stability-class.js';
import { assumedBarrierError, rateRange, timeRange } from './uncertainty.js';
import { wignerHolds, wignerTransmission } from './wigner.js';

describe('Eyring', () => {
  it('gives k_B T / h without a barrier: 6.21e12 1/s at 298.15 K (handbook value, from memory)', () => {
    expect(eyringRate(0, 298.15) / 6.2124e12).toBeCloseTo(1, 4);
  });

  it('falls by 10 for each RT ln 10 = 1.364 kcal/mol at 25 C (handbook value, from memory)', () => {
    expect(Math.log10(eyringRate(20, 298.15) / eyringRate(21.364, 298.15))).toBeCloseTo(1, 3);
  });

  it('inverts in the barrier and in the temperature', () => {
    for (const barrier of [0.5, 5, 15, 26, 60])
      for (const T of [77, 298.15, 600]) {
        const k = eyringRate(barrier, T, 1.3);
        expect(barrierOfRate(k, T, 1.3)).toBeCloseTo(barrier, 10);
        expect(temperatureOfRate(k, barrier, 1.3)).toBeCloseTo(T, 8);
      }
  });

  it('keeps detailed balance', () => {
    const { forward, backward } = eyringRates(0, 12, 1.5, 310);
    expect(forward / backward).toBeCloseTo(Math.exp(-1.5 / (1.987204259e-3 * 310)), 10);
  });

  it('refuses what has no rate', () => {
    expect(() => eyringRate(Number.NaN, 300)).toThrow(/no rate/);
    expect(() => eyringRate(10, 0)).toThrow(/above 0 K/);
    expect(() => eyringRate(10, 300, 0)).toThrow(/transmission/);
    expect(() => temperatureOfRate(1, 0)).toThrow(/positive one/);
    expect(() => barrierOfRate(0, 300)).toThrow(/positive one/);
  });
});

describe('Oki', () => {
  // M. Oki, Top. Stereochem. 14, 1 (1983): barriers for a half-life of 1000 s, kcal/mol; the three pairs as the field quotes them
  it.each([
    [14.7, 200],
    [22.3, 300],
    [26.2, 350],
  ])('%s kcal/mol at %s K is 1000 s by ln 2 / (2k), within 15 %%', (barrier, T) => {
    const halfLife = racemisationHalfLife(eyringRate(barrier, T));
    expect(Math.abs(halfLife / OKI_HALF_LIFE - 1)).toBeLessThan(0.15);
  });

  it('turns at its own limits', () => {
    const limit = okiBarrier(298.15);
    expect(meetsOki(eyringRate(limit + 1e-6, 298.15))).toBe(true);
    expect(meetsOki(eyringRate(limit - 1e-6, 298.15))).toBe(false);
    expect(okiTemperature(limit)).toBeCloseTo(298.15, 8);
  });
});

describe('half-lives', () => {
  it('tell exchange and racemisation apart by their factor 2', () => {
    expect(exchangeHalfLife(1e-3)).toBeCloseTo(693.147, 3);
    expect(racemisationHalfLife(1e-3)).toBeCloseTo(346.574, 3);
  });

  it('give the time to 99 % excess as -ln 0.99 / (2k), and to 50 % as the half-life', () => {
    expect(timeToExcess(1e-3)).toBeCloseTo(5.02517, 5);
    expect(timeToExcess(1e-3, 0.5)).toBeCloseTo(racemisationHalfLife(1e-3), 10);
    expect(() => timeToExcess(1e-3, 1)).toThrow(/fraction/);
  });

  it('halve with a second route of the same height', () => {
    expect(racemisationHalfLife(parallelRate([2e-5, 2e-5]))).toBeCloseTo(racemisationHalfLife(2e-5) / 2, 8);
    expect(() => racemisationHalfLife(0)).toThrow(/no half-life/);
    expect(() => parallelRate([])).toThrow(/no route/);
  });
});

describe('stability classes', () => {
  it('part at 20 and 30 kcal/mol (LaPlante et al. 2011)', () => {
    expect([0, 19.99, 20, 30, 30.01, 45].map((barrier) => stabilityClass(barrier).class)).toEqual([1, 1, 2, 2, 3, 3]);
    expect(() => stabilityClass(Number.NaN)).toThrow(/no stability class/);
  });
});

describe('coalescence', () => {
  const sites = { populations: [0.5, 0.5], coupling: 0 } as const;

  it("repeats the textbook example: N,N-dimethylformamide's methyls", () => {
    // H. Guenther, NMR Spectroscopy: dnu of about 10.85 Hz at 60 MHz coalesces at 391 K, dG about 21 kcal/mol (from memory)
    expect(barrierFromCoalescence(391, 10.85, sites)).toBeCloseTo(21, 0);
    // the working form of the same law, dG = 4.575e-3 T (9.972 + log10(T / dnu)) kcal/mol (Guenther, from memory)
    const T = 391;
    expect(barrierFromCoalescence(T, 10.85, sites)).toBeCloseTo(4.575e-3 * T * (9.972 + Math.log10(T / 10.85)), 1);
  });

  it('inverts', () => {
    const dnu = frequencyDifference(-0.35, 400);
    expect(dnu).toBeCloseTo(140, 10);
    // k = 2.2214 dnu, the form textbooks give
    expect(coalescenceRate(dnu, sites)).toBeCloseTo(2.2214 * 140, 1);
    expect(barrierFromCoalescence(coalescenceTemperature(14.2, dnu, sites), dnu, sites)).toBeCloseTo(14.2, 10);
  });

  it('refuses unequal or coupled sites and values that are none', () => {
    expect(() => coalescenceRate(100, { populations: [0.7, 0.3], coupling: 0 })).toThrow(/equal populations/);
    expect(() => coalescenceRate(100, { populations: [0.5, 0.5], coupling: 7 })).toThrow(/uncoupled/);
    expect(() => coalescenceRate(0, sites)).toThrow(/positive number/);
    expect(() => frequencyDifference(0.3, -400)).toThrow(/positive number/);
  });
});

describe('tunnelling', () => {
  it("is Wigner's 1 + u^2/24 of u = h nu / kT", () => {
    expect(wignerTransmission(0, 300)).toBe(1);
    // 207.2 cm-1 is kT at 298.15 K (k = 0.695035 cm-1/K), so u = 1 there
    expect(wignerTransmission(0.6950348 * 298.15, 298.15)).toBeCloseTo(1 + 1 / 24, 8);
    expect(wignerHolds(100, 298.15)).toBe(true);
    expect(wignerHolds(1500, 298.15)).toBe(false);
    expect(() => wignerTransmission(-100, 300)).toThrow(/magnitude/);
  });
});

describe('error of the barrier', () => {
  const term = (source: 'specific' | 'wildcard' | 'empirical rule' | 'series') => ({
    atoms: [0, 1, 2, 3] as const,
    types: [1, 1, 1, 1] as const,
    class: 0,
    v: [0, 0, 0],
    source,
  });

  it('widens with the worst source of the torsion terms', () => {
    expect(assumedBarrierError([]).error).toBe(2);
    expect(assumedBarrierError([term('specific'), term('series')]).error).toBe(2);
    expect(assumedBarrierError([term('specific'), term('wildcard')]).error).toBe(3);
    expect(assumedBarrierError([term('empirical rule'), term('wildcard')]).error).toBe(4);
    expect(assumedBarrierError([term('wildcard')], 0.5)).toEqual({ error: 0.5, reason: 'given' });
    expect(() => assumedBarrierError([], -1)).toThrow(/0 or more/);
  });

  it('is carried to the half-life as the rates of the shifted barriers', () => {
    const range = timeRange(rateRange(eyringRate(25, 310.15), 310.15, 2), racemisationHalfLife);
    expect(range.low / racemisationHalfLife(eyringRate(23, 310.15))).toBeCloseTo(1, 10);
    expect(range.high / racemisationHalfLife(eyringRate(27, 310.15))).toBeCloseTo(1, 10);
  });
});

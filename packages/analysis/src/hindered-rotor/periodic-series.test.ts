import { describe, expect, it } from 'vitest';
import {
  extremaOfSeries,
  mainExtrema,
  type PeriodicSeries,
  seriesOfBarriers,
  seriesOfFunction,
  seriesOfSamples,
  seriesValue,
  withoutNoise,
} from './periodic-series.js';

const SERIES: PeriodicSeries = { cosine: Float64Array.of(1.5, -0.4, 0, 2.1), sine: Float64Array.of(0, 0.7, -0.2, 0.05) };

describe('periodic series', () => {
  it('is recovered from its own samples, whatever the first angle', () => {
    for (const start of [0, -Math.PI, 0.37]) {
      const samples = Array.from({ length: 12 }, (_, j) => seriesValue(SERIES, start + (2 * Math.PI * j) / 12));
      const { cosine, sine } = seriesOfSamples(samples, start);
      for (let k = 0; k < cosine.length; k++) {
        expect(cosine[k]).toBeCloseTo(SERIES.cosine[k] ?? 0, 12);
        expect(sine[k]).toBeCloseTo(SERIES.sine[k] ?? 0, 12);
      }
    }
  });

  it('passes through every sample, of an even or an odd number of them', () => {
    for (const values of [
      [3, 1, 4, 1, 5, 9],
      [2, 6, 5, 3, 5],
    ]) {
      const series = seriesOfSamples(values, 0.2);
      values.forEach((value, j) => {
        expect(seriesValue(series, 0.2 + (2 * Math.PI * j) / values.length)).toBeCloseTo(value, 12);
      });
    }
    expect(() => seriesOfSamples([])).toThrow(/no values/);
    expect(() => seriesOfSamples([1, Number.NaN])).toThrow(/not a number/);
  });

  it('has the derivatives of its function', () => {
    const phi = 0.9;
    for (const order of [1, 2, 3]) {
      const h = 1e-5;
      const numeric = (seriesValue(SERIES, phi + h, order - 1) - seriesValue(SERIES, phi - h, order - 1)) / (2 * h);
      expect(seriesValue(SERIES, phi, order)).toBeCloseTo(numeric, 6);
    }
  });

  it('of barriers is V/2 (1 - cos n phi)', () => {
    expect(seriesValue(seriesOfBarriers([0, 0, 2.9]), Math.PI / 3)).toBeCloseTo(2.9, 12);
    expect(seriesValue(seriesOfBarriers([1, 2, 3]), 0)).toBeCloseTo(0, 12);
    expect(seriesValue(seriesOfBarriers([1, 2, 3]), Math.PI)).toBeCloseTo(4, 12);
  });

  it('finds all extrema, alternating, at 0 and -180 as well', () => {
    const found = extremaOfSeries(seriesOfBarriers([0, 0, 2]));
    expect(found.map(({ kind, angle, value }) => [kind, Math.round((angle * 180) / Math.PI), Math.round(value * 1e9) / 1e9])).toEqual([
      ['maximum', -180, 2],
      ['minimum', -120, 0],
      ['maximum', -60, 2],
      ['minimum', 0, 0],
      ['maximum', 60, 2],
      ['minimum', 120, 0],
    ]);
    for (const { angle } of extremaOfSeries(SERIES)) expect(seriesValue(SERIES, angle, 1)).toBeCloseTo(0, 9);
  });

  it('drops what is only rounding', () => {
    const series = withoutNoise(seriesOfFunction((phi) => 5 + Math.cos(3 * phi), 64));
    expect([...series.cosine]).toEqual([expect.closeTo(5, 12), 0, 0, expect.closeTo(1, 12)]);
    expect([...series.sine]).toEqual([0, 0, 0, 0]);
  });

  it('has its ripples taken out of its extrema, whatever point the turn begins at', () => {
    // a twofold potential whose wells are rippled by half a percent, and a sixfold one that is nothing but its ripples
    for (const begin of [0, 0.4, 1.7, 3]) {
      const rippled = seriesOfFunction((phi) => 1000 * Math.cos(2 * (phi - begin)) + 8 * Math.cos(24 * (phi - begin)));
      expect(extremaOfSeries(rippled).length).toBeGreaterThan(4);
      const main = mainExtrema(rippled);
      expect(main.map(({ kind }) => kind).sort()).toEqual(['maximum', 'maximum', 'minimum', 'minimum']);
      const kinds = main.map(({ kind }) => kind);
      expect(kinds[0]).not.toBe(kinds[1]);
      expect(kinds[2]).toBe(kinds[0]);
    }
    expect(mainExtrema(seriesOfFunction((phi) => 5 * Math.cos(6 * phi)))).toHaveLength(12);
  });
});

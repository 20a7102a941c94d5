import { radians } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { chooseOrder } from './cross-validation.js';
import type { FitSet } from './fit-points.js';
import { type FitSeriesOptions, fitSeries } from './fit-series.js';
import { type SeriesTerm, seriesEnergy, usualTerms } from './series-term.js';

const UNIFORM: FitSeriesOptions = { order: 3, phases: 'fixed', weights: { kind: 'uniform' }, restraint: { kind: 'none', strength: 0 } };
const round = (step: number): number[] => Array.from({ length: 360 / step }, (_, n) => -180 + n * step);

/** Points of a series over one torsion, with a smooth base and a zero of their own. */
const setOf = (terms: readonly SeriesTerm[], angles = round(15), base = (_phi: number) => 0, noise = (_n: number) => 0): FitSet => ({
  name: 'model',
  points: angles.map((angle, n) => {
    const phi = radians(angle);
    return { angle, base: base(phi), reference: base(phi) + seriesEnergy(terms, phi) - 40 + noise(n), torsions: [[phi]] };
  }),
});
/** A reproducible disturbance without structure. */
const disturbance = (size: number) => (n: number) => size * Math.sin(437.585 * (n + 1) ** 2);

describe('a fit with fixed phases', () => {
  const truth = usualTerms([1.2, -3.4, 0.6]);

  it('finds the terms that made the points, whatever the base and the zero', () => {
    const { series, residualStandardDeviation } = fitSeries([setOf(truth, round(15), (phi) => 3 * Math.cos(phi) ** 5)], UNIFORM);
    series[0].forEach(({ v, phase }, n) => {
      expect(v).toBeCloseTo(truth[n].v, 9);
      expect(phase).toBe(truth[n].phase);
    });
    expect(residualStandardDeviation).toBeLessThan(1e-9);
  });
  it('counts mirror images once: half the turn has the same terms and standard errors as the whole', () => {
    const noise = (n: number) => disturbance(0.05)(Math.min(n, 24 - n));
    const whole = setOf(truth, round(15), undefined, noise);
    const half = { ...whole, points: whole.points.filter(({ angle }) => angle <= 0) };
    const [a, b] = [fitSeries([whole], UNIFORM), fitSeries([half], UNIFORM)];
    expect([a.points, a.independentPoints, b.points]).toEqual([24, 13, 13]);
    a.series[0].forEach((term, n) => {
      expect(term.v).toBeCloseTo(b.series[0][n].v, 9);
      expect(term.standardError).toBeCloseTo(b.series[0][n].standardError ?? 0, 9);
    });
  });
  it('has the standard errors of ordinary least squares', () => {
    // a straight line in x = cos phi / 2: textbook standard error of a slope, s / sqrt(sum (x - mean)^2)
    const set = setOf(usualTerms([2]), [0, 40, 70, 110, 150, 180], undefined, disturbance(0.1));
    const { series, residualStandardDeviation: s } = fitSeries([set], { ...UNIFORM, order: 1 });
    const x = set.points.map(({ angle }) => Math.cos(radians(angle)) / 2);
    const mean = x.reduce((sum, value) => sum + value, 0) / x.length;
    expect(series[0][0].standardError).toBeCloseTo((s ?? 0) / Math.sqrt(x.reduce((sum, value) => sum + (value - mean) ** 2, 0)), 9);
  });
  it('fits several molecules at once, each with its own zero', () => {
    const other = setOf(truth, round(30), (phi) => Math.sin(phi) ** 2);
    const moved = { ...other, points: other.points.map((point) => ({ ...point, reference: point.reference + 7 })) };
    const { series, offsets } = fitSeries([setOf(truth), moved], UNIFORM);
    expect(series[0][1].v).toBeCloseTo(-3.4, 9);
    expect(offsets[1] - offsets[0]).toBeCloseTo(7, 9);
  });
  it('says which terms the points do not determine: four torsions two by two opposite leave only even ones', () => {
    const set = setOf(truth);
    const biaryl = {
      ...set,
      points: set.points.map((point) => {
        const [[phi]] = point.torsions;
        return { ...point, reference: 4 * (1 - Math.cos(2 * phi)), torsions: [[phi, phi, phi + Math.PI, phi + Math.PI]] };
      }),
    };
    const { series, notes } = fitSeries([biaryl], UNIFORM);
    expect(series[0].map(({ determined }) => determined)).toEqual([false, true, false]);
    expect(series[0].map(({ v }) => v)).toEqual([0, 2, 0].map((v) => expect.closeTo(v, 9)));
    expect(series[0][0].standardError).toBeNull();
    expect(notes[0]).toMatchObject({ code: 'fit/not-determined', message: expect.stringContaining('V1, V3') });
  });
  it('shrinks toward zero or toward given terms as the ridge grows, and the lasso leaves small terms out', () => {
    const set = setOf(usualTerms([2, 0.02, -1]), round(15), undefined, disturbance(0.02));
    const v = (kind: 'ridge' | 'lasso', strength: number, toward?: SeriesTerm[]) =>
      fitSeries([set], { ...UNIFORM, restraint: { kind, strength }, toward: toward && [toward] }).series[0].map((term) => term.v);
    expect(Math.abs(v('ridge', 1e6)[0])).toBeLessThan(1e-4);
    expect(v('ridge', 1e6, usualTerms([5, 4, 3]))[1]).toBeCloseTo(4, 3);
    const lasso = v('lasso', 0.5);
    expect(lasso[1]).toBe(0);
    expect(lasso[0]).toBeGreaterThan(1.5);
    expect(lasso[0]).toBeLessThan(2);
    v('lasso', 0).forEach((value, n) => {
      expect(value).toBeCloseTo(fitSeries([set], UNIFORM).series[0][n].v, 6);
    });
  });
  it('weights by Boltzmann factors: the high points count less', () => {
    const set = setOf(usualTerms([0, 6]), round(15), undefined, (n) => (Math.abs(-180 + 15 * n) === 90 ? 1 : 0));
    const rotated = fitSeries([set], { ...UNIFORM, order: 2 });
    const cold = fitSeries([set], { ...UNIFORM, order: 2, weights: { kind: 'boltzmann', temperature: 500 } });
    expect(Math.abs(cold.series[0][1].v - 6)).toBeLessThan(0.5 * Math.abs(rotated.series[0][1].v - 6));
  });
  it('takes given weights and refuses points without them', () => {
    const set = setOf(truth, round(15), undefined, (n) => (n === 3 ? 5 : 0));
    const given = { ...set, points: set.points.map((point, n) => ({ ...point, weight: n === 3 ? 0 : 1 })) };
    expect(fitSeries([given], { ...UNIFORM, weights: { kind: 'given' } }).series[0][1].v).toBeCloseTo(-3.4, 9);
    expect(() => fitSeries([set], { ...UNIFORM, weights: { kind: 'given' } })).toThrow(expect.objectContaining({ code: 'fit/weights' }));
  });
  it('says that as many terms as points leave nothing to judge by, and refuses more', () => {
    const set = setOf(truth, [0, 60, 120, 180]);
    const { notes, degreesOfFreedom, series } = fitSeries([set], UNIFORM);
    expect(degreesOfFreedom).toBe(0);
    expect(series[0][0].standardError).toBeNull();
    expect(notes.map(({ code }) => code)).toContain('fit/exact');
    expect(() => fitSeries([set], { ...UNIFORM, order: 4 })).toThrow(expect.objectContaining({ code: 'fit/points' }));
  });
  it('refuses energies that are no numbers and orders that are none', () => {
    const set = setOf(truth, round(30), undefined, (n) => (n === 2 ? Number.NaN : 0));
    expect(() => fitSeries([set], UNIFORM)).toThrow(expect.objectContaining({ code: 'fit/value' }));
    expect(() => fitSeries([setOf(truth)], { ...UNIFORM, order: 7 })).toThrow(expect.objectContaining({ code: 'fit/order' }));
  });
});

describe('a fit with free phases', () => {
  const truth = [
    { n: 1, v: 1.5, phase: 25 },
    { n: 2, v: -2, phase: 160 },
  ];
  const free: FitSeriesOptions = { ...UNIFORM, order: 2, phases: 'free' };

  it('finds amplitudes and phases', () => {
    const { series, notes } = fitSeries([setOf(truth, round(15), undefined, disturbance(1e-3))], free);
    series[0].forEach(({ v, phase, standardError, phaseStandardError }, n) => {
      expect(v).toBeCloseTo(truth[n].v, 2);
      expect(phase).toBeCloseTo(truth[n].phase, 0);
      expect(standardError).toBeGreaterThan(0);
      expect(phaseStandardError).toBeGreaterThan(0);
    });
    expect(notes).toEqual([]);
  });
  it('has the standard error of the amplitude that the linear form has along it', () => {
    const set = setOf([{ n: 1, v: 2, phase: 0 }], round(15), undefined, disturbance(0.05));
    const { series, residualStandardDeviation: s } = fitSeries([set], { ...free, order: 1 });
    // 24 equidistant points: sum (cos / 2)^2 = 24 / 8
    expect(series[0][0].standardError).toBeCloseTo((s ?? 0) / Math.sqrt(3), 6);
  });
  it('holds phases that half a turn leaves open, and says so', () => {
    const half = setOf(
      usualTerms([1, -2, 0.5]),
      Array.from({ length: 13 }, (_, n) => 15 * n),
      undefined,
      disturbance(0.02),
    );
    const { series, notes } = fitSeries([half], { ...free, order: 3 });
    expect(series[0].map(({ phase }) => phase)).toEqual([0, 180, 0]);
    expect(series[0][1].v).toBeCloseTo(-2, 1);
    expect(notes.map(({ code }) => code)).toContain('fit/phases-held');
  });
  it('restrains amplitudes and leaves phases free', () => {
    const { series } = fitSeries([setOf(truth)], {
      ...free,
      restraint: { kind: 'ridge', strength: 1e5 },
      toward: [
        [
          { n: 1, v: 3, phase: 0 },
          { n: 2, v: -2, phase: 180 },
        ],
      ],
    });
    expect(series[0][0].v).toBeCloseTo(3, 2);
    expect(series[0][0].phase).toBeCloseTo(25, 1);
  });
});

describe('the order by cross-validation', () => {
  it('is that of the series that made the points', () => {
    const set = setOf(usualTerms([1, 2, -0.8]), round(15), undefined, disturbance(0.05));
    for (const folds of ['leave-one-out', 5] as const) {
      const { order, errors } = chooseOrder([set], { from: 1, to: 6 }, UNIFORM, folds);
      expect(order).toBe(3);
      expect(errors[1].error).toBeGreaterThan(5 * (errors[2].error ?? 0));
    }
  });
  it('agrees with the leave-one-out identity of linear fits, e_i / (1 - h_i)', () => {
    // offset alone: h = 1 / N, so each left-out residual is e N / (N - 1)
    const set = setOf(usualTerms([1]), [0, 30, 80, 130, 180], undefined, disturbance(0.3));
    const { errors } = chooseOrder([set], { from: 0, to: 0 }, UNIFORM);
    const values = set.points.map(({ reference }) => reference);
    const mean = values.reduce((sum, value) => sum + value, 0) / 5;
    expect(errors[0].error).toBeCloseTo(Math.sqrt(values.reduce((sum, value) => sum + ((value - mean) * 1.25) ** 2, 0) / 5), 9);
  });
  it('refuses what cannot be split', () => {
    expect(() => chooseOrder([setOf(usualTerms([1]), [0, 90])], { from: 2, to: 3 }, UNIFORM)).toThrow(
      expect.objectContaining({ code: 'fit/points' }),
    );
    expect(() => chooseOrder([setOf(usualTerms([1]))], { from: 1, to: 2 }, UNIFORM, 99)).toThrow(
      expect.objectContaining({ code: 'fit/folds' }),
    );
  });
});

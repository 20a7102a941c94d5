import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { levenbergMarquardt } from './levenberg-marquardt.js';

interface Problem {
  readonly x: readonly number[];
  readonly y: readonly number[];
  readonly starts: readonly (readonly number[])[];
  readonly certified: {
    readonly parameters: readonly number[];
    readonly standardDeviations: readonly number[];
    readonly residualSumOfSquares: number;
  };
}
const problems: Readonly<Record<string, Problem>> = JSON.parse(
  readFileSync(new URL('../../fixtures/nist-strd.json', import.meta.url), 'utf8'),
).problems;

const turn = 2 * Math.PI;
const MODELS: Readonly<Record<string, (b: Float64Array, x: number) => number>> = {
  BoxBOD: ([b1, b2], x) => b1 * (1 - Math.exp(-b2 * x)),
  Eckerle4: ([b1, b2, b3], x) => (b1 / b2) * Math.exp(-0.5 * ((x - b3) / b2) ** 2),
  Kirby2: ([b1, b2, b3, b4, b5], x) => (b1 + x * (b2 + x * b3)) / (1 + x * (b4 + x * b5)),
  Rat42: ([b1, b2, b3], x) => b1 / (1 + Math.exp(b2 - b3 * x)),
  Rat43: ([b1, b2, b3, b4], x) => b1 / (1 + Math.exp(b2 - b3 * x)) ** (1 / b4),
  Thurber: ([b1, b2, b3, b4, b5, b6, b7], x) => (b1 + x * (b2 + x * (b3 + x * b4))) / (1 + x * (b5 + x * (b6 + x * b7))),
  ENSO: ([b1, b2, b3, b4, b5, b6, b7, b8, b9], x) =>
    b1 +
    b2 * Math.cos((turn * x) / 12) +
    b3 * Math.sin((turn * x) / 12) +
    b5 * Math.cos((turn * x) / b4) +
    b6 * Math.sin((turn * x) / b4) +
    b8 * Math.cos((turn * x) / b7) +
    b9 * Math.sin((turn * x) / b7),
};

/** Significant digits on which a value agrees with a certified one. */
const digits = (value: number, certified: number): number => -Math.log10(Math.abs(value / certified - 1) + 1e-16);

const solve = (name: string, start: readonly number[]) => {
  const { x, y } = problems[name];
  return levenbergMarquardt({
    observed: y,
    start,
    model: (b, values) => {
      for (let i = 0; i < values.length; i++) values[i] = MODELS[name](b, x[i]);
    },
  });
};

// certified values: NIST Statistical Reference Datasets, nonlinear regression
describe.each(Object.keys(problems))('the NIST problem %s', (name) => {
  const { starts, certified } = problems[name];
  it.each([0, 1])('has its certified parameters and standard deviations from start %i, or says that it has not', (n) => {
    let fit: ReturnType<typeof solve>;
    try {
      fit = solve(name, starts[n]);
    } catch (error) {
      // the far start of BoxBOD leads to where the exponential has died out at every point
      expect([name, n]).toEqual(['BoxBOD', 0]);
      expect(error).toMatchObject({ code: expect.stringMatching(/^fit\/not-(converged|determined)$/) });
      return;
    }
    certified.parameters.forEach((value, k) => {
      expect(digits(fit.parameters[k], value)).toBeGreaterThan(6);
      expect(digits(fit.standardErrors?.[k] ?? 0, certified.standardDeviations[k])).toBeGreaterThan(4);
    });
    expect(digits(fit.residualSumOfSquares, certified.residualSumOfSquares)).toBeGreaterThan(6);
  });
});

describe('Levenberg-Marquardt', () => {
  const line = (observed: readonly number[], more: object = {}) =>
    levenbergMarquardt({
      observed,
      start: [0, 0],
      model: ([a, b], values) => {
        for (let i = 0; i < values.length; i++) values[i] = a + b * i;
      },
      ...more,
    });

  it('meets exact data', () => {
    const { parameters, residualSumOfSquares } = line([1, 3, 5, 7]);
    expect(parameters[0]).toBeCloseTo(1, 9);
    expect(parameters[1]).toBeCloseTo(2, 9);
    expect(residualSumOfSquares).toBeLessThan(1e-18);
  });
  it('weights squared residuals: weight 2 is a point taken twice', () => {
    const weighted = line([1, 3, 4, 7], { weights: [1, 2, 1, 1], independent: 5 });
    // normal equations of the points (0,1) (1,3) (1,3) (2,4) (3,7) by hand: n 5, x 7, xx 15, y 18, xy 35
    expect(weighted.parameters[1]).toBeCloseTo((5 * 35 - 7 * 18) / (5 * 15 - 49), 8);
    expect(weighted.degreesOfFreedom).toBe(3);
  });
  it('refuses fewer observations than parameters and a model that is not finite', () => {
    expect(() => line([1])).toThrow(expect.objectContaining({ code: 'fit/points' }));
    expect(() => line([1, 2, 3], { start: [Number.NaN, 0] })).toThrow(expect.objectContaining({ code: 'fit/model' }));
  });
  it('says when the data say nothing about a parameter', () => {
    const flat = { observed: [1, 2, 4], start: [1, 1], model: ([a]: Float64Array, values: Float64Array) => values.fill(a) };
    expect(() => levenbergMarquardt({ ...flat, model: flat.model as never })).toThrow(
      expect.objectContaining({ code: 'fit/not-determined' }),
    );
  });
});

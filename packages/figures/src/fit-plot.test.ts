import { describe, expect, it } from 'vitest';
import { type FitFigure, fitPlot } from './fit-plot.js';
import { FONTS_INSTALLED, pixels } from './pixels.fixture.js';

/** Invented curves: a reference, one with half its twofold term, and one that is 0.1 kcal/mol off everywhere. */
const angles = Array.from({ length: 24 }, (_, n) => -180 + 15 * n);
const twofold = (factor: number, shift: number): number[] =>
  angles.map((angle) => factor * (1 - Math.cos((2 * angle * Math.PI) / 180)) + shift);
const figure: FitFigure = {
  title: 'invented ether',
  unit: 'kcal/mol',
  elements: ['C', 'O', 'C', 'C'],
  torsion: [0, 1, 2, 3],
  angles,
  reference: { label: 'reference', energies: twofold(2, 0) },
  before: { label: 'before', energies: twofold(1, 0) },
  after: { label: 'after', energies: twofold(2, 0.1) },
  footnote: 'uniform weights',
};

describe('fitPlot', () => {
  it('draws reference, both curves and their residuals, well-formed and reproducible', () => {
    const svg = fitPlot(figure);
    expect(svg).toBe(fitPlot(figure));
    expect(svg.match(/<path /g)).toHaveLength(4);
    expect(svg.match(/r="3"/g)).toHaveLength(angles.length + 2);
    for (const text of ['>Difference<', '>Relative energy (kcal/mol)<', 'Torsion angle C0–O1–C2–C3 (degree)', 'uniform weights'])
      expect(svg).toContain(text);
    expect(svg).not.toMatch(/NaN|Infinity|undefined/);
    expect(pixels(svg, true).equals(pixels(svg, false))).toBe(!FONTS_INSTALLED);
  });

  it('draws no curve over angles where nothing is known', () => {
    const half = angles.flatMap((angle, n) => (angle >= 0 ? [n] : []));
    const kept = (curve: FitFigure['after']) => ({ ...curve, energies: half.map((n) => curve.energies[n]) });
    const { reference, before, after } = figure;
    const svg = fitPlot({
      ...figure,
      angles: half.map((n) => angles[n]),
      reference: kept(reference),
      before: kept(before),
      after: kept(after),
    });
    const paths = [...svg.matchAll(/<path d="([^"]*)"/g)].map(([, d]) =>
      [...d.matchAll(/-?\d+(?:\.\d+)?/g)].map(([value]) => Number(value)),
    );
    expect(paths).toHaveLength(4);
    // 0 degrees is the middle of the axis, between 66 and 774 px
    for (const numbers of paths) expect(Math.min(...numbers.filter((_, k) => k % 2 === 0))).toBeCloseTo(420, 0);
  });

  it('writes the deviations: the mean square of 1 - cos is 1.5, that of a shift its square', () => {
    const svg = fitPlot(figure);
    expect(svg).toContain('before (1.22)');
    expect(svg).toContain('after (0.10)');
    expect(svg).toContain('before: root-mean-square deviation 1.22, largest 2.00 kcal/mol');
  });

  it('refuses lists that do not match, values that are no numbers, and sizes without room', () => {
    const broken = (energies: number[]) => () => fitPlot({ ...figure, after: { label: 'after', energies } });
    expect(broken(twofold(1, 0).slice(1))).toThrow(expect.objectContaining({ code: 'figure/fit' }));
    expect(broken(twofold(1, Number.NaN))).toThrow(expect.objectContaining({ code: 'figure/fit' }));
    expect(() => fitPlot(figure, { height: 200 })).toThrow(expect.objectContaining({ code: 'figure/fit' }));
  });
});

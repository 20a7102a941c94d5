import { TordialError } from '@tordial/geometry';
import type { EnergyUnit } from '@tordial/scan';
import { angleScale, angleTitle, energyScale, energyTitle, frame } from './axes.js';
import { type CurveSegment, curveParts, curvePath } from './curve-parts.js';
import { energyText } from './format.js';
import { atBothEdges } from './profile-layout.js';
import { element, svgDocument, textLine } from './svg.js';
import { type LegendEntry, legend } from './symbols.js';
import { fitText } from './text-width.js';
import { type FigureTheme, LIGHT_THEME } from './theme.js';

/** Energy at the angles of a scan. */
export interface FitCurve {
  /** What the legend calls it. */
  readonly label: string;
  /** One an angle of the figure, in its unit. */
  readonly energies: readonly number[];
}

/** A torsion fit as it is drawn. All energies are relative to a common zero that the caller chooses. */
export interface FitFigure {
  readonly title: string;
  readonly unit: EnergyUnit;
  readonly elements: readonly string[];
  readonly torsion: readonly [number, number, number, number];
  /** Degrees, ascending in [-180, 180). */
  readonly angles: readonly number[];
  readonly reference: FitCurve;
  readonly before: FitCurve;
  readonly after: FitCurve;
  /** A line of small print: weights, terms, source of the reference. */
  readonly footnote?: string;
}

export interface FitPlotOptions {
  /** px; 800 by default. */
  readonly width?: number;
  /** px; 560 by default. */
  readonly height?: number;
  readonly theme?: FigureTheme;
}

const SIDE = { left: 66, right: 26 };
const HEADER = 62;
const PANEL_GAP = 26;
const AXIS = 46;
const FOOTER = 28;
const TEXT_SIZE = 11;
const TITLE_SIZE = 16;
const RESIDUAL_SHARE = 0.3;
const SMALLEST_RANGE = 0.05;

/**
 * A torsion fit: the reference as points, the curves before and after the fit, and below them what each leaves over (curve minus reference), with
 * the root-mean-square deviations in the legend. Curves are drawn smoothly through their values at the scan's angles.
 *
 * Returns an SVG document. Throws `figure/fit` when the lists differ in length, hold a value that is no number, or the size leaves no room.
 */
export function fitPlot(fit: FitFigure, options: FitPlotOptions = {}): string {
  const { theme = LIGHT_THEME, width = 800, height = 560 } = options;
  const { unit, angles, reference, before, after } = fit;
  for (const { label, energies } of [reference, before, after])
    if (energies.length !== angles.length || energies.some((energy) => !Number.isFinite(energy)))
      throw new TordialError('figure/fit', `'${label}' needs one finite energy for each of the ${angles.length} angles`);
  const bottom = height - AXIS - FOOTER;
  const inner = bottom - HEADER - PANEL_GAP;
  if (inner < 160 || width < 300) throw new TordialError('figure/fit', `${width} by ${height} px leave no room for the two panels`);

  const columns = { left: SIDE.left, right: width - SIDE.right };
  const upper = { ...columns, top: HEADER, bottom: HEADER + (1 - RESIDUAL_SHARE) * inner };
  const lower = { ...columns, top: bottom - RESIDUAL_SHARE * inner, bottom };
  const x = angleScale(columns);
  const left = { before: difference(before.energies, reference.energies), after: difference(after.energies, reference.energies) };
  const all = [...reference.energies, ...before.energies, ...after.energies];
  const energies = energyScale(Math.min(...all), Math.max(Math.min(...all) + SMALLEST_RANGE, ...all), upper, 14);
  const largest = Math.max(SMALLEST_RANGE, ...left.before.map(Math.abs), ...left.after.map(Math.abs));
  const residuals = energyScale(-largest, largest, lower, 10);

  const styles = {
    before: { fill: 'none', stroke: theme.compared, 'stroke-width': 1.6, 'stroke-dasharray': '6 4' },
    after: { fill: 'none', stroke: theme.curve, 'stroke-width': 2 },
  };
  const lines = (values: readonly number[], y: (energy: number) => number, style: Readonly<Record<string, string | number>>): string[] =>
    smoothCurve(angles, values).map((run) => element('path', { d: curvePath(run, x, y), ...style }));
  const dot = (px: number, py: number): string => element('circle', { cx: px, cy: py, r: 3, fill: theme.ink });
  const line = (style: Readonly<Record<string, string | number>>) => (px: number, py: number) =>
    element('line', { x1: px - 12, x2: px + 12, y1: py, y2: py, ...style });
  const entries: LegendEntry[] = [
    { label: reference.label, width: 8, symbol: dot },
    { label: `${before.label} (${energyText(rootMeanSquare(left.before), unit)})`, width: 24, symbol: line(styles.before) },
    { label: `${after.label} (${energyText(rootMeanSquare(left.after), unit)})`, width: 24, symbol: line(styles.after) },
  ];
  const row = legend(entries, columns.right, 41, TEXT_SIZE, theme);

  return svgDocument(
    { width, height, title: fit.title, description: describe(fit, left), background: theme.background },
    element(
      'g',
      { 'font-family': theme.fontFamily, 'font-size': TEXT_SIZE },
      textLine(columns.left, 27, fitText(fit.title, columns.right - columns.left, TITLE_SIZE, true), {
        'font-size': TITLE_SIZE,
        'font-weight': 'bold',
        fill: theme.ink,
      }),
      textLine(columns.left, 45, fitText(`root-mean-square deviation in brackets, ${unit}`, row.left - columns.left, TEXT_SIZE), {
        fill: theme.quiet,
      }),
      ...row.markup,
      ...frame(upper, energies, theme, { angles: false }),
      ...frame(lower, residuals, theme),
      element('line', {
        x1: columns.left,
        x2: columns.right,
        y1: residuals.y(0),
        y2: residuals.y(0),
        stroke: theme.line,
        'stroke-width': 1,
      }),
      energyTitle(upper, `Relative energy (${unit})`, theme),
      energyTitle(lower, 'Difference', theme),
      angleTitle(lower, fit, fit.torsion, theme),
      ...lines(before.energies, energies.y, styles.before),
      ...lines(after.energies, energies.y, styles.after),
      ...angles.flatMap((angle, n) => atBothEdges(angle).map((shown) => dot(x(shown), energies.y(reference.energies[n])))),
      ...lines(left.before, residuals.y, styles.before),
      ...lines(left.after, residuals.y, styles.after),
      textLine(columns.left, height - 12, fitText(fit.footnote ?? '', columns.right - columns.left, 10), {
        'font-size': 10,
        fill: theme.quiet,
      }),
    ),
  );
}

function difference(values: readonly number[], from: readonly number[]): number[] {
  return values.map((value, n) => value - from[n]);
}

function rootMeanSquare(values: readonly number[]): number {
  return Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length);
}

/** Degrees without a value above which nothing is drawn between two angles, if that is also well above the usual spacing. */
const WIDEST = 45;

/**
 * A smooth curve through values whose slopes are not known: at each angle that of the parabola through it and its nearest neighbours. It goes round the
 * turn but not across a stretch of angles where nothing is known.
 */
function smoothCurve(angles: readonly number[], values: readonly number[]): readonly (readonly CurveSegment[])[] {
  const count = angles.length;
  const place = (n: number): number => (n + count) % count;
  const ahead = angles.map((angle, n) => (((angles[place(n + 1)] - angle) % 360) + 360) % 360);
  const usual = [...ahead].sort((p, q) => p - q)[Math.floor(count / 2)];
  const gap = ahead.map((width) => width > WIDEST && width > 1.5 * usual);
  const slope = (n: number): number => (values[place(n + 1)] - values[place(n)]) / ((ahead[place(n)] * Math.PI) / 180);
  /** Slope at the point between two intervals, from the secants of both. */
  const between = (p: number, q: number): number =>
    (slope(p) * ahead[place(q)] + slope(q) * ahead[place(p)]) / (ahead[place(p)] + ahead[place(q)]);
  /** Slope at the outer end of interval `end`, whose other neighbour is the interval `inner`. */
  const outer = (end: number, inner: number): number => (gap[place(inner)] ? slope(end) : 2 * slope(end) - between(end, inner));
  const points = angles.map((angle, n) => {
    const starts = gap[place(n - 1)];
    const torque = starts ? (gap[n] ? 0 : outer(n, n + 1)) : gap[n] ? outer(n - 1, n - 2) : between(n - 1, n);
    return { ...FREE, angle, energy: values[n], relativeEnergy: values[n], torque, breakAfter: gap[n] };
  });
  return curveParts(points).smooth;
}

const FREE = { converged: true, residual: null, beyond: null, before: null, coordinates: [] };

function describe(
  { title, unit, angles, before, after }: FitFigure,
  left: { readonly before: readonly number[]; readonly after: readonly number[] },
): string {
  const deviation = (label: string, values: readonly number[]): string =>
    `${label}: root-mean-square deviation ${energyText(rootMeanSquare(values), unit)}, largest ${energyText(Math.max(...values.map(Math.abs)), unit)} ${unit}`;
  return `Torsion fit of ${title} at ${angles.length} angles. ${deviation(before.label, left.before)}. ${deviation(after.label, left.after)}.`;
}

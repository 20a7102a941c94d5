/** The frame of a plot of energy over torsion angle: grid, ticks, titles. */
import type { DocumentMolecule } from '@tordial/scan';
import { type ScaleLinear, scaleLinear } from 'd3-scale';
import type { Box } from './boxes.js';
import { coordinate, element, textLine } from './svg.js';
import type { FigureTheme } from './theme.js';

export interface Tick {
  readonly value: number;
  readonly text: string;
}

export interface EnergyScale {
  /** Position of an energy, px. */
  readonly y: (energy: number) => number;
  readonly ticks: readonly Tick[];
}

const WIDE = 420;
const TICK_DISTANCE = 50;
const TITLE_SIZE = 12;

/** First and last angle of an axis, degrees. */
export type AngleDomain = readonly [number, number];

const FULL_TURN: AngleDomain = [-180, 180];

/** Position of an angle within the domain, px. */
export function angleScale({ left, right }: Pick<Box, 'left' | 'right'>, [from, to] = FULL_TURN): (angle: number) => number {
  return (angle) => left + ((angle - from) / (to - from)) * (right - left);
}

/** Round angles within the domain, about as many as the width has room for. */
function marksOf(plot: Pick<Box, 'left' | 'right'>, [from, to]: AngleDomain): number[] {
  const most = plot.right - plot.left > WIDE ? 12 : 6;
  const step = [1, 2, 5, 10, 15, 30, 60].find((one) => (to - from) / one <= most) ?? 60;
  const first = Math.ceil(from / step - 1e-9);
  return Array.from({ length: Math.floor(to / step + 1e-9) - first + 1 }, (_, n) => (first + n) * step + 0);
}

/**
 * A scale from `lowest` to `highest` energy with `headroom` px free above and below; ticks stand at round numbers within the energies, not in the
 * free room below.
 */
export function energyScale(lowest: number, highest: number, plot: Pick<Box, 'top' | 'bottom'>, headroom: number): EnergyScale {
  const height = plot.bottom - plot.top;
  const room = ((highest - lowest) * headroom) / (height - 2 * headroom);
  const scale: ScaleLinear<number, number> = scaleLinear()
    .domain([lowest - room, highest + room])
    .range([plot.bottom, plot.top]);
  const count = Math.max(3, Math.round(height / TICK_DISTANCE));
  const text = scale.tickFormat(count);
  const ticks = scale
    .ticks(count)
    .filter((value) => value >= lowest - 1e-9)
    .map((value) => ({ value, text: text(value) }));
  return { y: (energy) => scale(energy), ticks };
}

/** Grid lines, frame and ticks. The angles are written below the frame unless `angles` is false. */
export function frame(
  plot: Box,
  { y, ticks }: EnergyScale,
  theme: FigureTheme,
  { angles = true, domain = FULL_TURN }: { readonly angles?: boolean; readonly domain?: AngleDomain } = {},
): string[] {
  const x = angleScale(plot, domain);
  const marked = marksOf(plot, domain);
  const lines = [
    ...marked.map((angle) => ({ x1: x(angle), x2: x(angle), y1: plot.top, y2: plot.bottom })),
    ...ticks.map(({ value }) => ({ x1: plot.left, x2: plot.right, y1: y(value), y2: y(value) })),
  ];
  return [
    ...lines.map((line) => element('line', { ...line, stroke: theme.grid, 'stroke-width': 1 })),
    element('rect', {
      x: plot.left,
      y: plot.top,
      width: plot.right - plot.left,
      height: plot.bottom - plot.top,
      fill: 'none',
      stroke: theme.line,
      'stroke-width': 1,
    }),
    ...marked.flatMap((angle) => [
      element('line', { x1: x(angle), x2: x(angle), y1: plot.bottom, y2: plot.bottom + 4, stroke: theme.line }),
      angles ? textLine(x(angle), plot.bottom + 17, String(angle).replace('-', '−'), { 'text-anchor': 'middle', fill: theme.ink }) : '',
    ]),
    ...ticks.flatMap(({ value, text }) => [
      element('line', { x1: plot.left - 4, x2: plot.left, y1: y(value), y2: y(value), stroke: theme.line }),
      textLine(plot.left - 8, y(value) + 4, text, { 'text-anchor': 'end', fill: theme.ink }),
    ]),
  ];
}

/** The title below the frame; names the torsion's atoms by element and index. */
export function angleTitle(
  plot: Box,
  { elements }: Pick<DocumentMolecule, 'elements'>,
  torsion: readonly number[],
  theme: FigureTheme,
): string {
  const atoms = torsion.map((atom) => `${elements[atom]}${atom}`).join('–');
  return textLine((plot.left + plot.right) / 2, plot.bottom + 37, `Torsion angle ${atoms} (degree)`, {
    'text-anchor': 'middle',
    'font-size': TITLE_SIZE,
    fill: theme.ink,
  });
}

/** The title beside the frame, read upwards. */
export function energyTitle(plot: Box, title: string, theme: FigureTheme): string {
  const x = plot.left - 46;
  const y = (plot.top + plot.bottom) / 2;
  return textLine(x, y, title, {
    'text-anchor': 'middle',
    'font-size': TITLE_SIZE,
    fill: theme.ink,
    transform: `rotate(-90 ${coordinate(x)} ${coordinate(y)})`,
  });
}

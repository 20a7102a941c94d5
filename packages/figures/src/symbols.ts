/** The marks that figures share, so that a legend shows what the plot shows. */
import { coordinate, element, textLine } from './svg.js';
import { textWidth } from './text-width.js';
import type { FigureTheme } from './theme.js';

export type MarkKind = 'well' | 'barrier' | 'crossing' | 'point' | 'unconverged' | 'change';

/** How a branch is drawn where it is only estimated. */
export const ESTIMATED = { 'stroke-width': 1.4, 'stroke-dasharray': '1.5 3' };

/** A mark centred on (x, y). */
export function mark(kind: MarkKind, x: number, y: number, theme: FigureTheme): string {
  const around = { stroke: theme.background, 'stroke-width': 1 };
  switch (kind) {
    case 'well':
      return element('circle', { cx: x, cy: y, r: 4.6, fill: theme.well, ...around });
    case 'barrier':
      return element('path', { d: diamond(x, y), fill: theme.barrier, ...around });
    case 'crossing':
      return element('path', { d: diamond(x, y), fill: theme.background, stroke: theme.crossing, 'stroke-width': 1.6 });
    case 'point':
      return element('circle', { cx: x, cy: y, r: 2.3, fill: theme.background, stroke: theme.curve, 'stroke-width': 1.2 });
    case 'change':
      return element('line', { x1: x, x2: x, y1: y - 6, y2: y + 6, stroke: theme.crossing, 'stroke-width': 1.6 });
    case 'unconverged': {
      const d = `M ${coordinate(x - 4)} ${coordinate(y - 4)} l 8 8 M ${coordinate(x - 4)} ${coordinate(y + 4)} l 8 -8`;
      return element('path', { d, fill: 'none', stroke: theme.unconverged, 'stroke-width': 1.8 });
    }
  }
}

function diamond(x: number, y: number): string {
  return `M ${coordinate(x)} ${coordinate(y - 5.6)} l 5.6 5.6 l -5.6 5.6 l -5.6 -5.6 Z`;
}

export interface LegendEntry {
  readonly label: string;
  /** The symbol's width, px, and its drawing about (x, y). */
  readonly width: number;
  readonly symbol: (x: number, y: number) => string;
}

const SYMBOL_GAP = 6;
const ENTRY_GAP = 14;

/** Entries in a row that ends at `right`, and where it begins. */
export function legend(
  entries: readonly LegendEntry[],
  right: number,
  y: number,
  fontSize: number,
  theme: FigureTheme,
): { readonly markup: string[]; readonly left: number } {
  const markup: string[] = [];
  let left = right;
  for (const { label, width, symbol } of [...entries].reverse()) {
    left -= textWidth(label, fontSize);
    markup.push(textLine(left, y + 0.36 * fontSize, label, { 'font-size': fontSize, fill: theme.quiet }));
    left -= SYMBOL_GAP + width / 2;
    markup.push(symbol(left, y));
    left -= width / 2 + ENTRY_GAP;
  }
  return { markup, left };
}

import type { NewmanLayout } from './newman.js';
import { spread } from './spread.js';

/** One projection that wants to hang above x (px). */
export interface StripItem {
  readonly x: number;
  readonly layout: NewmanLayout;
}

export interface StripCard {
  /** Centre of the circle, px from the strip's left and top edge. */
  readonly x: number;
  readonly y: number;
  readonly captionY: number;
}

export interface NewmanStrip {
  readonly scale: number;
  readonly height: number;
  /** One for each item, in order. */
  readonly cards: readonly StripCard[];
}

const GAP = 12;
const CAPTION = 17;
/** Smaller projections than this in one row are set in two. */
const LEAST_IN_ONE_ROW = 0.82;
const ROW_GAP = 8;

/**
 * Sets projections in a strip of given width, each as near to its x as the others allow, all at the same scale; where one row would make them too
 * small they stand alternately high and low, so that leader lines from the upper ones pass between the lower ones.
 */
export function newmanStrip(items: readonly StripItem[], width: number, largestScale: number): NewmanStrip {
  if (items.length === 0) return { scale: largestScale, height: 0, cards: [] };
  const widths = items.map(({ layout: { bounds } }) => bounds.right - bounds.left);
  const above = Math.max(...items.map(({ layout }) => -layout.bounds.top));
  const below = Math.max(...items.map(({ layout }) => layout.bounds.bottom));
  const total = widths.reduce((sum, one) => sum + one, 0);
  const oneRow = Math.min(largestScale, (width - GAP * items.length) / total);
  const twoRows = oneRow < LEAST_IN_ONE_ROW && items.length > 2;
  // in two rows a card is as wide as half its own projection and half the wider neighbour's: the row of lower cards needs room for leaders only
  const widest = Math.max(...widths);
  const slots = twoRows ? widths.map(() => widest / 2) : widths;
  const taken = slots.reduce((sum, one) => sum + one, 0) + (twoRows ? widest / 2 : 0);
  const scale = twoRows ? Math.min(largestScale, (width - GAP * items.length) / taken) : oneRow;
  const margin = twoRows ? (scale * widest) / 4 : 0;
  const centres = spread(
    items.map(({ x, layout }) => x + (scale * (layout.bounds.left + layout.bounds.right)) / 2),
    slots.map((one) => scale * one + GAP),
    margin,
    width - margin,
  );
  const rowHeight = scale * (above + below) + CAPTION;
  return {
    scale,
    height: twoRows ? 2 * rowHeight + ROW_GAP : rowHeight,
    cards: items.map(({ layout }, n) => {
      const row = twoRows && n % 2 === 1 ? 1 : 0;
      const top = row * (rowHeight + ROW_GAP);
      return {
        x: centres[n] - (scale * (layout.bounds.left + layout.bounds.right)) / 2,
        y: top + scale * above,
        captionY: top + rowHeight - 3,
      };
    }),
  };
}

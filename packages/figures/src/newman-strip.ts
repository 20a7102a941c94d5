import type { NewmanLayout } from './newman.js';
import { spread } from './spread.js';

/** One projection that wants to hang above x (px). */
export interface StripItem {
  readonly x: number;
  readonly layout: Pick<NewmanLayout, 'bounds'>;
}

export interface StripCard {
  /** Centre of the circle, px from the strip's left and top edge; the caption stands below it. */
  readonly x: number;
  readonly y: number;
  readonly captionY: number;
}

export interface NewmanStrip {
  readonly scale: number;
  readonly rows: 1 | 2;
  readonly height: number;
  /** One for each item, in order. */
  readonly cards: readonly StripCard[];
}

const GAP = 10;
const CAPTION = 18;
const ROW_GAP = 8;
/** Half the width that a caption needs, px. */
const CAPTION_REACH = 24;
/** Projections that one row would shrink further than this are set in two. */
const LEAST_IN_ONE_ROW = 0.82;
const SHRINKING = 0.98;

/**
 * Sets projections in a strip of given width, each as near to its x as the others allow, all at the same scale (1 or less). Where one row would make
 * them too small they stand alternately high and low, and leader lines from the upper ones pass between the lower ones.
 */
export function newmanStrip(items: readonly StripItem[], width: number): NewmanStrip {
  if (items.length === 0) return { scale: 1, rows: 1, height: 0, cards: [] };
  const single = fit(items, width, 1);
  const { scale, rows, distances, from, to } = single.scale >= LEAST_IN_ONE_ROW || items.length < 3 ? single : fit(items, width, 2);
  const centres = spread(
    items.map(({ x }) => x),
    distances,
    from,
    to,
  );
  const above = scale * Math.max(...items.map(({ layout }) => -layout.bounds.top));
  const rowHeight = above + scale * Math.max(...items.map(({ layout }) => layout.bounds.bottom)) + CAPTION;
  return {
    scale,
    rows,
    height: rows === 2 ? 2 * rowHeight + ROW_GAP : rowHeight,
    cards: centres.map((x, n) => {
      const top = rows === 2 && n % 2 === 1 ? rowHeight + ROW_GAP : 0;
      return { x, y: top + above, captionY: top + rowHeight - 3 };
    }),
  };
}

interface Fit {
  readonly scale: number;
  readonly rows: 1 | 2;
  readonly distances: readonly number[];
  readonly from: number;
  readonly to: number;
}

/** The largest scale at which the projections fit into the width, with the distances that keep them apart. */
function fit(items: readonly StripItem[], width: number, rows: 1 | 2): Fit {
  for (let scale = 1; ; scale *= SHRINKING) {
    const left = items.map(({ layout }) => Math.max(CAPTION_REACH, -scale * layout.bounds.left));
    const right = items.map(({ layout }) => Math.max(CAPTION_REACH, scale * layout.bounds.right));
    // between rows it is a leader line of the upper one that has to pass by the lower one
    const distances = items.slice(1).map((_, n) => GAP + (rows === 1 ? right[n] + left[n + 1] : n % 2 === 1 ? right[n] : left[n + 1]));
    if (rows === 2)
      for (let n = 0; n + 2 < items.length; n++) {
        const lacking = right[n] + left[n + 2] + GAP - distances[n] - distances[n + 1];
        if (lacking > 0) {
          distances[n] += lacking / 2;
          distances[n + 1] += lacking / 2;
        }
      }
    const last = items.length - 1;
    const from = rows === 2 && last > 0 ? Math.max(left[0], left[1] - distances[0]) : left[0];
    const to = width - (rows === 2 && last > 0 ? Math.max(right[last], right[last - 1] - distances[last - 1]) : right[last]);
    const fits = distances.reduce((sum, one) => sum + one, 0) <= to - from;
    if (fits || scale < 0.2) return { scale, rows, distances, from, to };
  }
}

/** Rectangles on the page, px: left, top, right, bottom, y downwards. */
export interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

/** Whether two boxes come closer than `margin` to each other. */
export function boxesOverlap(p: Box, q: Box, margin = 0): boolean {
  return p.left < q.right + margin && q.left < p.right + margin && p.top < q.bottom + margin && q.top < p.bottom + margin;
}

/** Whether the segment (x0, y0)-(x1, y1) comes closer than `margin` to the box, measured along the axes. */
export function segmentMeetsBox(x0: number, y0: number, x1: number, y1: number, box: Box, margin = 0): boolean {
  const left = box.left - margin;
  const right = box.right + margin;
  const top = box.top - margin;
  const bottom = box.bottom + margin;
  if (Math.max(x0, x1) < left || Math.min(x0, x1) > right || Math.max(y0, y1) < top || Math.min(y0, y1) > bottom) return false;
  // the segment's extent meets the box: so does the segment unless all four corners lie on one side of its line
  const dx = x1 - x0;
  const dy = y1 - y0;
  const a = dx * (top - y0) - dy * (left - x0);
  const b = dx * (top - y0) - dy * (right - x0);
  const c = dx * (bottom - y0) - dy * (left - x0);
  const d = dx * (bottom - y0) - dy * (right - x0);
  return !((a > 0 && b > 0 && c > 0 && d > 0) || (a < 0 && b < 0 && c < 0 && d < 0));
}

/** The smallest box around all given ones. Throws nothing; an empty list gives a box without extent at the origin. */
export function boundingBox(boxes: readonly Box[]): Box {
  if (boxes.length === 0) return { left: 0, top: 0, right: 0, bottom: 0 };
  return {
    left: Math.min(...boxes.map(({ left }) => left)),
    top: Math.min(...boxes.map(({ top }) => top)),
    right: Math.max(...boxes.map(({ right }) => right)),
    bottom: Math.max(...boxes.map(({ bottom }) => bottom)),
  };
}

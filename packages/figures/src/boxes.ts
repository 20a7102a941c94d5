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

/** Whether the segment (x0, y0)-(x1, y1) comes closer than `margin` to the box (measured along the axes); Liang and Barsky's clipping (1984). */
export function segmentMeetsBox(x0: number, y0: number, x1: number, y1: number, box: Box, margin = 0): boolean {
  const dx = x1 - x0;
  const dy = y1 - y0;
  let enter = 0;
  let leave = 1;
  const sides = [
    [-dx, x0 - box.left + margin],
    [dx, box.right + margin - x0],
    [-dy, y0 - box.top + margin],
    [dy, box.bottom + margin - y0],
  ];
  for (const [step, room] of sides) {
    if (step === 0) {
      if (room < 0) return false;
    } else if (step < 0) enter = Math.max(enter, room / step);
    else leave = Math.min(leave, room / step);
  }
  return enter <= leave;
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

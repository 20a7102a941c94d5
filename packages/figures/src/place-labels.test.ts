import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { boxesOverlap, segmentMeetsBox } from './boxes.js';
import { type LabelRequest, placeLabels, type Segment } from './place-labels.js';

const FRAME = { left: 0, top: 0, right: 600, bottom: 300 };
const NOTHING = { boxes: [], segments: [], avoided: [] };

function request(x: number, y: number, side: 'above' | 'below' = 'above'): LabelRequest {
  return { x, y, width: 50, height: 24, side };
}

describe('placeLabels', () => {
  it('takes the preferred side when it is free', () => {
    const [above, below] = placeLabels([request(100, 150), request(400, 150, 'below')], NOTHING, FRAME);
    expect(above?.box).toMatchObject({ left: 75, right: 125, bottom: 142 });
    expect(below?.box).toMatchObject({ left: 375, right: 425, top: 158 });
    expect(above?.tie).toBeUndefined();
  });

  it('turns inwards at the frame', () => {
    const [label] = placeLabels([request(2, 5)], NOTHING, FRAME);
    expect(label && label.box.left >= 0 && label.box.top >= 0).toBe(true);
  });

  it('makes room for a label that finds none', () => {
    const crowd = [-104, -97, -89, -87, -75].map((angle) => request(300 + 2 * angle, 250, 'below'));
    const floor: Segment = [0, 250, 600, 250];
    const placed = placeLabels(crowd, { ...NOTHING, segments: [floor] }, FRAME);
    expect(placed.every((label) => label)).toBe(true);
  });

  it('never lets labels, obstacles and the frame touch', () => {
    const point = fc.record({ x: fc.integer({ min: 0, max: 600 }), y: fc.integer({ min: 0, max: 300 }), below: fc.boolean() });
    fc.assert(
      fc.property(fc.array(point, { maxLength: 12 }), fc.integer({ min: 40, max: 260 }), (points, height) => {
        const requests = points.map(({ x, y, below }) => request(x, y, below ? 'below' : 'above'));
        const segments: Segment[] = [[0, height, 600, 300 - height]];
        const placed = placeLabels(requests, { ...NOTHING, segments }, FRAME).flatMap((label) => (label ? [label] : []));
        placed.forEach(({ box, tie }, n) => {
          expect(box.left >= 0 && box.top >= 0 && box.right <= 600 && box.bottom <= 300).toBe(true);
          expect(segmentMeetsBox(...segments[0], box)).toBe(false);
          placed.forEach((other, m) => {
            if (m === n) return;
            expect(boxesOverlap(box, other.box)).toBe(false);
            if (tie) expect(segmentMeetsBox(...tie, other.box)).toBe(false);
          });
        });
      }),
      { seed: 11, numRuns: 100 },
    );
  });
});

import { describe, expect, it } from 'vitest';
import { boundingBox, boxesOverlap, segmentMeetsBox } from './boxes.js';

const box = { left: 10, top: 10, right: 20, bottom: 16 };

describe('boxes', () => {
  it('tells overlap from distance', () => {
    expect(boxesOverlap(box, { left: 19, top: 15, right: 30, bottom: 30 })).toBe(true);
    expect(boxesOverlap(box, { left: 21, top: 10, right: 30, bottom: 16 })).toBe(false);
    expect(boxesOverlap(box, { left: 21, top: 10, right: 30, bottom: 16 }, 2)).toBe(true);
  });

  it('finds segments that cross a box, end in it, lie in it or pass by', () => {
    expect(segmentMeetsBox(0, 0, 30, 26, box)).toBe(true);
    expect(segmentMeetsBox(0, 12, 12, 12, box)).toBe(true);
    expect(segmentMeetsBox(12, 12, 14, 13, box)).toBe(true);
    expect(segmentMeetsBox(15, 0, 15, 30, box)).toBe(true);
    expect(segmentMeetsBox(0, 20, 30, 20, box)).toBe(false);
    expect(segmentMeetsBox(0, 20, 30, 20, box, 4)).toBe(true);
    expect(segmentMeetsBox(0, 0, 9, 30, box)).toBe(false);
  });

  it('surrounds boxes', () => {
    expect(boundingBox([box, { left: -1, top: 12, right: 3, bottom: 40 }])).toEqual({ left: -1, top: 10, right: 20, bottom: 40 });
  });
});

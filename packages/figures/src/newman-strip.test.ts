import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { newmanStrip } from './newman-strip.js';

const WIDTH = 770;

describe('newmanStrip', () => {
  it('hangs a few projections above their points at full size', () => {
    const bounds = { left: -50, right: 50, top: -45, bottom: 45 };
    const strip = newmanStrip(
      [100, 300, 600].map((x) => ({ x, layout: { bounds } })),
      WIDTH,
    );
    expect(strip.scale).toBe(1);
    expect(strip.cards.map(({ x }) => x)).toEqual([100, 300, 600]);
  });

  it('keeps projections, captions and the leader lines of the upper row apart', () => {
    const item = fc.record({
      x: fc.integer({ min: 0, max: WIDTH }),
      left: fc.integer({ min: 20, max: 95 }),
      right: fc.integer({ min: 20, max: 95 }),
    });
    fc.assert(
      fc.property(fc.array(item, { minLength: 1, maxLength: 12 }), (items) => {
        const placed = items
          .sort((p, q) => p.x - q.x)
          .map(({ x, left, right }) => ({ x, layout: { bounds: { left: -left, right, top: -45, bottom: 45 } } }));
        const { cards, scale } = newmanStrip(placed, WIDTH);
        const extent = cards.map(({ x, y }, n) => {
          const { left, right } = placed[n].layout.bounds;
          return { y, x, left: x + scale * left, right: x + scale * right };
        });
        extent.forEach((one, n) => {
          expect(one.left).toBeGreaterThanOrEqual(-1e-6);
          expect(one.right).toBeLessThanOrEqual(WIDTH + 1e-6);
          for (const other of extent.slice(n + 1)) {
            if (other.y === one.y) expect(other.left).toBeGreaterThan(one.right);
            else if (other.y > one.y) expect(one.x).toBeLessThan(other.left);
            else expect(other.x).toBeGreaterThan(one.right);
          }
        });
      }),
      { seed: 5, numRuns: 200 },
    );
  });

  it('takes no room for nothing', () => {
    expect(newmanStrip([], WIDTH)).toMatchObject({ height: 0, cards: [] });
  });
});

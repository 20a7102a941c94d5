import { describe, expect, it } from 'vitest';
import { shownAngle } from './shown-angle.js';

describe('angles in tables', () => {
  it.each([
    [-0.02, '0.0'],
    [0, '0.0'],
    [-0.06, '-0.1'],
    [179.98, '180.0'],
    [-179.98, '-180.0'],
    [-65.34, '-65.3'],
  ])('%d is %s', (angle, shown) => {
    expect(shownAngle(angle)).toBe(shown);
  });
});

import { describe, expect, it } from 'vitest';
import { klynePrelogName } from './klyne-prelog.js';

// ranges: IUPAC, Basic terminology of stereochemistry (1996), "torsion angle"
describe('Klyne-Prelog names', () => {
  it.each([
    [0, 'sp'],
    [360, 'sp'],
    [-720, 'sp'],
    [5, '+sp'],
    [-29.9, '-sp'],
    [60, '+sc'],
    [-60, '-sc'],
    [300, '-sc'],
    [30, '+sc'],
    [89.9, '+sc'],
    [120, '+ac'],
    [-100, '-ac'],
    [149.9, '+ac'],
    [170, '+ap'],
    [-150, '-ap'],
    [190, '-ap'],
    [180, 'ap'],
    [-180, 'ap'],
    [540, 'ap'],
    [180 - 1e-9, 'ap'],
  ])('of %d degrees is %s', (angle, name) => {
    expect(klynePrelogName(angle)).toBe(name);
  });
});

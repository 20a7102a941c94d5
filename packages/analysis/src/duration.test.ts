import { expect, it } from 'vitest';
import { durationInWords } from './duration.js';

it('says times in the largest unit that fits, with two figures', () => {
  expect([3e-13, 2.5e-9, 0.0123, 59, 60, 5400, 86400 * 41, 3.156e7, 4.7e19].map(durationInWords)).toEqual([
    '0.3 ps',
    '2.5 ns',
    '12 ms',
    '59 s',
    '1 min',
    '1.5 h',
    '41 d',
    '1 years',
    '1.5e+12 years',
  ]);
});

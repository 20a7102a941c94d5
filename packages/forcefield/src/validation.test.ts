import { describe, expect, it } from 'vitest';
import { readNci, readSuite, TERM_NAMES } from './validation.fixture.js';

describe('the packed validation data', () => {
  it.each([
    { variant: 'MMFF94', count: 761 },
    { variant: 'MMFF94s', count: 265 },
  ] as const)('holds the whole $variant suite, its terms adding up to the totals', ({ variant, count }) => {
    const suite = readSuite(variant);
    expect(suite).toHaveLength(count);
    let worst = 0;
    for (const { energies, total } of suite)
      worst = Math.max(worst, Math.abs(total - TERM_NAMES.reduce((sum, term) => sum + energies[term], 0)));
    // five printed terms of 4 decimals, two of 5
    expect(worst).toBeLessThan(3e-4);
  });

  it('holds 300 molecules of the NCI set', () => {
    const molecules = readNci();
    expect(molecules).toHaveLength(300);
    expect(molecules[0].total).toBe(2.58093);
  });
});

/**
 * Relaxed MMFF94s scans of 20 molecules against those of another program: fixtures/scan-reference.json names it. The reference is not converged
 * tightly and is the lowest of 8 starting conformers and both directions: the lower envelope lies at or below it everywhere.
 */
import { readFileSync } from 'node:fs';
import { mmff94 } from '@tordial/forcefield';
import { embedMany, moleculeFromSmiles } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { relax } from './minimise.js';
import type { Torsion } from './rotors/defining-torsion.js';
import { scanRotor } from './scan-rotor.js';

interface ReferenceScan {
  readonly smiles: string;
  readonly torsion: Torsion;
  /** kcal/mol from -180 degrees on in steps of 15. */
  readonly energies: readonly number[];
}

const file = new URL('../fixtures/scan-reference.json', import.meta.url);
const { molecules } = JSON.parse(readFileSync(file, 'utf8')) as { molecules: readonly ReferenceScan[] };

const sweeps: number[] = [];

describe('lower envelopes beside reference scans', () => {
  test.each(molecules)('$smiles', ({ smiles, torsion, energies }) => {
    const molecule = moleculeFromSmiles(smiles);
    const potential = mmff94(molecule, { variant: 'MMFF94s' });
    const starts = embedMany(molecule, 8, { seed: 1 }).map((x) => relax(molecule, potential, x).coordinates);
    const { points } = scanRotor(molecule, potential, torsion, { starts, step: 15 });
    expect(energies).toHaveLength(24);
    points.forEach(({ energy, converged, residual }, n) => {
      expect(converged).toBe(true);
      expect(residual).toBeLessThanOrEqual(1e-3);
      expect(energy).toBeLessThanOrEqual(energies[n] + 0.02);
    });
    sweeps.push(scanRotor(molecule, potential, torsion, { starts, search: 'sweep' }).evaluations / 36);
  });

  test('a single sweep takes at most 15 evaluations a point in the median', () => {
    expect(sweeps).toHaveLength(20);
    expect(sweeps.sort((p, q) => p - q)[10]).toBeLessThanOrEqual(15);
  });
});

import { readFileSync } from 'node:fs';
import { createMolecule } from '@tordial/geometry';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { uniform } from '../terms/gradient-check.fixture.js';
import { addNonBonded, type NonBondedRows, nonBondedRows } from '../terms/non-bonded.js';
import { addNonBondedVectors } from './vector-rows.js';

/** A chain of carbon-like atoms with made-up charges. */
function chain(atomCount: number, model: 'constant' | 'distance', seed: number): { rows: NonBondedRows; x: Float64Array } {
  const random = uniform(seed);
  const bonds: [number, number, number][] = Array.from({ length: Math.max(atomCount - 1, 0) }, (_, n) => [n, n + 1, 1]);
  const molecule = createMolecule({ atomicNumbers: new Array<number>(atomCount).fill(6), bonds });
  const column = (value: () => number) => Float64Array.from({ length: atomCount }, value);
  const atoms = {
    polarizability: column(() => 1 + 0.5 * random()),
    effectiveElectrons: column(() => 2.49),
    scaleA: column(() => 3.89),
    scaleG: column(() => 1.282),
    donorAcceptor: Uint8Array.from({ length: atomCount }, (_, n) => n % 3),
  };
  const rows = nonBondedRows(
    molecule,
    atoms,
    column(() => 0.3 * random()),
    { model, constant: 1.5 },
  );
  const side = 2.2 * Math.cbrt(atomCount);
  return { rows, x: Float64Array.from({ length: 3 * atomCount }, () => side * random()) };
}

function expectSame({ rows, x }: { rows: NonBondedRows; x: Float64Array }): void {
  const plain = new Float64Array(x.length),
    vectors = new Float64Array(x.length);
  const energy = addNonBonded(rows, x, plain);
  const same = addNonBondedVectors(rows, x, vectors);
  expect(same).toBeDefined();
  expect(Math.abs((same ?? Number.NaN) - energy)).toBeLessThanOrEqual(Math.max(1e-8, 1e-9 * Math.abs(energy)));
  for (let n = 0; n < x.length; n++) expect(Math.abs(vectors[n] - plain[n])).toBeLessThanOrEqual(1e-10 * Math.max(1, Math.abs(plain[n])));
}

describe('the vector form of the non-bonded loop', () => {
  it.each([0, 1, 2, 3, 4, 5, 8, 17, 30, 31, 120])('agrees with the plain loop for %d atoms', (atomCount) => {
    expectSame(chain(atomCount, 'constant', 3 + atomCount));
    expectSame(chain(atomCount, 'distance', 5 + atomCount));
  });

  it('keeps several molecules apart that are evaluated in turn', () => {
    const molecules = [chain(9, 'constant', 1), chain(60, 'distance', 2), chain(24, 'constant', 3)];
    for (let round = 0; round < 3; round++) for (const each of molecules) expectSame(each);
  });

  it('stays finite where atoms meet', () => {
    const { rows } = chain(6, 'constant', 4);
    const gradient = new Float64Array(18);
    expect(Number.isFinite(addNonBondedVectors(rows, new Float64Array(18), gradient))).toBe(true);
    expect(gradient.every((value) => value === 0)).toBe(true);
  });

  describe('without WebAssembly', () => {
    afterEach(() => {
      vi.unstubAllGlobals();
      vi.resetModules();
    });

    const forbidden = {
      Memory: class {},
      Module: class {
        constructor() {
          throw new Error('forbidden by the security policy of the page');
        }
      },
    };
    it.each([
      ['where there is none', undefined],
      ['where it is forbidden', forbidden],
    ])('leaves the work to the plain loop %s', async (_where, api) => {
      vi.stubGlobal('WebAssembly', api);
      vi.resetModules();
      const fresh = await import('./vector-rows.js');
      const { rows, x } = chain(12, 'constant', 6);
      const gradient = new Float64Array(x.length);
      expect(fresh.addNonBondedVectors(rows, x, gradient)).toBeUndefined();
      expect(gradient.every((value) => value === 0)).toBe(true);
    });
  });

  it('is compiled from the source beside it', async () => {
    const { compileKernel } = (await import('../../scripts/compile-kernel.mjs' as string)) as { compileKernel(): Promise<string> };
    expect(readFileSync(new URL('non-bonded.generated.ts', import.meta.url), 'utf8')).toBe(await compileKernel());
  });
});

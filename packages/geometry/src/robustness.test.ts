import { readFileSync } from 'node:fs';
import { gunzipSync } from 'node:zlib';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { canonicalSmiles } from './canonical-smiles.js';
import { elementSymbol } from './elements.js';
import { TordialError } from './errors.js';
import type { Molecule } from './molecule.js';
import { readMolfile } from './molfile.js';
import { MOLFILE_PIECES, mutated, SMILES_PIECES } from './mutation.fixture.js';
import { readSdf, readSmilesList } from './records.js';
import { moleculeFromSmiles } from './smiles.js';
import { readXyz } from './xyz.js';

const file = (name: string) => readFileSync(new URL(`../fixtures/${name}`, import.meta.url));
const nci = file('nci.smi')
  .toString()
  .trim()
  .split('\n')
  .map((line) => line.split(/\s/)[0]);
const hard = file('hard.smi')
  .toString()
  .split('\n')
  .filter((line) => line && !line.startsWith('#'))
  .map((line) => line.split(/\s/)[0]);
const SECONDS = 1000;

// `node benchmarks/robustness.mjs` repeats these tests with more mutants and other seeds
const FACTOR = Number(process.env.TORDIAL_MUTANTS ?? 1);
const SEED = Number(process.env.TORDIAL_SEED ?? 20261201);

/** Milliseconds that a reading took; anything but a molecule or a TordialError with a code is passed on. */
function timed(read: () => unknown): number {
  const start = performance.now();
  try {
    read();
  } catch (error) {
    if (!(error instanceof TordialError)) throw error;
    expect(error.code).toMatch(/^[a-z]+\/[a-z-]+$/);
    expect(error.message.length).toBeGreaterThan(10);
    expect(error.message.length).toBeLessThan(400);
  }
  return performance.now() - start;
}

function formula(molecule: Molecule): string {
  const counts = new Map<string, number>();
  for (const z of molecule.atomicNumbers) counts.set(elementSymbol(z), (counts.get(elementSymbol(z)) ?? 0) + 1);
  const symbols = [...counts.keys()].sort((p, q) => (p < q ? -1 : 1));
  const first = counts.has('C') ? ['C', 'H'].filter((symbol) => counts.has(symbol)) : [];
  return [...first, ...symbols.filter((symbol) => !first.includes(symbol))]
    .map((symbol) => symbol + ((counts.get(symbol) ?? 0) > 1 ? counts.get(symbol) : ''))
    .join('');
}

describe('robustness', () => {
  it('reads all of the NCI set with the atoms, bonds and formula that another toolkit counts', () => {
    const counts = file('nci-counts.tsv').toString().trim().split('\n');
    const differing = nci.filter((smiles, n) => {
      const molecule = moleculeFromSmiles(smiles);
      const net = molecule.formalCharges.reduce((sum, q) => sum + q, 0);
      const charge = net === 0 ? '' : (net > 0 ? '+' : '-') + (Math.abs(net) > 1 ? Math.abs(net) : '');
      return `${molecule.atomCount}\t${molecule.bonds.count}\t${formula(molecule)}${charge}` !== counts[n];
    });
    expect(differing).toEqual([]);
  });

  it('takes 20,000 mutated SMILES without a crash or a hang', () => {
    let slowest = 0;
    let accepted = 0;
    fc.assert(
      fc.property(mutated([...nci, ...hard], SMILES_PIECES), (text) => {
        slowest = Math.max(
          slowest,
          timed(() => moleculeFromSmiles(text).atomCount > 0 && accepted++),
        );
      }),
      { numRuns: 20_000 * FACTOR, seed: SEED },
    );
    expect(slowest).toBeLessThan(5 * SECONDS);
    // a good part of the mutants is still a structure, else the test would only see the grammar
    expect(accepted).toBeGreaterThan(1500);
  });

  it('writes canonical SMILES of what it accepts that read back as themselves', () => {
    fc.assert(
      fc.property(mutated([...nci, ...hard], SMILES_PIECES, 2), (text) => {
        let molecule: Molecule;
        try {
          molecule = moleculeFromSmiles(text);
        } catch {
          return;
        }
        const canonical = canonicalSmiles(molecule);
        expect(canonicalSmiles(moleculeFromSmiles(canonical)), text).toBe(canonical);
      }),
      { numRuns: 1500 * FACTOR, seed: SEED + 1 },
    );
  });

  it('takes 5,000 mutated molfiles without a crash or a hang', () => {
    const records = gunzipSync(file('stereo.sdf.gz'))
      .toString()
      .split('$$$$\n')
      .filter((record) => record.length > 0);
    let slowest = 0;
    let accepted = 0;
    fc.assert(
      fc.property(mutated(records, MOLFILE_PIECES, 3), (text) => {
        slowest = Math.max(
          slowest,
          timed(() => readMolfile(text).molecule.atomCount > 0 && accepted++),
        );
      }),
      { numRuns: 5000 * FACTOR, seed: SEED + 2 },
    );
    expect(slowest).toBeLessThan(5 * SECONDS);
    expect(accepted).toBeGreaterThan(500);
  });

  it('takes any text at all', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary', maxLength: 200 }), (text) => {
        for (const read of [() => moleculeFromSmiles(text), () => readMolfile(text), () => readXyz(text)]) timed(read);
        for (const result of [...readSdf(text), ...readSmilesList(text)])
          if (!(result instanceof TordialError)) expect(result.molecule.atomCount).toBeGreaterThan(0);
      }),
      { numRuns: 2000 * FACTOR, seed: SEED + 3 },
    );
  });

  it('reads large and symmetric structures in bounded time', () => {
    const ring = (unit: string, count: number) => `C1${unit.repeat(count)}C1`;
    const structures = [
      'C'.repeat(332),
      `N${'[C@@H](C)C(=O)N'.repeat(80)}`,
      Array.from({ length: 12 }, () => 'O[C@H]1[C@H](O)[C@@H](O)[C@H](O)[C@H](O)[C@@H]1O').join('.'),
      `${'C[C@H]1CC[C@@H](CC1)'.repeat(12)}C`,
      ring('c1ccc(cc1)'.replaceAll('1', '3'), 24),
      `C1CC2(C1)${'CC3(C2)CC2(C3)'.repeat(12)}CCC2`,
      'C[C@H]1C[C@]2(C1)C[C@]1(C2)C[C@]2(C1)C[C@]1(C2)C[C@]2(C1)C[C@]1(C2)C[C@@H](C)C1',
      'C(C(C)(C)C)(C(C)(C)C)'.repeat(20),
    ];
    for (const smiles of structures)
      expect(
        timed(() => canonicalSmiles(moleculeFromSmiles(smiles))),
        smiles.slice(0, 40),
      ).toBeLessThan(5 * SECONDS);
  });
});

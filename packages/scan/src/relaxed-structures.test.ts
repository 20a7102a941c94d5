import { readFileSync } from 'node:fs';
import { mmff94 } from '@tordial/forcefield';
import {
  bondBetween,
  type Coordinates,
  degrees,
  distance,
  embed,
  type Molecule,
  moleculeFromSmiles,
  neighboursOf,
  perceiveStereo,
  threadedRing,
  torsion,
} from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { relax } from './minimise.js';

const list = (name: string) =>
  readFileSync(new URL(`../../geometry/fixtures/${name}.smi`, import.meta.url), 'utf8')
    .trimEnd()
    .split('\n')
    .map((line) => line.split('\t'))
    .map(([smiles, name]) => [name, smiles] as const);

/** No MMFF94 type for an atom, or no term that holds the axis of a cumulene: what relaxation cannot be asked for. */
const NOT_HELD = new Set(['pentavalent phosphorus', 'hexavalent sulfur', 'hydrogen', 'allene', 'butatriene']);
/** Arenes that their bridges or neighbours bend. */
const BENT = new Set(['paracyclophane', 'helicene', 'crowded arene']);
const ELEMENTS = new Set([1, 6, 7, 8, 9, 14, 15, 16, 17, 35, 53]);

/** Largest torsion angle (degrees) inside six-membered rings of alternating bonds and furan-like five-membered ones. */
function aromaticTwist(molecule: Molecule, x: Coordinates): number {
  let most = 0;
  for (const ring of molecule.rings) {
    const n = ring.length;
    const at = (k: number) => ring[k % n];
    const doubles = Array.from(ring).filter((i, k) => molecule.bonds.order[bondBetween(molecule, i, at(k + 1))] === 2).length;
    const hetero = Array.from(ring).some((i) => [7, 8, 16].includes(molecule.atomicNumbers[i]));
    if (!(n === 6 && doubles === 3) && !(n === 5 && doubles === 2 && hetero)) continue;
    for (let k = 0; k < n; k++) most = Math.max(most, Math.abs(degrees(torsion(x, at(k), at(k + 1), at(k + 2), at(k + 3)))));
  }
  return most;
}

/** Shortest distance of two atoms more than two bonds apart. */
function closest(molecule: Molecule, x: Coordinates): number {
  let least = Number.POSITIVE_INFINITY;
  for (let i = 0; i < molecule.atomCount; i++) {
    const near = new Set([i, ...neighboursOf(molecule, i)]);
    for (const j of [...near]) for (const k of neighboursOf(molecule, j)) near.add(k);
    for (let j = 0; j < i; j++) if (!near.has(j)) least = Math.min(least, distance(x, i, j));
  }
  return least;
}

function check(name: string, smiles: string): void {
  const molecule = moleculeFromSmiles(smiles);
  const { coordinates, converged } = relax(molecule, mmff94(molecule), embed(molecule), { tolerance: 0.01 });
  expect(converged).toBe(true);
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  const seen = perceiveStereo(molecule, coordinates);
  tetrahedral.forEach(({ sign }, n) => {
    if (sign !== 0) expect(seen.tetrahedral[n].sign).toBe(sign);
  });
  doubleBonds.forEach(({ cis }, n) => {
    if (cis !== null) expect(seen.doubleBonds[n].cis).toBe(cis);
  });
  axes.forEach(({ sign }, n) => {
    if (sign !== 0) expect(seen.axes[n].sign).toBe(sign);
  });
  expect(threadedRing(molecule.rings, molecule.bonds, coordinates)).toBeNull();
  // strong hydrogen bonds reach 1.4; the bridge of propellane and bicyclobutane is a bond
  expect(closest(molecule, coordinates)).toBeGreaterThan(1.35);
  if (!BENT.has(name)) expect(aromaticTwist(molecule, coordinates)).toBeLessThan(10);
}

describe('embedded structures after relaxation with MMFF94s', () => {
  it.each(list('hard').filter(([name]) => !NOT_HELD.has(name)))('%s is sound', check);
  // every fourth; the benchmark of embedding does all
  const sample = list('nci').filter(([, smiles], n) => n % 4 === 0 && !smiles.includes('.'));
  const covered = sample.filter(([, smiles]) => moleculeFromSmiles(smiles).atomicNumbers.every((z) => ELEMENTS.has(z)));
  it.each(covered)('%s is sound', check);
});

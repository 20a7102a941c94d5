import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { angle, degrees, distance, torsion } from '../internal-coordinates.js';
import { type Coordinates, createMolecule, type Molecule, neighboursOf } from '../molecule.js';
import { moleculeFromSmiles } from '../smiles.js';
import { perceiveStereo } from '../stereo-perception.js';
import { leastRmsd } from '../superpose.js';
import { embed, embedMany } from './embed.js';
import { atomShapes } from './shapes.js';
import { threadedRing } from './threading.js';

/** Molecules that are hard to build, each for a reason of its own, which its name gives. */
const HARD = readFileSync(new URL('../../fixtures/hard.smi', import.meta.url), 'utf8')
  .trimEnd()
  .split('\n')
  .map((line) => line.split('\t'))
  .map(([smiles, name]) => [name, smiles] as const);

/** Stated configurations that the coordinates do not have. */
function lostStereo(molecule: Molecule, x: Coordinates): number {
  const seen = perceiveStereo(molecule, x);
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  return (
    tetrahedral.filter(({ sign }, n) => sign !== 0 && seen.tetrahedral[n].sign !== sign).length +
    doubleBonds.filter(({ cis }, n) => cis !== null && seen.doubleBonds[n].cis !== cis).length +
    axes.filter(({ sign }, n) => sign !== 0 && seen.axes[n].sign !== sign).length
  );
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

/** Largest torsion angle (degrees) inside an aromatic ring. */
function aromaticTwist(molecule: Molecule, x: Coordinates): number {
  const { aromaticBond } = atomShapes(molecule);
  let most = 0;
  for (const ring of molecule.rings) {
    const n = ring.length;
    for (let m = 0; m < n; m++) {
      const [i, j, k, l] = [0, 1, 2, 3].map((step) => ring[(m + step) % n]);
      const bonds = [...neighboursOf(molecule, j)].indexOf(k);
      if (n > 3 && n < 7 && aromaticBond[molecule.neighbours.bond[molecule.neighbours.start[j] + bonds]] === 1)
        most = Math.max(most, Math.abs(degrees(torsion(x, i, j, k, l))));
    }
  }
  return most;
}

describe('embedding', () => {
  it.each(HARD)('builds %s with its stereo, without threading or overlap', (name, smiles) => {
    const molecule = moleculeFromSmiles(smiles);
    for (const x of embedMany(molecule, 3, { seed: 5 })) {
      expect(x.every(Number.isFinite)).toBe(true);
      expect(lostStereo(molecule, x)).toBe(0);
      expect(threadedRing(molecule.rings, molecule.bonds, x)).toBeNull();
      // the shortest contact over three bonds is that across bicyclobutane, about 1.9 (hydrogens in a planar Z form reach 1.5)
      expect(closest(molecule, x)).toBeGreaterThan(1.4);
      if (!['paracyclophane', 'helicene'].includes(name)) expect(aromaticTwist(molecule, x)).toBeLessThan(10);
    }
  });

  it('takes 250 atoms', () => {
    const molecule = moleculeFromSmiles(`C${'[C@H](O)[C@@H](C)OC(=O)CCNC(=O)'.repeat(10)}${'C'.repeat(10)}`);
    expect(molecule.atomCount).toBeGreaterThan(240);
    const x = embed(molecule);
    expect(lostStereo(molecule, x)).toBe(0);
    expect(closest(molecule, x)).toBeGreaterThan(1.4);
  });

  it('gives the same bytes for a seed and another structure for another', () => {
    const molecule = moleculeFromSmiles('CC(C)C[C@H](N)C(=O)OCCc1ccccc1');
    expect(embed(molecule, { seed: 3 })).toEqual(embed(molecule, { seed: 3 }));
    expect(embedMany(molecule, 2, { seed: 3 })[0]).toEqual(embed(molecule, { seed: 3 }));
    expect(leastRmsd(embed(molecule, { seed: 3 }), embed(molecule, { seed: 4 }))).toBeGreaterThan(0.3);
  });

  it('makes either form of an open centre', () => {
    const molecule = moleculeFromSmiles('CC(N)C(=O)O');
    const signs = embedMany(molecule, 12, { seed: 1 }).map((x) => perceiveStereo(molecule, x).tetrahedral[0].sign);
    expect(new Set(signs)).toEqual(new Set([-1, 1]));
  });

  // electron diffraction and microwave structures as the CRC Handbook's section 9 lists them, from memory: angstrom, degrees
  it.each<[string, string, number[], number, number]>([
    ['ethane C-C', 'CC', [0, 1], 1.534, 0.03],
    ['ethene C=C', 'C=C', [0, 1], 1.339, 0.03],
    ['ethyne C-C', 'C#C', [0, 1], 1.203, 0.03],
    ['benzene C-C', 'c1ccccc1', [0, 1], 1.399, 0.03],
    ['methanol C-O', 'CO', [0, 1], 1.421, 0.03],
    ['chloromethane C-Cl', 'CCl', [0, 1], 1.781, 0.03],
    ['bromomethane C-Br', 'CBr', [0, 1], 1.939, 0.03],
    ['water H-O', 'O', [0, 1], 0.958, 0.03],
    ['water H-O-H', 'O', [1, 0, 2], 104.5, 2],
    ['dimethyl sulfide C-S-C', 'CSC', [0, 1, 2], 98.9, 3],
    ['dimethyl ether C-O-C', 'COC', [0, 1, 2], 111.5, 3],
    ['acetone C-C-C', 'CC(=O)C', [0, 1, 3], 116, 3],
    ['allene C=C=C', 'C=C=C', [0, 1, 2], 180, 6],
    ['cyclobutane C-C-C', 'C1CCC1', [0, 1, 2], 88, 3],
    ['cyclopropane H-C-H', '[H]C1([H])CC1', [0, 1, 2], 114.5, 4],
    ['cubane C-C-H', '[H]C12C3C4C1C5C2C3C45', [0, 1, 2], 125.3, 4],
  ])('comes near the measured %s', (_, smiles, atoms, measured, tolerance) => {
    const x = embed(moleculeFromSmiles(smiles));
    const [i, j, k] = atoms;
    const value = k === undefined ? distance(x, i, j) : degrees(angle(x, i, j, k));
    expect(Math.abs(value - measured)).toBeLessThan(tolerance);
  });

  it('places fragments side by side without contact', () => {
    const molecule = moleculeFromSmiles('C[C@H](N)C(=O)[O-].c1ccccc1.[Na+].O');
    const x = embed(molecule);
    expect(lostStereo(molecule, x)).toBe(0);
    const owner = [0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 1, 1, 2, 3];
    for (let i = 0; i < owner.length; i++)
      for (let j = 0; j < i; j++) if (owner[i] !== owner[j]) expect(distance(x, i, j)).toBeGreaterThan(3);
  });

  it('says so when a configuration is impossible in space', () => {
    // camphor with one bridgehead inverted: the bridge of one atom does not reach
    const impossible = moleculeFromSmiles('CC1(C)[C@@H]2CC[C@]1(C)C(=O)C2');
    expect(() => embed(impossible, { attempts: 8 })).toThrow(expect.objectContaining({ code: 'embed/failed' }));
  });

  it('embeds a molecule that was made by hand', () => {
    const water = createMolecule({
      atomicNumbers: [8, 1, 1],
      bonds: [
        [0, 1, 1],
        [0, 2, 1],
      ],
    });
    expect(embed(water)).toEqual(embed(moleculeFromSmiles('O')));
  });
});

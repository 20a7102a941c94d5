import { describe, expect, it } from 'vitest';
import { embed } from './embed/embed.js';
import { moleculeFromSmiles } from './smiles.js';
import { leastRmsd, superpose } from './superpose.js';
import { symmetricRmsd } from './symmetric-rmsd.js';

describe('symmetry-aware distance of structures', () => {
  it('lays a relabelled copy on the original', () => {
    // benzyl alcohol with its ring turned over: the ortho and the meta carbons change places
    const molecule = moleculeFromSmiles('OCc1ccccc1');
    const x = embed(molecule);
    const turned = superpose(x, embed(molecule, { seed: 9 })).coordinates;
    const image = Int32Array.from({ length: molecule.atomCount }, (_, i) => i);
    for (const [i, j] of [
      [3, 7],
      [4, 6],
    ])
      [image[i], image[j]] = [j, i];
    const relabelled = turned.map((_, n) => turned[3 * image[Math.floor(n / 3)] + (n % 3)]);
    expect(leastRmsd(x, relabelled, { atoms: [0, 1, 2, 3, 4, 5, 6, 7] })).toBeGreaterThan(0.5);
    expect(symmetricRmsd(molecule, x, relabelled)).toBeLessThan(1e-6);
  });
  it('tells an enantiomer from its mirror image, and hydrogens alone from nothing', () => {
    const chiral = moleculeFromSmiles('C[C@H](O)C(F)Cl');
    const x = embed(chiral);
    const mirrored = x.map((v, n) => (n % 3 === 0 ? -v : v));
    expect(symmetricRmsd(chiral, x, x)).toBeLessThan(1e-6);
    expect(symmetricRmsd(chiral, x, mirrored)).toBeGreaterThan(0.3);
    const methane = moleculeFromSmiles('C');
    expect(symmetricRmsd(methane, embed(methane), embed(methane, { seed: 2 }))).toBeLessThan(0.1);
  });
});

import { describe, expect, it } from 'vitest';
import { createMolecule } from './molecule.js';
import { ringSystems } from './rings.js';
import { moleculeFromSmiles } from './smiles.js';

const carbons = (atomCount: number, bonds: [number, number][]) =>
  createMolecule({ atomicNumbers: new Array(atomCount).fill(6), bonds: bonds.map(([a, b]) => [a, b, 1] as const) });
const cycle = (n: number): [number, number][] => Array.from({ length: n }, (_, k) => [k, (k + 1) % n]);
const sizes = (atomCount: number, bonds: [number, number][]) => carbons(atomCount, bonds).rings.map((ring) => ring.length);

// counts of relevant cycles: P. Vismara, Electron. J. Combin. 4, R9 (1997) defines them; cubane's six faces and
// norbornane's two five-membered rings are common knowledge of ring perception
describe('relevant cycles', () => {
  it('finds none in a chain and one in a ring', () => {
    expect(
      sizes(4, [
        [0, 1],
        [1, 2],
        [2, 3],
      ]),
    ).toEqual([]);
    expect(sizes(6, cycle(6))).toEqual([6]);
  });
  it('finds all six faces of cubane', () => {
    const cubane: [number, number][] = [...cycle(4), [4, 5], [5, 6], [6, 7], [4, 7], [0, 4], [1, 5], [2, 6], [3, 7]];
    expect(sizes(8, cubane)).toEqual([4, 4, 4, 4, 4, 4]);
  });
  it('leaves out the six-membered envelope of norbornane', () => {
    expect(sizes(7, [...cycle(6), [0, 6], [3, 6]])).toEqual([5, 5]);
  });
  it('keeps the three equal rings of bicyclo[2.2.2]octane', () => {
    expect(sizes(8, [...cycle(6), [0, 6], [6, 7], [3, 7]])).toEqual([6, 6, 6]);
  });
  it('separates the rings of a spiro and of a fused system', () => {
    expect(
      sizes(5, [
        [0, 1],
        [1, 2],
        [0, 2],
        [2, 3],
        [3, 4],
        [2, 4],
      ]),
    ).toEqual([3, 3]);
    expect(sizes(10, [...cycle(10), [0, 5]])).toEqual([6, 6]);
  });
  it('does not depend on atom numbering', () => {
    const bonds: [number, number][] = [...cycle(6), [0, 6], [6, 7], [3, 7]];
    const order = [5, 2, 7, 0, 3, 6, 1, 4];
    const renumbered = carbons(
      8,
      bonds.map(([a, b]) => [order[a], order[b]]),
    );
    const expected = carbons(8, bonds).rings.map((ring) =>
      [...ring]
        .map((i) => order[i])
        .sort((p, q) => p - q)
        .join(),
    );
    expect(renumbered.rings.map((ring) => [...ring].sort((p, q) => p - q).join()).sort()).toEqual(expected.sort());
  });
  it('finds the faces of dodecahedrane and of buckminsterfullerene', () => {
    // 12 pentagons; 12 pentagons and 20 hexagons (Kroto et al., Nature 318, 162 (1985))
    const lengths = (smiles: string) => moleculeFromSmiles(smiles).rings.map((ring) => ring.length);
    expect(lengths('C12C3C4C5C1C6C7C2C8C3C9C4C1C5C6C2C7C8C9C12')).toEqual(new Array(12).fill(5));
    const fullerene =
      'c12c3c4c5c1c6c7c8c2c9c1c3c2c3c4c4c%10c5c5c6c6c7c7c%11c8c9c8c9c1c2c1c2c3c4c3c4c%10c5c5c6c6c7c7c%11c8c8c9c1c1c2c3c2c4c5c6c3c7c8c1c23';
    expect(lengths(fullerene)).toEqual([...new Array(12).fill(5), ...new Array(20).fill(6)]);
  });
  it('lists a large ring of para-phenylenes without listing all its 2^24 ways round', () => {
    const molecule = moleculeFromSmiles(`C1${'c3ccc(cc3)'.repeat(24)}C1`);
    expect(molecule.rings.filter((ring) => ring.length === 6)).toHaveLength(24);
    expect(molecule.rings.length).toBeLessThan(24 + 24 * 64);
  });
});

describe('ring systems', () => {
  it('hold rings that share an atom or are joined by a double bond', () => {
    const systems = (smiles: string) => new Set([...ringSystems(moleculeFromSmiles(smiles))].filter((n) => n >= 0)).size;
    expect(systems('CCC')).toBe(0);
    expect(systems('c1ccccc1-c1ccccc1')).toBe(2);
    expect(systems('C1CCC2CCCCC2C1')).toBe(1);
    expect(systems('C1CCC2(C1)CCCC2')).toBe(1);
    expect(systems('C1CCC1=C1CCC1')).toBe(1);
  });
});

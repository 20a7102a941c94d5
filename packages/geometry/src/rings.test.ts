import { describe, expect, it } from 'vitest';
import { createMolecule } from './molecule.js';

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
});

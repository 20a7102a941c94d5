import { describe, expect, it } from 'vitest';
import { type AutomorphismOptions, atomOrbits, automorphisms } from './automorphisms.js';
import { bondBetween, createMolecule, type Molecule, type StereoTable } from './molecule.js';

type Bond = readonly [number, number];
const skeleton = (atomicNumbers: number[], bonds: readonly Bond[], extra: { isotopes?: number[]; stereo?: StereoTable } = {}) =>
  createMolecule({ atomicNumbers, bonds: bonds.map(([a, b]) => [a, b, 1] as const), ...extra });
const cycle = (n: number): Bond[] => Array.from({ length: n }, (_, k) => [k, (k + 1) % n] as const);
const carbons = (count: number, bonds: readonly Bond[]) => skeleton(new Array(count).fill(6), bonds);
const order = (molecule: Molecule, options?: AutomorphismOptions) => automorphisms(molecule, options).order;

/** Carbon atoms first, as many hydrogens on each as stated. */
function hydrocarbon(hydrogens: readonly number[], bonds: readonly Bond[], isotopes: number[] = []): Molecule {
  const numbers: number[] = hydrogens.map(() => 6);
  const all: Bond[] = [...bonds];
  hydrogens.forEach((count, carbon) => {
    for (let n = 0; n < count; n++) all.push([carbon, numbers.push(1) - 1]);
  });
  return skeleton(numbers, all, { isotopes: [...isotopes, ...new Array(numbers.length - isotopes.length).fill(0)] });
}

/** Vertices of a fullerene C20: the dodecahedron as a generalised Petersen graph G(10, 2). */
const dodecahedron: Bond[] = Array.from({ length: 10 }, (_, k): Bond[] => [
  [k, (k + 1) % 10],
  [k, 10 + k],
  [10 + k, 10 + ((k + 2) % 10)],
]).flat();

describe('automorphisms', () => {
  // group orders: cube 48, dodecahedron 120, Petersen graph 120, K(3,3) 72, cycle 2n (standard results of graph theory)
  it.each([
    ['hexagon', 6, cycle(6), 12],
    ['cube', 8, [...cycle(4), [4, 5], [5, 6], [6, 7], [4, 7], [0, 4], [1, 5], [2, 6], [3, 7]] as Bond[], 48],
    ['dodecahedron', 20, dodecahedron, 120],
    ['Petersen graph', 10, [...cycle(5), [0, 5], [1, 6], [2, 7], [3, 8], [4, 9], [5, 7], [7, 9], [9, 6], [6, 8], [8, 5]] as Bond[], 120],
    ['complete bipartite graph of 3 and 3', 6, [0, 1, 2].flatMap((a) => [3, 4, 5].map((b) => [a, b] as const)), 72],
    [
      'chain of 5',
      5,
      [
        [0, 1],
        [1, 2],
        [2, 3],
        [3, 4],
      ] as Bond[],
      2,
    ],
    [
      'two triangles apart',
      6,
      [
        [0, 1],
        [1, 2],
        [0, 2],
        [3, 4],
        [4, 5],
        [3, 5],
      ] as Bond[],
      72,
    ],
    ['five single atoms', 5, [], 120],
  ])('of the %s make a group of the known order', (_, count, bonds, expected) => {
    const molecule = carbons(count, bonds);
    const { automorphisms: list, complete, order: size } = automorphisms(molecule);
    expect(size).toBe(expected);
    expect(complete).toBe(true);
    expect([...list[0].image]).toEqual(Array.from({ length: count }, (_, i) => i));
    expect(new Set(list.map(({ image }) => image.join())).size).toBe(expected);
    for (const { image } of list) {
      expect(new Set(image).size).toBe(count);
      for (const [a, b] of bonds) expect(bondBetween(molecule, image[a], image[b])).toBeGreaterThanOrEqual(0);
    }
  });

  it('count methyl permutations only when asked', () => {
    const propane = hydrocarbon(
      [3, 2, 3],
      [
        [0, 1],
        [1, 2],
      ],
    );
    expect(order(propane)).toBe(2);
    expect(order(propane, { following: 'none' })).toBe(2 * 6 * 6 * 2);
    const neopentane = hydrocarbon(
      [0, 3, 3, 3, 3],
      [
        [0, 1],
        [0, 2],
        [0, 3],
        [0, 4],
      ],
    );
    expect(order(neopentane)).toBe(24);
    expect(order(neopentane, { following: 'none' })).toBe(24 * 6 ** 4);
  });

  it('count the fluorines of CF3 unless terminal atoms follow', () => {
    const hexafluoroethane = skeleton(
      [6, 6, 9, 9, 9, 9, 9, 9],
      [
        [0, 1],
        [0, 2],
        [0, 3],
        [0, 4],
        [1, 5],
        [1, 6],
        [1, 7],
      ],
    );
    expect(order(hexafluoroethane)).toBe(72);
    expect(order(hexafluoroethane, { following: 'terminal atoms' })).toBe(2);
    expect(order(skeleton([17, 17], [[0, 1]]), { following: 'terminal atoms' })).toBe(2);
  });

  it('say when the list is cut, and give generators of the whole all the same', () => {
    const neopentane = hydrocarbon(
      [0, 3, 3, 3, 3],
      [
        [0, 1],
        [0, 2],
        [0, 3],
        [0, 4],
      ],
    );
    const cut = automorphisms(neopentane, { following: 'none', limit: 50 });
    expect(cut.automorphisms).toHaveLength(50);
    expect(cut.complete).toBe(false);
    const small = automorphisms(neopentane);
    const reached = new Map(small.automorphisms.slice(0, 1).map(({ image }) => [image.join(), image]));
    for (const image of reached.values())
      for (const { image: by } of small.generators) {
        const product = image.map((i) => by[i]);
        reached.set(product.join(), product);
      }
    expect(reached.size).toBe(24);
  });

  it('keep hydrogens on the atoms they go with, and isotopes apart', () => {
    const ethane = hydrocarbon([3, 3], [[0, 1]]);
    const swap = automorphisms(ethane).automorphisms[1].image;
    expect([...swap]).toEqual([1, 0, 5, 6, 7, 2, 3, 4]);
    // CH2D-CH2D with the deuterium written at different places
    const labelled = hydrocarbon([3, 3], [[0, 1]], [0, 0, 2, 0, 0, 0, 0, 2]);
    expect([...automorphisms(labelled).automorphisms[1].image]).toEqual([1, 0, 7, 5, 6, 3, 4, 2]);
    expect(order(hydrocarbon([3, 3], [[0, 1]], [13, 0]))).toBe(1);
    expect(order(skeleton([1, 1], [[0, 1]]))).toBe(2);
  });

  it('tell permutations that keep stereocentres from those that invert them', () => {
    // F-C(H)(Cl)-C(H)(Cl)-F: 0 F, 1 C, 2 Cl, 3 C, 4 Cl, 5 F, 6 H, 7 H
    const dihalide = (second: 1 | -1 | 0) =>
      skeleton(
        [9, 6, 17, 6, 17, 9, 1, 1],
        [
          [0, 1],
          [1, 2],
          [1, 3],
          [3, 4],
          [3, 5],
          [1, 6],
          [3, 7],
        ],
        {
          stereo: {
            tetrahedral: [
              { atom: 1, neighbours: [0, 2, 3, 6], sign: 1 },
              { atom: 3, neighbours: [1, 4, 5, 7], sign: second },
            ],
            doubleBonds: [],
            axes: [],
          },
        },
      );
    // the swap takes (F0, Cl2, C3, H6) to (F5, Cl4, C1, H7), an odd permutation of (C1, Cl4, F5, H7)
    const flags = (second: 1 | -1 | 0) => {
      const swap = automorphisms(dihalide(second)).automorphisms[1];
      return [swap.preservesStereo, swap.invertsStereo];
    };
    expect(flags(-1)).toEqual([true, false]);
    expect(flags(1)).toEqual([false, true]);
    expect(flags(0)).toEqual([false, false]);
    const [identity] = automorphisms(dihalide(1)).automorphisms;
    expect([identity.preservesStereo, identity.invertsStereo]).toEqual([true, false]);
  });

  it('tell double bonds and allene axes apart', () => {
    // 1-fluoro-1,3-butadiene-like skeleton F-C=C-C=C-F: 0 F, 1-4 C, 5 F and a hydrogen on each carbon 6-9
    const bonds: Bond[] = [
      [0, 1],
      [1, 2],
      [2, 3],
      [3, 4],
      [4, 5],
      [1, 6],
      [2, 7],
      [3, 8],
      [4, 9],
    ];
    const diene = (second: boolean | null) =>
      skeleton([9, 6, 6, 6, 6, 9, 1, 1, 1, 1], bonds, {
        stereo: {
          tetrahedral: [],
          doubleBonds: [
            { a: 1, b: 2, substituentA: 0, substituentB: 3, cis: true },
            // referred to the hydrogen on 4: cis F means trans H
            { a: 3, b: 4, substituentA: 2, substituentB: 9, cis: second },
          ],
          axes: [],
        },
      });
    const flags = (molecule: Molecule) => automorphisms(molecule).automorphisms.map((p) => [p.preservesStereo, p.invertsStereo]);
    expect(flags(diene(false))).toEqual([
      [true, true],
      [true, true],
    ]);
    expect(flags(diene(true))).toEqual([
      [true, true],
      [false, false],
    ]);
    expect(flags(diene(null))).toEqual([
      [true, true],
      [false, false],
    ]);
    // F-CH=C=CH-F: the axis seen from either end has the same sense, so the swap keeps it
    const allene = skeleton(
      [9, 6, 6, 6, 9, 1, 1],
      [
        [0, 1],
        [1, 2],
        [2, 3],
        [3, 4],
        [1, 5],
        [3, 6],
      ],
      {
        stereo: { tetrahedral: [], doubleBonds: [], axes: [{ a: 1, b: 3, substituentA: 0, substituentB: 4, sign: 1 }] },
      },
    );
    expect(flags(allene)).toEqual([
      [true, false],
      [true, false],
    ]);
  });
});

describe('orbits of atoms', () => {
  it('hold atoms on request', () => {
    const ring = carbons(6, cycle(6));
    expect([...atomOrbits(ring)]).toEqual([0, 0, 0, 0, 0, 0]);
    expect([...atomOrbits(ring, { fixed: [0] })]).toEqual([0, 1, 2, 3, 2, 1]);
    expect([...atomOrbits(ring, { fixed: [0, 1] })]).toEqual([0, 1, 2, 3, 4, 5]);
  });
  it('put hydrogens of one atom together, isotopes and held ones apart', () => {
    const ethane = hydrocarbon([3, 3], [[0, 1]], [0, 0, 2]);
    expect([...atomOrbits(ethane)]).toEqual([0, 1, 2, 3, 3, 5, 5, 5]);
    expect([...atomOrbits(hydrocarbon([3, 3], [[0, 1]]))]).toEqual([0, 0, 2, 2, 2, 2, 2, 2]);
    expect([...atomOrbits(hydrocarbon([3, 3], [[0, 1]]), { fixed: [2] })]).toEqual([0, 1, 2, 3, 3, 5, 5, 5]);
  });
  it('tell the rungs of a prism from its triangles, which refinement of neighbourhoods does not', () => {
    // all six atoms of the prism are equivalent, but seen from one of them the neighbours are not
    const prism = carbons(6, [...cycle(3), [3, 4], [4, 5], [3, 5], [0, 3], [1, 4], [2, 5]]);
    expect([...atomOrbits(prism)]).toEqual([0, 0, 0, 0, 0, 0]);
    expect([...atomOrbits(prism, { fixed: [0] })]).toEqual([0, 1, 1, 3, 4, 4]);
  });
  it('keep apart what only a permutation that inverts a centre exchanges', () => {
    const stereo: StereoTable = { tetrahedral: [{ atom: 0, neighbours: [1, 2, 3, 4], sign: 1 }], doubleBonds: [], axes: [] };
    // a centre with two chains C-C as 1-5 and 2-6, a fluorine and a chlorine, marked as if its chains differed in space
    const marked = skeleton(
      [6, 6, 6, 9, 17, 6, 6],
      [
        [0, 1],
        [0, 2],
        [0, 3],
        [0, 4],
        [1, 5],
        [2, 6],
      ],
      { stereo },
    );
    expect([...atomOrbits(marked)]).toEqual([0, 1, 2, 3, 4, 5, 6]);
    expect([...atomOrbits(marked, { stereo: 'ignored' })]).toEqual([0, 1, 1, 3, 4, 5, 5]);
  });
});

import { radians } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { pointGroup } from './point-group.js';

type Atom = readonly [number, number, number, number];

/** n atoms of one element on a circle about z at height h, the first at `start` degrees. */
const ring = (z: number, n: number, radius: number, h: number, start = 0): Atom[] =>
  Array.from({ length: n }, (_, k) => {
    const phi = radians(start + (360 / n) * k);
    return [z, radius * Math.cos(phi), radius * Math.sin(phi), h];
  });
/** All sign combinations of a point, doubles left out. */
const signs = (z: number, x: number, y: number, w: number): Atom[] => {
  const all = [1, -1].flatMap((p) => [1, -1].flatMap((q) => [1, -1].map((r) => [z, p * x + 0, q * y + 0, r * w + 0] as const)));
  return all.filter((atom, n) => all.findIndex((other) => other.every((value, k) => value === atom[k])) === n);
};
const cyclic = (atoms: Atom[]): Atom[] =>
  atoms.flatMap(([z, p, q, r]) => [[z, p, q, r] as const, [z, q, r, p] as const, [z, r, p, q] as const]);
const GOLDEN = (1 + Math.sqrt(5)) / 2;

function groupOf(atoms: readonly Atom[]): string {
  // turned and shifted, so that no axis lies along a coordinate
  const [a, b] = [0.7, 1.9];
  const x = Float64Array.from(
    atoms.flatMap(([, p, q, r]) => {
      const [p1, q1] = [Math.cos(a) * p - Math.sin(a) * q, Math.sin(a) * p + Math.cos(a) * q];
      return [p1 + 3, Math.cos(b) * q1 - Math.sin(b) * r - 1, Math.sin(b) * q1 + Math.cos(b) * r + 2];
    }),
  );
  return pointGroup(
    x,
    atoms.map(([z]) => z),
  );
}

// the molecules and their groups are the textbook examples of F. A. Cotton, Chemical Applications of Group Theory, chapter 3
describe('point groups', () => {
  it.each<[string, string, readonly Atom[]]>([
    ['a single atom', 'Kh', [[18, 0, 0, 0]]],
    [
      'hydrogen cyanide',
      'Cinfv',
      [
        [1, 0, 0, -1.06],
        [6, 0, 0, 0],
        [7, 0, 0, 1.15],
      ],
    ],
    [
      'carbon dioxide',
      'Dinfh',
      [
        [8, 0, 0, -1.16],
        [6, 0, 0, 0],
        [8, 0, 0, 1.16],
      ],
    ],
    [
      'bromochlorofluoromethane',
      'C1',
      [
        [6, 0, 0, 0],
        [1, 0.6, 0.6, 0.6],
        [9, 0.8, -0.8, -0.8],
        [17, -1, 1, -1],
        [35, -1.1, -1.1, 1.1],
      ],
    ],
    [
      'nitrosyl chloride',
      'Cs',
      [
        [7, 0, 0, 0],
        [8, 1.1, 0.2, 0],
        [17, -1, 1.6, 0],
      ],
    ],
    [
      'trans-1,2-dichloro-1,2-difluoroethane',
      'Ci',
      [
        [6, 0, 0, 0.77],
        [9, 1.3, 0, 1.2],
        [17, -0.8, 1.5, 1.3],
        [1, -0.5, -0.9, 1.1],
        [6, 0, 0, -0.77],
        [9, -1.3, 0, -1.2],
        [17, 0.8, -1.5, -1.3],
        [1, 0.5, 0.9, -1.1],
      ],
    ],
    [
      'hydrogen peroxide',
      'C2',
      [
        [8, 0.73, 0, 0],
        [8, -0.73, 0, 0],
        [1, 0.9, 0.8, 0.5],
        [1, -0.9, -0.8, 0.5],
      ],
    ],
    [
      'water',
      'C2v',
      [
        [8, 0, 0, 0],
        [1, 0.76, 0, 0.59],
        [1, -0.76, 0, 0.59],
      ],
    ],
    ['ammonia', 'C3v', [[7, 0, 0, 0], ...ring(1, 3, 0.94, 0.38)]],
    [
      'trans-1,2-difluoroethene',
      'C2h',
      [
        [6, 0.66, 0, 0],
        [6, -0.66, 0, 0],
        [9, 1.3, 1.2, 0],
        [9, -1.3, -1.2, 0],
        [1, 1.2, -0.9, 0],
        [1, -1.2, 0.9, 0],
      ],
    ],
    ['boric acid', 'C3h', [[5, 0, 0, 0], ...ring(8, 3, 1.36, 0), ...ring(1, 3, 1.9, 0, 40)]],
    ['ethane, skewed', 'D3', [[6, 0, 0, 0.77], [6, 0, 0, -0.77], ...ring(1, 3, 1.02, 1.16), ...ring(1, 3, 1.02, -1.16, 25)]],
    ['ethane, eclipsed', 'D3h', [[6, 0, 0, 0.77], [6, 0, 0, -0.77], ...ring(1, 3, 1.02, 1.16), ...ring(1, 3, 1.02, -1.16)]],
    ['ethane, staggered', 'D3d', [[6, 0, 0, 0.77], [6, 0, 0, -0.77], ...ring(1, 3, 1.02, 1.16), ...ring(1, 3, 1.02, -1.16, 60)]],
    ['allene', 'D2d', [[6, 0, 0, 0], [6, 0, 0, 1.31], [6, 0, 0, -1.31], ...ring(1, 2, 0.93, 1.87), ...ring(1, 2, 0.93, -1.87, 90)]],
    ['ethene', 'D2h', [[6, 0.67, 0, 0], [6, -0.67, 0, 0], ...signs(1, 1.23, 0.92, 0)]],
    ['twisted ethene', 'D2', [[6, 0, 0, 0.67], [6, 0, 0, -0.67], ...ring(1, 2, 0.92, 1.23), ...ring(1, 2, 0.92, -1.23, 40)]],
    ['benzene', 'D6h', [...ring(6, 6, 1.39, 0), ...ring(1, 6, 2.48, 0)]],
    ['cyclobutane, puckered', 'D2d', [...ring(6, 2, 1.08, 0.15), ...ring(6, 2, 1.08, -0.15, 90)]],
    [
      'an eight-ring of S4 symmetry',
      'S4',
      [...ring(6, 2, 1.5, 0.6), ...ring(6, 2, 1.5, -0.6, 90), ...ring(8, 2, 2.4, 1, 30), ...ring(8, 2, 2.4, -1, 120)],
    ],
    [
      'methane',
      'Td',
      [
        [6, 0, 0, 0],
        [1, 0.63, 0.63, 0.63],
        [1, 0.63, -0.63, -0.63],
        [1, -0.63, 0.63, -0.63],
        [1, -0.63, -0.63, 0.63],
      ],
    ],
    ['sulfur hexafluoride', 'Oh', [[16, 0, 0, 0], ...cyclic(signs(9, 1.56, 0, 0))]],
    ['cubane carbons', 'Oh', signs(6, 0.78, 0.78, 0.78)],
    ['dodecaborane cage', 'Ih', cyclic(signs(5, 0, 0.9, 0.9 * GOLDEN))],
    ['a tetrahedron with twelve atoms turned the same way', 'T', cyclic(signs(6, 0.8, 1.5, 2.6).filter(([, p, q, r]) => p * q * r > 0))],
    ['twelve atoms in pairs about three axes', 'Th', cyclic(signs(6, 0, 1, 2.4))],
    [
      '24 atoms turned about the axes of a cube',
      'O',
      [
        ...cyclic(signs(6, 1, 2, 3.2).filter(([, p, q, r]) => p * q * r > 0)),
        ...cyclic(signs(6, 2, 1, 3.2).filter(([, p, q, r]) => p * q * r < 0)),
      ],
    ],
  ])('%s: %s', (_name, expected, atoms) => {
    expect(groupOf(atoms)).toBe(expected);
  });
  it('holds within the tolerance only', () => {
    const bent = Float64Array.of(0, 0, 0, 0.76, 0, 0.59, -0.76, 0, 0.55);
    expect(pointGroup(bent, [8, 1, 1])).toBe('C2v');
    expect(pointGroup(bent, [8, 1, 1], 0.01)).toBe('Cs');
  });
});

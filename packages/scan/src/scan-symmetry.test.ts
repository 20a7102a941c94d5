/** What symmetry and the way a molecule is written must not change, and what it lets a scan copy. */
import { mmff94 } from '@tordial/forcefield';
import { degrees, embed, type Molecule, moleculeFromSmiles, perceiveStereo, torsion, wrapDegrees } from '@tordial/geometry';
import { describe, expect, test } from 'vitest';
import { conformers } from './conformers.js';
import type { Profile } from './profile.js';
import type { Torsion } from './rotors/defining-torsion.js';
import { scanRotor } from './scan-rotor.js';
import type { ScanOptions } from './scan-task.js';

function scan(smiles: string | Molecule, atoms: Torsion, options: Omit<ScanOptions, 'starts'> = {}, seed = 1): Profile {
  const molecule = typeof smiles === 'string' ? moleculeFromSmiles(smiles) : smiles;
  const potential = mmff94(molecule);
  const found = conformers(molecule, potential, { count: 8, seed, tolerance: 0.1 });
  const starts = found.conformers.map(({ coordinates }) => coordinates);
  const settled = { ...molecule, stereo: perceiveStereo(molecule, starts[0]) };
  return scanRotor(settled, potential, atoms, { starts, step: 30, ...options });
}

const energyAtAngle = ({ points }: Profile, angle: number): number =>
  points.find((point) => Math.abs(wrapDegrees(point.angle - angle)) < 1e-6)?.energy ?? Number.NaN;

/** Largest difference of energy between points of equal angle (or opposite, for a sign of -1), kcal/mol. */
function apart(p: Profile, q: Profile, sign: 1 | -1 = 1): number {
  return Math.max(...p.points.map(({ angle, energy }) => Math.abs(energyAtAngle(q, sign * angle) - energy)));
}

describe('the same molecule written five ways gives the same profile', () => {
  const written: [string, [string, Torsion][]][] = [
    [
      'N-propylacetamide',
      [
        ['CC(=O)NCCC', [3, 4, 5, 6]],
        ['CCCNC(C)=O', [3, 2, 1, 0]],
        ['N(C(C)=O)CCC', [0, 4, 5, 6]],
        ['C(C)CNC(=O)C', [3, 2, 0, 1]],
        ['O=C(NCCC)C', [2, 3, 4, 5]],
      ],
    ],
    [
      '4-methoxybutan-1-ol',
      [
        ['COCCCCO', [2, 3, 4, 5]],
        ['OCCCCOC', [1, 2, 3, 4]],
        ['C(CCCO)OC', [0, 1, 2, 3]],
        ['C(CO)CCOC', [1, 0, 3, 4]],
        ['O(C)CCCCO', [2, 3, 4, 5]],
      ],
    ],
    [
      'N-(2-hydroxyethyl)methanesulfonamide',
      [
        ['CS(=O)(=O)NCCO', [1, 4, 5, 6]],
        ['O=S(=O)(C)NCCO', [1, 4, 5, 6]],
        ['C(O)CNS(C)(=O)=O', [4, 3, 2, 0]],
        ['S(C)(=O)(=O)NCCO', [0, 4, 5, 6]],
        ['N(CCO)S(=O)(=O)C', [4, 0, 1, 2]],
      ],
    ],
    [
      '(2S)-2-amino-3-phenylpropan-1-ol',
      [
        ['N[C@@H](Cc1ccccc1)CO', [0, 1, 2, 3]],
        ['OC[C@@H](N)Cc1ccccc1', [3, 2, 4, 5]],
        ['c1ccccc1C[C@H](N)CO', [8, 7, 6, 5]],
        ['[C@@H](N)(CO)Cc1ccccc1', [1, 0, 4, 5]],
        ['C([C@@H](CO)N)c1ccccc1', [4, 1, 0, 5]],
      ],
    ],
  ];
  test.each(written)('%s', (_, ways) => {
    const profiles = ways.map(([smiles, atoms]) => scan(smiles, atoms));
    const differences = profiles.slice(1).map((other) => apart(profiles[0], other));
    for (const difference of differences) expect(difference).toBeLessThan(0.01);
  });
});
test('a profile does not depend on where the starting geometries lie and how they are turned', () => {
  const atoms: Torsion = [0, 1, 3, 4];
  const molecule = moleculeFromSmiles('N[C@@H](C)CO');
  const potential = mmff94(molecule);
  const starts = conformers(molecule, potential, { count: 4, seed: 1 }).conformers.map(({ coordinates }) => coordinates);
  // a turn of 90 degrees about z, one of 180 about x, and a shift
  const moved = starts.map((x) => x.map((_, k) => [-x[k - (k % 3) + 1] + 17, -x[k - (k % 3)] - 4, -x[k - (k % 3) + 2] + 250][k % 3]));
  moved.forEach((x, n) => {
    expect(potential.evaluate(x)).toBeCloseTo(potential.evaluate(starts[n]), 8);
  });
  const [p, q] = [starts, moved].map((from) => scanRotor(molecule, potential, atoms, { starts: from, step: 30 }));
  expect(apart(p, q)).toBeLessThan(1e-4);
});

describe('mirror images', () => {
  test('have profiles whose angle changes sign', () => {
    const left = scan('N[C@@H](Cc1ccccc1)CO', [0, 1, 2, 3]);
    const right = scan('N[C@H](Cc1ccccc1)CO', [0, 1, 2, 3]);
    expect(apart(left, right, -1)).toBeLessThan(0.01);
    expect(apart(left, right)).toBeGreaterThan(0.1);
  });

  test('are one molecule for a meso compound: phi and -phi agree exactly, and no stereocentre is inverted', () => {
    const smiles = 'C[C@H](O)[C@H](O)C';
    const atoms: Torsion = [0, 1, 3, 5];
    const profile = scan(smiles, atoms);
    expect(apart(profile, profile, -1)).toBe(0);
    const molecule = moleculeFromSmiles(smiles);
    const { tetrahedral } = molecule.stereo;
    expect(tetrahedral.map(({ sign }) => Math.abs(sign))).toEqual([1, 1]);
    for (const { coordinates, angle } of profile.points) {
      expect(perceiveStereo(molecule, coordinates).tetrahedral.map(({ sign }) => sign)).toEqual(tetrahedral.map(({ sign }) => sign));
      expect(Math.abs(wrapDegrees(degrees(torsion(coordinates, ...atoms)) - angle))).toBeLessThan(1e-6);
    }
  });

  test('are two for its chiral diastereomer', () => {
    const profile = scan('C[C@H](O)[C@@H](O)C', [0, 1, 3, 5]);
    expect(apart(profile, profile, -1)).toBeGreaterThan(0.1);
  });
});

describe('one period', () => {
  test('of a methyl stands for the turn, within what driving one hydrogen distorts', () => {
    const atoms: Torsion = [0, 1, 2, 3];
    const [full, copied] = [scan('[H]CC(=O)C', atoms), scan('[H]CC(=O)C', atoms, { period: 120 })];
    expect(copied.period).toBe(120);
    expect(copied.points.map(({ angle }) => angle)).toEqual(full.points.map(({ angle }) => angle));
    expect(apart(full, copied)).toBeLessThan(0.05);
    expect(copied.points.filter(({ copyOf }) => copyOf === undefined)).toHaveLength(4);
    expect(copied.evaluations).toBeLessThan(0.7 * full.evaluations);
    expect(copied.stationaryPoints).toHaveLength(6);
    for (const { kind, angle } of copied.stationaryPoints)
      expect(full.stationaryPoints.some((other) => other.kind === kind && Math.abs(wrapDegrees(angle - other.angle)) < 2)).toBe(true);
    expect(copied.notes.find(({ code }) => code === 'scan/periodic')?.message).toMatch(/approximate/);
    for (const { angle, coordinates } of copied.points)
      expect(Math.abs(wrapDegrees(degrees(torsion(coordinates, ...atoms)) - angle))).toBeLessThan(1e-6);
  });

  test('must divide the turn and hold whole steps', () => {
    expect(() => scan('CCCC', [0, 1, 2, 3], { period: 100 })).toThrow(/does not go into 360/);
    expect(() => scan('CCCC', [0, 1, 2, 3], { period: 120, step: 90 })).toThrow(/do not divide the period/);
    expect(() => scan('CCCC', [0, 1, 2, 3], { period: 120, range: [0, 90] })).toThrow(/exclude each other/);
  });
});

test('points at which the potential lets a stated axis turn over are named', () => {
  // MMFF94 has no torsion term about a cumulene: nothing holds an allene's substituents in their planes
  const molecule = moleculeFromSmiles('CC(Cl)=[C@]=C(C)Br');
  const profile = scanRotor(molecule, mmff94(molecule), [8, 0, 1, 2], { starts: [embed(molecule)], step: 60 });
  const lost = profile.points.filter(
    ({ coordinates }) => perceiveStereo(molecule, coordinates).axes[0].sign !== molecule.stereo.axes[0].sign,
  );
  expect(lost.length).toBeGreaterThan(0);
  expect(profile.notes.find(({ code }) => code === 'scan/stereo')?.message).toContain(
    `lost at ${lost.map(({ angle }) => angle).join(', ')} degrees`,
  );
});

/**
 * Conformers of butane and pentane and the stationary points of pentane's two-torsion surface as docs/validation.md lists them beside ACONF (D. Gruzman,
 * A. Karton, J. M. L. Martin, J. Phys. Chem. A 113, 11974 (2009)) and J. M. L. Martin, J. Phys. Chem. A 117, 3118 (2013). The page is written by
 * benchmarks/alkanes.mjs; a few rows of each kind are calculated again here, by refinement from the angles that the names mean.
 */
import { readFileSync } from 'node:fs';
import { mmff94 } from '@tordial/forcefield';
import { degrees, embed, moleculeFromSmiles, radians, torsion, turnAbout, wrapDegrees, wrapRadians } from '@tordial/geometry';
import { drive, findRotors, relax, stationaryPoint } from '@tordial/scan';
import { describe, expect, it } from 'vitest';

interface Published {
  readonly conformers: {
    readonly smiles: Readonly<Record<string, string>>;
    readonly rows: readonly {
      readonly from: string;
      readonly to: string;
      readonly published: number;
      readonly angles: readonly (readonly number[])[];
    }[];
  };
  readonly pentane: {
    readonly rows: readonly {
      readonly name: string;
      readonly published: number;
      readonly angles: readonly number[];
      readonly order: number;
    }[];
  };
}

const repository = new URL('../../../', import.meta.url);
const { conformers, pentane }: Published = JSON.parse(readFileSync(new URL('benchmarks/data/alkanes.json', repository), 'utf8'));
const page = readFileSync(new URL('docs/validation.md', repository), 'utf8');
const listedConformers = new Map(
  Array.from(page.matchAll(/^\| ([BPH]_\S+) \| ([BPH]_\S+) \| ([\d.]+) \| ([\d.]+) \|/gm), ([, from, to, ...values]) => [
    `${from} ${to}`,
    values.map(Number),
  ]),
);
const listedPoints = new Map(
  Array.from(page.matchAll(/^\| ([\w-]+) \| (\d) \| ([\d.]+) \| ([\d.]+) \| -?[\d.]+ \| (\d) \|/gm), ([, name, ...values]) => [
    name,
    values.map(Number),
  ]),
);

/** The stationary point of an order next to the angles of a chain's C-C-C-C torsions, and the angles where it stands. */
function refined(smiles: string, angles: readonly number[], order: number) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule, { variant: 'MMFF94' });
  const chain = angles.map((_, n) => [n, n + 1, n + 2, n + 3] as const);
  const x = relax(molecule, potential, embed(molecule, { seed: 1 }), { tolerance: 0.01 }).coordinates;
  chain.forEach((atoms, n) => {
    const side = findRotors(molecule).flatMap(({ axis, sides }) =>
      axis.includes(atoms[1]) && axis.includes(atoms[2]) ? sides.filter((s) => s.includes(atoms[3])) : [],
    );
    turnAbout(x, atoms[1], atoms[2], side[0], wrapRadians(radians(angles[n]) - torsion(x, ...atoms)));
  });
  const start = order === 0 ? relax(molecule, potential, x, { tolerance: 1e-3 }).coordinates : x;
  const found = drive(stationaryPoint(start, { order, tolerance: 1e-5, maxStep: 0.1 }), potential);
  return { ...found, angles: chain.map((atoms) => degrees(torsion(found.coordinates, ...atoms))) };
}

const near = (angles: readonly number[], named: readonly number[]): boolean =>
  angles.every((angle, n) => Math.abs(wrapDegrees(angle - named[n])) < 35);

describe('the alkanes of docs/validation.md', () => {
  it('are all there, with the published values', () => {
    expect(conformers.rows).toHaveLength(15);
    for (const { from, to, published } of conformers.rows)
      expect(Math.abs((listedConformers.get(`${from} ${to}`)?.[0] ?? 0) - published)).toBeLessThan(0.006);
    expect(pentane.rows.length).toBeGreaterThanOrEqual(13);
    for (const { name, published, order } of pentane.rows) {
      const [stated = Number.NaN, value = Number.NaN] = listedPoints.get(name) ?? [];
      expect(stated).toBe(order);
      expect(Math.abs(value - published)).toBeLessThan(0.006);
    }
  });

  it.each(['B_T B_G', 'P_TT P_TG', 'P_TT P_GG'])('%s come out as listed', (pair) => {
    const row = conformers.rows.find(({ from, to }) => `${from} ${to}` === pair);
    if (!row) throw new Error(pair);
    const smiles = conformers.smiles[pair[0]];
    const [a, b] = row.angles.map((angles) => refined(smiles, angles, 0));
    expect([a.converged, b.converged, a.order, b.order]).toEqual([true, true, 0, 0]);
    expect(near(b.angles, row.angles[1])).toBe(true);
    expect(Math.abs(b.energy - a.energy - (listedConformers.get(pair)?.[1] ?? Number.NaN))).toBeLessThan(0.006);
  });

  it.each(['180-000-TS', '240-180-TS', '240-120-SP', '120-120-SP'])(
    'pentane %s comes out as listed, with the negative eigenvalues that its name means',
    (name) => {
      const row = pentane.rows.find((point) => point.name === name);
      if (!row) throw new Error(name);
      const lowest = refined('CCCCC', [180, 180], 0).energy;
      const found = refined('CCCCC', row.angles, row.order);
      expect(found.converged).toBe(true);
      expect([...found.modes.eigenvalues].filter((value) => value < 0)).toHaveLength(name.endsWith('TS') ? 1 : 2);
      expect(near(found.angles, row.angles)).toBe(true);
      expect(Math.abs(found.energy - lowest - (listedPoints.get(name)?.[2] ?? Number.NaN))).toBeLessThan(0.006);
    },
  );
});

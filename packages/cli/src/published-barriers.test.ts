/**
 * Barriers of the published set BHROT27 (L. Goerigk et al., Phys. Chem. Chem. Phys. 19, 32184 (2017)) as docs/validation.md lists them for
 * MMFF94 and MMFF94s. The page is written by benchmarks/barriers.mjs; the plain rotations and the amides are calculated again here.
 */
import { readFileSync } from 'node:fs';
import type { ProfileDocument } from '@tordial/scan';
import { describe, expect, it } from 'vitest';
import { torsionProfile } from './torsion-profile.js';

interface System {
  readonly smiles: string;
  readonly torsions: readonly [number, number, number, number][];
  readonly structures: Readonly<Record<string, number>>;
  readonly rows: readonly (readonly [from: string, to: string, barrier: number])[];
  /** Set where one sweep is calculated instead of the envelope. */
  readonly sweep?: number;
  readonly left?: readonly string[];
}

const repository = new URL('../../../', import.meta.url);
const { systems } = JSON.parse(readFileSync(new URL('benchmarks/data/barriers.json', repository), 'utf8')) as {
  systems: readonly System[];
};
const page = readFileSync(new URL('docs/validation.md', repository), 'utf8');
const listed = new Map(
  Array.from(page.matchAll(/^\| (\w+) \| (\w+) \| ([\d.]+) \| (-?[\d.]+)(?: \(\w\))? \| (-?[\d.]+)/gm), ([, from, to, ...numbers]) => [
    `${from} ${to}`,
    numbers.map(Number),
  ]),
);

/** The stationary point of a kind nearest to an angle, degrees. */
function nearest({ stationaryPoints }: ProfileDocument, angle: number, isWell: boolean): number {
  const apart = (other: number): number => Math.abs(((other - angle + 540) % 360) - 180);
  const alike = stationaryPoints.filter(({ kind }) => (kind === 'well') === isWell);
  return alike.reduce((best, point) => (apart(point.angle) < apart(best.angle) ? point : best)).relativeEnergy;
}

describe('the published barriers', () => {
  it('are 27, of 14 molecules', () => {
    expect(systems.flatMap(({ rows }) => rows)).toHaveLength(27);
    expect(new Set(systems.map(({ smiles }) => smiles)).size).toBe(14);
  });

  it('stand in docs/validation.md, but for the three second saddles', () => {
    const rows = systems.flatMap(({ rows, left = [] }) => rows.filter(([, to]) => !left.includes(to)));
    expect(rows).toHaveLength(24);
    for (const [from, to, barrier] of rows) expect(listed.get(`${from} ${to}`)?.[0]).toBe(barrier);
  });

  it('are met by MMFF94 within 1.3 kcal/mol in the mean of the 16 plain rotations', () => {
    const plain = systems.filter(({ sweep, left }) => sweep === undefined && !left).flatMap(({ rows }) => rows);
    const deviations = plain.map(([from, to, barrier]) => Math.abs((listed.get(`${from} ${to}`)?.[1] ?? Number.NaN) - barrier));
    expect(deviations).toHaveLength(16);
    expect(deviations.reduce((sum, deviation) => sum + deviation, 0) / 16).toBeLessThan(1.3);
  });

  it.each(systems.filter(({ sweep }) => sweep === undefined))(
    'of $smiles come out as listed',
    async ({ smiles, torsions, structures, rows, left = [] }) => {
      for (const [column, forceField] of (['MMFF94', 'MMFF94s'] as const).entries()) {
        const profile = await torsionProfile(smiles, torsions[0], { forceField });
        for (const [from, to] of rows.filter(([, name]) => !left.includes(name))) {
          const barrier = nearest(profile, structures[to], false) - nearest(profile, structures[from], true);
          expect(Math.abs(barrier - (listed.get(`${from} ${to}`)?.[column + 1] ?? Number.NaN))).toBeLessThan(0.05);
        }
      }
    },
  );
});

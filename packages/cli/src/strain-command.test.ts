/** `tordial strain` on geometries whose strain is known: the points of a scan, from XYZ and from SDF. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { TorsionalStrain } from '@tordial/analysis';
import type { ProfileDocument } from '@tordial/scan';
import { beforeAll, describe, expect, it } from 'vitest';
import { scratchFolder, tordial } from './command.fixture.js';

const page = readFileSync(new URL('../../../docs/validation.md', import.meta.url), 'utf8');

describe('the strain of hydrogen peroxide', () => {
  const cwd = scratchFolder();
  let points: ProfileDocument['points'];
  beforeAll(async () => {
    await tordial(['profile', 'OO', '--torsion', '2,0,1,3', '--step', '15', '-o', 'peroxide'], { cwd });
    points = (JSON.parse(readFileSync(join(cwd, 'peroxide', 'profile.json'), 'utf8')) as ProfileDocument).points;
  }, 60_000);

  it.each([
    ['XYZ', ['OO', '--geometry', join('peroxide', 'frames.xyz')]],
    ['SDF', [join('peroxide', 'frames.sdf')]],
  ])(
    'is the height of its profile at every angle, from %s',
    async (_, args) => {
      const { exitCode, stdout } = await tordial(['strain', ...args, '--json'], { cwd });
      expect(exitCode).toBe(0);
      const strains = stdout
        .trim()
        .split('\n')
        .map((line): TorsionalStrain => JSON.parse(line));
      expect(strains).toHaveLength(points.length);
      strains.forEach(({ total, rotors }, n) => {
        expect(rotors).toHaveLength(1);
        // files hold coordinates to four or more decimals
        expect(Math.abs(total - points[n].relativeEnergy)).toBeLessThan(0.005);
      });
      // the barriers of BHROT27's peroxide in MMFF94s, as the page of published barriers lists them
      const listed = (row: string): number => Number(new RegExp(`^\\| h2o2 \\| ${row} \\|[^|]+\\|[^|]+\\| ([\\d.]+)`, 'm').exec(page)?.[1]);
      const at = (angle: number): number => strains[points.findIndex((point) => point.angle === angle)].total;
      expect(Math.abs(at(0) - listed('h2o2_cis'))).toBeLessThan(0.01);
      expect(Math.abs(at(-180) - listed('h2o2_trans'))).toBeLessThan(0.01);
    },
    60_000,
  );
});

/** What of the turn a scan covers: rings over a range, one period, one of each set of equivalent rotors. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { degrees, torsion } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { scratchFolder, tordial } from './command.fixture.js';
import { readProfile } from './profile-reader.js';
import { torsionProfile } from './torsion-profile.js';

const folder = scratchFolder();
const at = (name: string): string => join(folder, name);

describe.concurrent('tordial profile', () => {
  it('drives a ring torsion over a range; document, figure and tables stay open', async () => {
    const { exitCode, stderr } = await tordial([
      ...['profile', 'C1CCCCC1C', '--torsion', '0,1,2,3', '--range', '-60:60', '--step', '15'],
      ...['-o', at('ring')],
    ]);
    expect(exitCode).toBe(0);
    expect(stderr).toMatch(/ring bond/);
    const document = readProfile(readFileSync(at('ring/profile.json'), 'utf8'));
    expect(document.settings.range).toEqual([-60, 60]);
    expect(document.points.map(({ angle }) => angle)).toEqual([-60, -45, -30, -15, 0, 15, 30, 45, 60]);
    for (const { angle, coordinates } of document.points)
      expect(Math.abs(degrees(torsion(Float64Array.from(coordinates), 0, 1, 2, 3)) - angle)).toBeLessThan(1e-4);
    const figure = readFileSync(at('ring/profile.svg'), 'utf8');
    expect(figure).toMatch(/>−60</);
    expect(figure).not.toMatch(/>180</);
    const { exitCode: refused, stderr: why } = await tordial(['analyse', at('ring/profile.json')]);
    expect(refused).not.toBe(0);
    expect(why).toMatch(/range of angles only/);
  });

  it('names --range where a ring torsion is asked for without it', async () => {
    const { exitCode, stderr } = await tordial(['profile', 'C1CCCCC1', '--torsion', '0,1,2,3', '--json']);
    expect(exitCode).toBe(2);
    expect(stderr).toMatch(/part of a ring.*--range FROM:TO.*\[torsion\/ring\]/);
  });

  it('keeps what a ring reaches before it would break, and says where that is', async () => {
    const { exitCode, stdout, stderr } = await tordial([
      ...['profile', 'C1CCCCC1', '--torsion', '0,1,2,3', '--range', '0:175', '--step', '5', '--json'],
    ]);
    expect(exitCode).toBe(0);
    expect(stderr).toMatch(/note: .*the ring would break there/);
    const { points, settings, notes } = readProfile(stdout);
    expect(settings.range).toEqual([0, 175]);
    expect(points[points.length - 1].angle).toBeLessThan(175);
    expect(notes.map(({ code }) => code)).toContain('scan/ring-broken');
  });

  it.each([
    [['--range', '60:-60'], /two angles are meant/],
    [['--range', '0:25'], /do not divide the range/],
    [['--range', '-60:60', '--periodic'], /cannot be used with/],
    [['--range', '-60:60', '--full'], /cannot be used with/],
    [['--range', '-60:60', '--rigid'], /cannot be turned rigidly/],
  ])('refuses %j', async (flags, words) => {
    const { exitCode, stderr } = await tordial(['profile', 'C1CCCCC1', '--torsion', '0,1,2,3', '--json', ...flags]);
    expect(stderr).toMatch(words);
    expect(exitCode).toBe(2);
  });

  it('scans one period of a symmetric rotor and says that the copies are approximate', async () => {
    const args = ['profile', 'CC(=O)C', '--rotor', '0-1', '--step', '15', '--no-prove', '--json'];
    const [full, periodic] = await Promise.all([tordial([...args, '--full']), tordial([...args, '--periodic'])]);
    const [whole, copied] = [full, periodic].map(({ stdout }) => readProfile(stdout));
    expect(periodic.stderr).toMatch(/copies are approximate/);
    expect(copied.settings.period).toBe(120);
    expect(copied.points.filter(({ copyOf }) => copyOf !== undefined)).toHaveLength(16);
    for (const [n, { angle, relativeEnergy }] of copied.points.entries()) {
      expect(angle).toBe(whole.points[n].angle);
      expect(Math.abs(relativeEnergy - whole.points[n].relativeEnergy)).toBeLessThan(0.1);
    }
    expect(Number(copied.provenance.evaluations)).toBeLessThan(0.8 * Number(whole.provenance.evaluations));
  });

  it('with --all scans one of each equivalent set, and says which rotors it serves', async () => {
    const { stdout, stderr } = await tordial(['profile', 'CCOCC', '--all', '--step', '30', '--no-prove', '--json', '-o', at('all')]);
    const served = stdout
      .trim()
      .split('\n')
      .map((line) => readProfile(line).rotor.serves);
    expect(served).toEqual([[{ torsion: [12, 4, 3, 2], mirrored: false }], [{ torsion: [4, 3, 2, 1], mirrored: false }]]);
    expect(stderr).toMatch(/stands for the equivalent rotor 4-3-2-1 too/);
    expect(stderr).toMatch(/±sc \(gauche\) +2 /);
  });
});

describe('torsionProfile', () => {
  it('gives a rotor that is served the profile it would get by itself', async () => {
    const options = { step: 30 };
    const [first, second] = await Promise.all(
      (
        [
          [0, 1, 2, 3],
          [4, 3, 2, 1],
        ] as const
      ).map((atoms) => torsionProfile('CCOCC', atoms, options)),
    );
    expect(first.rotor.serves?.[0].torsion).toEqual([...second.rotor.torsion]);
    for (const [n, { energy }] of first.points.entries()) expect(Math.abs(energy - second.points[n].energy)).toBeLessThan(1e-3);
  });

  it('scans the full turn and says so where --periodic has no period to use', async () => {
    const { points, notes } = await torsionProfile('CCCC', [0, 1, 2, 3], { step: 60, periodic: true });
    expect(points).toHaveLength(6);
    expect(notes.map(({ code }) => code)).toContain('scan/no-period');
  });
});

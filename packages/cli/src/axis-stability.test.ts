/** The guide docs/guides/axis-stability.md does what it says: every command in it runs, and its table and figures are theirs. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { ProfileAnalysis } from '@tordial/analysis';
import { beforeAll, describe, expect, it } from 'vitest';
import { type Ended, scratchFolder, tordial } from './command.fixture.js';

const guide = new URL('../../../docs/guides/', import.meta.url);
const text = readFileSync(new URL('axis-stability.md', guide), 'utf8');
const commands = [...text.matchAll(/^tordial (.+)$/gm)].map(([, line]) =>
  (line.match(/"[^"]*"|\S+/g) ?? []).map((word) => word.replaceAll('"', '')),
);
const table = [...text.matchAll(/^\| (KT-\d) \| [^|]+ \| ([\d.]+) \| ([^|]+) \|/gm)];

describe('the guide to hindered axes', () => {
  const cwd = scratchFolder();
  const ended: Ended[] = [];
  beforeAll(async () => {
    const series = /```\n((?:\S+ KT-\d\n)+)```/.exec(text);
    writeFileSync(join(cwd, 'series.smi'), series?.[1] ?? '');
    for (const args of commands) ended.push(await tordial(args, { cwd }));
  }, 240_000);

  it('holds commands that all end well, with cautions wherever a half-life is shown', () => {
    expect(commands.length).toBeGreaterThanOrEqual(7);
    ended.forEach(({ exitCode, stdout, stderr }, n) => {
      expect(`${commands[n].join(' ')}: ${exitCode} ${exitCode === 0 ? '' : stderr}`).toBe(`${commands[n].join(' ')}: 0 `);
      if (`${stdout}${stderr}`.includes('half-life'))
        expect(`${stdout}${stderr}`).toMatch(/caution: .*experiment and the responsible specialist/);
    });
  });

  it('has the barriers and half-lives in its table that the commands give', async () => {
    expect(table).toHaveLength(3);
    for (const [, name, barrier, halfLife] of table) {
      const file = join(cwd, 'series', name, 'profile.json');
      const { stdout } = await tordial(['analyse', file, '--temperature', '298.15', '--json']);
      const { freeEnergy }: { freeEnergy: ProfileAnalysis } = JSON.parse(stdout);
      const [process] = freeEnergy.rows[0].processes;
      expect(process.kind).toBe('racemisation');
      expect(Math.abs((process.barrier ?? 0) - Number(barrier))).toBeLessThan(0.02);
      const shown = await tordial(['analyse', file, '--temperature', '298.15']);
      expect(shown.stdout).toContain(halfLife.trim());
    }
  });

  it('shows the figures that the command drew', () => {
    for (const [, name] of table) {
      const drawn = readFileSync(join(cwd, 'series', name, 'profile.svg'), 'utf8');
      const kept = readFileSync(new URL(`figures/axis-stability-${name}.svg`, guide), 'utf8');
      const title = /<title>[^<]*<\/title>/;
      expect(title.exec(kept)?.[0]).toBe(title.exec(drawn)?.[0]);
    }
  });
});

describe('bad input to the analysis is refused with a reason', () => {
  const cwd = scratchFolder();
  let document: { points: { angle: number; energy: number; converged: boolean }[] };
  beforeAll(async () => {
    const { stdout } = await tordial(['profile', 'OO', '--torsion', '2,0,1,3', '--step', '15', '--json', '--no-prove']);
    document = JSON.parse(stdout);
  }, 60_000);
  const analysed = (change: (copy: typeof document) => void, args: readonly string[] = []) => {
    const copy = structuredClone(document);
    change(copy);
    return tordial(['analyse', '-', ...args], { cwd, input: JSON.stringify(copy) });
  };

  it.each([
    [
      'points that did not converge',
      (copy: typeof document) => copy.points.splice(3, 1, { ...copy.points[3], converged: false }),
      /did not converge/,
      1,
    ],
    ['a turn that is not covered', (copy: typeof document) => copy.points.splice(3, 5), /scan the full turn/, 1],
  ])('%s', async (_, change, words, code) => {
    const { exitCode, stdout, stderr } = await analysed(change);
    expect(stderr).toMatch(words);
    expect(exitCode).toBe(code);
    expect(stdout).toBe('');
  });

  it.each([
    [['--temperature', '0'], /kelvin above 0/, 2],
    [['--temperature', '300:200:10'], /range above 0 K/, 2],
    [['--shift', '0.3ppm'], /both --shift and --field/, 2],
    [['--couplings'], /H-C-C-H|carbon|coupling/i, 1],
  ])('%s', async (args, words, code) => {
    const { exitCode, stdout, stderr } = await analysed(() => undefined, args);
    expect(stderr).toMatch(words);
    expect(exitCode).toBe(code);
    expect(stdout).toBe('');
  });

  it('refuses the strain of a record without a geometry', async () => {
    const { exitCode, stderr } = await tordial(['strain', 'CCCC']);
    expect(stderr).toMatch(/given geometry/);
    expect(exitCode).toBe(2);
  });

  it('proves points afterwards when asked to, and gives both kinds of barriers', async () => {
    const { exitCode, stdout } = await analysed(() => undefined, ['--prove', '--json', '--temperature', '298.15']);
    expect(exitCode).toBe(0);
    const result: { electronic: ProfileAnalysis; freeEnergy: ProfileAnalysis } = JSON.parse(stdout);
    expect(result.freeEnergy.rows[0].processes[0].barrier).not.toBe(result.electronic.rows[0].processes[0].barrier);
    for (const { saddle, energy } of result.electronic.barriers) expect(Math.abs((saddle ?? 0) - energy)).toBeLessThan(0.01);
  });
});

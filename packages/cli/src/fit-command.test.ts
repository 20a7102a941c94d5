import { copyFileSync, existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { expect, it } from 'vitest';
import { z } from 'zod';
import { scratchFolder, tordial } from './command.fixture.js';
import { fitSchema, readFit } from './fit-reader.js';
import { readProfile } from './profile-reader.js';

const guides = new URL('../../../docs/guides/', import.meta.url);
const folder = scratchFolder();
const at = (name: string): string => join(folder, name);
const run = (...args: string[]) => tordial(args, { cwd: folder });

it('the loop of docs/guides/refit-a-torsion.md runs as written, and ends at the reference', async () => {
  const guide = readFileSync(new URL('refit-a-torsion.md', guides), 'utf8');
  const commands = [...guide.matchAll(/```sh\n([\s\S]*?)```/g)].flatMap(([, block]) => block.trim().split('\n'));
  expect(commands).toHaveLength(3);
  copyFileSync(fileURLToPath(new URL('refit/better.csv', guides)), at('better.csv'));
  for (const command of commands) {
    const [program, ...args] = command.match(/"[^"]*"|\S+/g)?.map((word) => word.replaceAll('"', '')) ?? [];
    expect(program).toBe('tordial');
    const { exitCode, stderr } = await run(...args);
    expect(stderr).not.toMatch(/error:/);
    expect(exitCode).toBe(0);
    // the table in the guide is what the command says
    if (args[0] === 'fit') for (const line of stderr.split('\n').slice(0, 8)) expect(guide).toContain(line.trimEnd());
  }
  expect(readdirSync(at('terms')).sort()).toEqual(['fit.json', 'fit.svg', 'points.csv', 'terms.csv']);
  const fit = readFit(readFileSync(at('terms/fit.json'), 'utf8'));
  expect(fit.quality.rmsdAfter).toBeLessThan(0.1 * fit.quality.rmsdBefore);
  const after = readProfile(readFileSync(at('after/profile.json'), 'utf8'));
  expect(after.provenance.potential).toBe('MMFF94s + series');
  for (const { angle, after: promised } of fit.sets[0].points) {
    const point = after.points.find((other) => Math.abs(other.angle - angle) < 1e-6);
    const zero = Math.min(...fit.sets[0].points.map((row) => row.after));
    expect(Math.abs((point?.relativeEnergy ?? 0) - (promised - zero))).toBeLessThan(5e-3);
  }

  // the same series in one energy, and bad input, on the files that are there now
  const energy = await run('energy', 'CCSC', '--torsions', 'terms/fit.json', '--json');
  expect(energy.exitCode).toBe(0);

  writeFileSync(at('nan.csv'), 'angle,energy (kcal/mol)\n0,1\n60,nan\n120,2\n180,0\n');
  writeFileSync(at('short.csv'), 'angle,energy (kcal/mol)\n0,1\n60,0\n180,2\n');
  writeFileSync(at('unitless.csv'), 'angle,energy\n0,1\n60,0\n120,1\n180,2\n');
  writeFileSync(at('missing.json'), '{"command": ["no-such-program-here"], "method": "hf"}');
  writeFileSync(at('crash.cjs'), 'process.stderr.write("out of memory"); process.exit(3);');
  writeFileSync(at('crash.json'), JSON.stringify({ command: [process.execPath, at('crash.cjs')], method: 'hf', retries: 0 }));
  writeFileSync(at('other.xyz'), '3\nenergy 0.1 kcal/mol\nO 0 0 0\nH 0 0 0.96\nH 0.93 0 -0.24\n');
  const fitTo = (...args: string[]) => run('fit', 'before/profile.json', ...args, '-o', 'nothing');
  for (const [args, code, words] of [
    [['--reference', 'nan.csv'], 2, /nan\.csv.*line 3.*no finite number/],
    [['--reference', 'short.csv', '--order', '3'], 1, /3 independent points cannot determine 4 parameters/],
    [['--reference', 'unitless.csv'], 2, /states no unit/],
    [['--reference', 'other.xyz'], 2, /another molecule/],
    [['--reference', 'gone.csv'], 2, /there is no file gone\.csv/],
    [['--reference', 'better.csv', '--order', '9'], 2, /order from 1 to 6/],
    [['--engine', 'missing.json'], 1, /no-such-program-here cannot be started/],
    [['--engine', 'crash.json'], 1, /out of memory/],
    [['--engine', 'missing.json', '--reference', 'better.csv'], 2, /cannot be used with/],
  ] as const) {
    const { exitCode, stderr, stdout } = await fitTo(...args);
    expect(stderr).toMatch(words);
    expect(exitCode).toBe(code);
    expect(stdout).toBe('');
    if (existsSync(at('nothing'))) expect(readdirSync(at('nothing'))).toEqual([]);
  }
  const unasked = await run('profile', 'CCSC', '--torsion', '0,1,2,3', '--single-points', '-o', 'nothing');
  expect(unasked.stderr).toMatch(/--engine CONFIG/);
  expect(unasked.exitCode).toBe(2);
  const description = await run('fit', 'before/profile.json', '--json', '--order', '6');
  expect(JSON.parse(description.stdout).settings.target).toBe('profile');
});

it('the fit document is described by docs/schemas/fit-1.json', () => {
  const written = JSON.parse(readFileSync(new URL('../../../docs/schemas/fit-1.json', import.meta.url), 'utf8'));
  expect(written).toEqual(JSON.parse(JSON.stringify(z.toJSONSchema(fitSchema))));
});

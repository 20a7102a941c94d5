/** Files as they come: line ends, tabs, blank lines, comments, gzip; frames of geometries beside a molecule; limits. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { scratchFolder, tordial } from './command.fixture.js';

const folder = scratchFolder();
const at = (name: string): string => join(folder, name);

const linesOf = (stdout: string): Record<string, unknown>[] =>
  stdout
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line));

describe('frames of geometries', async () => {
  const built = await tordial(['build', 'C[C@H](F)Cl', '--conformers', '1', '-o', at('start.xyz')]);
  await tordial(['build', 'C[C@H](F)Cl', '--conformers', '1', '-o', at('start.sdf')]);
  const frame = readFileSync(at('start.xyz'), 'utf8');
  const shifted = frame.replace(/^C .*$/m, 'C   9.0 9.0 9.0');
  writeFileSync(at('frames.xyz'), `${frame}\n\n${shifted}`);
  const untidy = `\n${frame}\n \n${shifted}\n\n`.replace(/ {2,}/g, '\t').replaceAll('\n', '\r\n');
  writeFileSync(at('untidy.xyz'), untidy);
  writeFileSync(at('untidy.xyz.gz'), gzipSync(untidy));

  it('give one energy each, in the atom order of a SMILES or of a molfile, however the file is laid out', async () => {
    expect(built.exitCode).toBe(0);
    const runs = await Promise.all(
      ['frames.xyz', 'untidy.xyz', 'untidy.xyz.gz'].flatMap((file) =>
        ['C[C@H](F)Cl', at('start.sdf')].map((molecule) => tordial(['energy', molecule, '--geometry', at(file), '--json'])),
      ),
    );
    const energies = runs.map(({ exitCode, stdout }) => {
      expect(exitCode).toBe(0);
      const lines = linesOf(stdout);
      expect(lines.map(({ index, frame: number }) => [index, number])).toEqual([
        [0, 0],
        [0, 1],
      ]);
      return lines.map(({ energy }) => energy);
    });
    for (const other of energies) expect(other).toEqual(energies[0]);
    expect(Number(energies[0][1])).toBeGreaterThan(Number(energies[0][0]) + 100);
  });

  it('are refused in another atom order, and with a stereocentre inverted, before anything is computed', async () => {
    const mirrored = frame
      .split('\n')
      .map((line, n) => (n < 2 ? line : line.replace(/^(\S+\s+)(\S+)/, (_, symbol: string, x: string) => symbol + -Number(x))))
      .join('\n');
    writeFileSync(at('mirrored.xyz'), mirrored);
    const [order, hand] = await Promise.all([
      tordial(['energy', 'C[C@H](Cl)F', '--geometry', at('frames.xyz')]),
      tordial(['profile', 'C[C@H](F)Cl', '--rotor', '0-1', '--geometry', at('mirrored.xyz'), '--json']),
    ]);
    expect(order.stderr).toMatch(/frame 1: atom 2 is F, in the molecule Cl.*\[xyz\/atoms\]/);
    expect(hand.stderr).toMatch(/frame 1: atom 1 has the opposite of the configuration.*\[xyz\/stereo\]/);
    expect([order.exitCode, hand.exitCode, order.stdout, hand.stdout]).toEqual([1, 1, '', '']);
  });
});

describe.concurrent('lists of SMILES', () => {
  it('take Windows line ends, tabs, blank lines, comments and gzip; names and order are kept', async () => {
    const list = '# invented\r\n\r\nCCO\tfirst one\r\n   \r\nCOC   second\r\n# CC skipped\r\nCCC';
    writeFileSync(at('list.smi'), list);
    writeFileSync(at('list.smi.gz'), gzipSync(list));
    const [plain, packed, piped] = await Promise.all([
      tordial(['energy', at('list.smi'), '--json']),
      tordial(['energy', at('list.smi.gz'), '--json']),
      tordial(['energy', '-', '--json'], { input: list }),
    ]);
    expect(linesOf(plain.stdout).map(({ name, atoms }) => [name, atoms])).toEqual([
      ['first one', 9],
      ['second', 9],
      ['', 11],
    ]);
    expect(packed.stdout).toBe(plain.stdout);
    expect(piped.stdout).toBe(plain.stdout);
  });

  it.each([
    ['--max-atoms', '8', 'CCC', /11 atoms.*limit of 8/],
    ['--max-rings', '1', 'c1ccc2ccccc2c1', /2 rings.*limit of 1/],
    ['--max-record', '10', 'CCCCCCCCCCCCCCCC', /limit of 10/],
  ])('stop at a limit, which is a setting: %s %s', async (flag, value, smiles, words) => {
    const [stopped, raised] = await Promise.all([tordial(['rotors', smiles, flag, value]), tordial(['rotors', smiles])]);
    expect(stopped.stderr).toMatch(words);
    expect([stopped.exitCode, raised.exitCode]).toEqual([1, 0]);
  });
});

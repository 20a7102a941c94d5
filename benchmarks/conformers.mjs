/**
 * The lowest of 20 conformers beside python3-rdkit's lowest of 20, both relaxed with MMFF94s: the first 100 molecules of
 * packages/geometry/fixtures/nci.smi with 4 to 10 rotors that move heavy atoms on both sides. Open stereocentres are left to each start, as
 * the toolkit does. The toolkit against itself with another seed shows what chance does. Prints the table of docs/validation.md. Needs the
 * build and python3-rdkit; takes a few minutes.
 *
 *   node benchmarks/conformers.mjs [SEED]
 */
import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { mmff94 } from '@tordial/forcefield';
import { fragmentsOf, moleculeFromSmiles } from '@tordial/geometry';
import { conformers, findRotors } from '@tordial/scan';

const COUNT = 20;
const MOLECULES = 100;
const seed = Number(process.argv[2] ?? 1);
const ELEMENTS = new Set([1, 6, 7, 8, 9, 14, 15, 16, 17, 35, 53]);
const here = (path) => fileURLToPath(new URL(path, import.meta.url));

const rows = readFileSync(here('../packages/geometry/fixtures/nci.smi'), 'utf8')
  .trimEnd()
  .split('\n')
  .map((line) => line.split('\t'))
  .map(([smiles, name]) => ({ smiles, name, molecule: moleculeFromSmiles(smiles) }))
  .filter(({ molecule }) => fragmentsOf(molecule).count === 1 && molecule.atomicNumbers.every((z) => ELEMENTS.has(z)))
  .filter(({ molecule }) => {
    const flexible = heavyRotors(molecule);
    return flexible >= 4 && flexible <= 10;
  })
  .slice(0, MOLECULES);

function heavyRotors(molecule) {
  const heavy = (side) => side.filter((i) => molecule.atomicNumbers[i] > 1).length > 1;
  return findRotors(molecule).filter(({ sides: [a, b] }) => heavy(a) && heavy(b)).length;
}

/** Lowest energy and seconds a molecule from `starts` embedded structures. */
function own(starts) {
  return rows.map(({ molecule }) => {
    const begin = performance.now();
    const found = conformers(molecule, mmff94(molecule), { count: COUNT, starts, seed, openStereo: 'any' });
    return { energy: found.conformers[0].energy, seconds: (performance.now() - begin) / 1000 };
  });
}

const { status, stdout, stderr, error } = spawnSync('/usr/bin/python3', [here('conformers/reference.py'), String(COUNT), '1', '2'], {
  input: rows.map(({ smiles }) => smiles).join('\n'),
  encoding: 'utf8',
});
if (status !== 0) throw new Error(`python3-rdkit is needed: ${error?.message ?? stderr.trim().split('\n').at(-1)}`);
const reference = stdout
  .trim()
  .split('\n')
  .map((line) => line.split(' ').map(Number));
const toolkit = (n) => reference.map((cells) => ({ energy: cells[2 * n], seconds: cells[2 * n + 1] }));

print(
  `${rows.length} molecules, lowest of ${COUNT} conformers against the lowest of ${COUNT} of python3-rdkit (its seed 1), MMFF94s, kcal/mol\n`,
);
print(
  '| | within 1 or below | more than 0.1 below | more than 0.1 above | median difference | mean difference | mean seconds a molecule |',
);
print('| --- | ---: | ---: | ---: | ---: | ---: | ---: |');
const asSet = own(undefined);
report('Tordial, default starts (3 for each conformer)', asSet);
report('Tordial, one start for each conformer', own(COUNT));
report('python3-rdkit, its seed 2', toolkit(1));
print('\nMore than 1 kcal/mol above (default starts):');
rows.forEach(({ smiles, name }, n) => {
  const above = asSet[n].energy - reference[n][0];
  if (above > 1) print(`  ${above.toFixed(2)} (its other seed ${(reference[n][2] - reference[n][0]).toFixed(2)})  ${name}  ${smiles}`);
});

function report(name, results) {
  const differences = results
    .map(({ energy }, n) => energy - reference[n][0])
    .filter((difference) => !Number.isNaN(difference))
    .sort((p, q) => p - q);
  const share = (test) => differences.filter(test).length;
  const mean = (values) => values.reduce((sum, value) => sum + value, 0) / values.length;
  const cells = [
    `${share((d) => d <= 1)} of ${differences.length}`,
    share((d) => d < -0.1),
    share((d) => d > 0.1),
    differences[differences.length >> 1].toFixed(3),
    mean(differences).toFixed(2),
    mean(results.map(({ seconds }) => seconds)).toFixed(2),
  ];
  print(`| ${name} | ${cells.join(' | ')} |`);
}

function print(line) {
  process.stdout.write(`${line}\n`);
}

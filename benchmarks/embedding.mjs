/**
 * Builds every single-fragment molecule of H, C, N, O, F, Si, P, S, Cl, Br and I in packages/geometry/fixtures/nci.smi, and the hard ones
 * beside it: count, failures, configuration after relaxation, and the time a molecule, in one process after a warm-up round, with
 * python3-rdkit's figures for the same molecules where it is installed. Needs the build.
 *
 *   node benchmarks/embedding.mjs [SEED]
 */
import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { mmff94 } from '@tordial/forcefield';
import { canonicalSmiles, embed, fragmentsOf, moleculeFromSmiles, perceiveStereo, threadedRing } from '@tordial/geometry';
import { relax } from '@tordial/scan';

const seed = Number(process.argv[2] ?? 1);
const ELEMENTS = new Set([1, 6, 7, 8, 9, 14, 15, 16, 17, 35, 53]);
const here = (path) => fileURLToPath(new URL(path, import.meta.url));

for (const list of ['nci', 'hard']) {
  const rows = readFileSync(here(`../packages/geometry/fixtures/${list}.smi`), 'utf8')
    .trimEnd()
    .split('\n')
    .map((line) => line.split('\t'))
    .map(([smiles, name]) => ({ smiles, name, molecule: moleculeFromSmiles(smiles) }))
    .filter(({ molecule }) => fragmentsOf(molecule).count === 1 && molecule.atomicNumbers.every((z) => ELEMENTS.has(z)));
  measure(rows);
  const own = measure(rows);
  print(`\n${list}.smi: ${rows.length} molecules of ${Math.min(...rows.map(size))} to ${Math.max(...rows.map(size))} atoms, seed ${seed}`);
  for (const problem of own.problems) print(`  ${problem}`);
  print('\n| | embedded | median ms | 95th percentile ms | with relaxation: median ms | 95th percentile ms |');
  print('| --- | ---: | ---: | ---: | ---: | ---: |');
  report('Tordial', own);
  const other = reference(rows);
  if (other) report('python3-rdkit', other);
}

/** Embeds, relaxes and checks each molecule. */
function measure(rows) {
  const result = { embedded: 0, embedding: [], whole: [], problems: [] };
  for (const { smiles, name, molecule } of rows) {
    const problem = (text) => result.problems.push(`${name} (${smiles}): ${text}`);
    const begin = performance.now();
    let x;
    try {
      x = embed(molecule, { seed });
    } catch (error) {
      problem(error.message);
      continue;
    }
    result.embedding.push(performance.now() - begin);
    result.embedded++;
    check(molecule, x, 'embedded', problem);
    const middle = performance.now();
    let potential;
    try {
      potential = mmff94(molecule);
    } catch (error) {
      problem(`not relaxed: ${error.message}`);
      continue;
    }
    const relaxed = relax(molecule, potential, x, { tolerance: 0.01 });
    result.whole.push(result.embedding.at(-1) + performance.now() - middle);
    if (!relaxed.converged) problem(`largest gradient component ${relaxed.gradientMax} after ${relaxed.evaluations} evaluations`);
    check(molecule, relaxed.coordinates, 'relaxed', problem);
  }
  return result;
}

function check(molecule, x, when, problem) {
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  const seen = perceiveStereo(molecule, x);
  // what the input leaves open stays open
  const stereo = {
    tetrahedral: seen.tetrahedral.map((centre, n) => (tetrahedral[n].sign === 0 ? tetrahedral[n] : centre)),
    doubleBonds: seen.doubleBonds.map((bond, n) => (doubleBonds[n].cis === null ? doubleBonds[n] : bond)),
    axes: seen.axes.map((axis, n) => (axes[n].sign === 0 ? axes[n] : axis)),
  };
  if (canonicalSmiles({ ...molecule, stereo }) !== canonicalSmiles(molecule) || stereo.axes.some(({ sign }, n) => sign !== axes[n].sign))
    problem(`${when} with another configuration: ${canonicalSmiles({ ...molecule, stereo })}`);
  const threaded = threadedRing(molecule.rings, molecule.bonds, x);
  if (threaded) problem(`${when}: ${threaded}`);
}

function reference(rows) {
  const { status, stdout, stderr, error } = spawnSync('/usr/bin/python3', [here('embedding/reference.py')], {
    input: rows.map(({ smiles }) => smiles).join('\n'),
    encoding: 'utf8',
  });
  if (status !== 0) {
    print(`no python3-rdkit: ${error?.message ?? stderr.trim().split('\n').at(-1)}`);
    return undefined;
  }
  const done = stdout
    .trim()
    .split('\n')
    .map((line) => line.split(' '))
    .filter(([state]) => state === 'ok');
  return { embedded: done.length, embedding: done.map(([, ms]) => Number(ms)), whole: done.map(([, , ms]) => Number(ms)) };
}

function report(name, { embedded, embedding, whole }) {
  const cells = [percentile(embedding, 0.5), percentile(embedding, 0.95), percentile(whole, 0.5), percentile(whole, 0.95)];
  print(`| ${name} | ${embedded} | ${cells.map((ms) => ms.toFixed(1)).join(' | ')} |`);
}

function percentile(values, share) {
  return values.toSorted((p, q) => p - q)[Math.min(values.length - 1, Math.floor(share * values.length))];
}

function size({ molecule }) {
  return molecule.atomCount;
}

function print(line) {
  process.stdout.write(`${line}\n`);
}

/**
 * What a user waits for besides the scan itself, and what it takes of memory. Needs the build.
 *
 * - the command from process start to its end: the shortest and the median of several runs, wall clock;
 * - the set-up of MMFF94s for a molecule of 76 atoms, typing to energy function, warm;
 * - resident memory of a process that embeds, relaxes and scans a peptide of 400 atoms once (the process's peak);
 * - resident memory along 1,000 scans of one molecule after another in one process, after a collection each time it is read.
 *
 *   node benchmarks/waiting.mjs
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { cpus, loadavg, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';
import { mmff94 } from '@tordial/forcefield';
import { embed, moleculeFromSmiles } from '@tordial/geometry';
import { relax, scanRotor } from '@tordial/scan';

const RUNS = 9;
const SCANS = 1000;
const READ_EVERY = 200;
const SETUPS = 200;
/** Residues of the molecules for the set-up and for the memory. */
const RESIDUES = { setUp: 7, memory: 39 };

const alaninePeptide = (n) => ({ smiles: `${'N[C@@H](C)C(=O)'.repeat(n)}O`, torsion: [0, 1, 3, 5] });
const megabytes = (bytes) => (bytes / 2 ** 20).toFixed(0);

/** Scans the large peptide in this process and prints its peak of resident memory: the job of a process of its own. */
function scanLarge() {
  const { smiles, torsion } = alaninePeptide(RESIDUES.memory);
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule);
  const start = relax(molecule, potential, embed(molecule), { maxEvaluations: 5000 }).coordinates;
  scanRotor(molecule, potential, torsion, { starts: [start], search: 'sweep' });
  const { maxRSS } = process.resourceUsage();
  console.log(`${molecule.atomCount} ${megabytes(1024 * maxRSS)}`);
}

function median(values) {
  const sorted = values.toSorted((p, q) => p - q);
  return sorted[sorted.length >> 1];
}

/** Milliseconds of a command of this project, from process start to its end. */
function timeCommand(words) {
  const entry = fileURLToPath(new URL('../packages/cli/bin/tordial.mjs', import.meta.url));
  const folder = mkdtempSync(join(tmpdir(), 'tordial-waiting-'));
  const wall = [];
  for (let run = 0; run < RUNS; run++) {
    const begin = performance.now();
    const { status, stderr } = spawnSync(process.execPath, [entry, ...words, ...(words.includes('profile') ? ['-o', folder] : [])], {
      encoding: 'utf8',
    });
    wall.push(performance.now() - begin);
    if (status !== 0) throw new Error(stderr);
  }
  rmSync(folder, { recursive: true });
  return wall;
}

function printCommands() {
  console.log(`shortest and median of ${RUNS} runs, milliseconds; load average ${loadavg()[0].toFixed(1)} on ${cpus().length} cores\n`);
  console.log('| command | shortest | median |\n|---|---:|---:|');
  const commands = [
    ['node -e 0', null],
    ['tordial --help', ['--help']],
    ['tordial profile CCCC --torsion 0,1,2,3', ['profile', 'CCCC', '--torsion', '0,1,2,3']],
  ];
  for (const [name, words] of commands) {
    const wall = words ? timeCommand(words) : timeEmpty();
    console.log(`| \`${name}\` | ${Math.min(...wall).toFixed(0)} | ${median(wall).toFixed(0)} |`);
  }
}

/** Milliseconds of a process that does nothing. */
function timeEmpty() {
  return Array.from({ length: RUNS }, () => {
    const begin = performance.now();
    spawnSync(process.execPath, ['-e', '0']);
    return performance.now() - begin;
  });
}

function printSetUp() {
  const molecule = moleculeFromSmiles(alaninePeptide(RESIDUES.setUp).smiles);
  const times = Array.from({ length: SETUPS }, () => {
    const begin = performance.now();
    mmff94(molecule);
    return performance.now() - begin;
  });
  console.log(
    `\nset-up of MMFF94s at ${molecule.atomCount} atoms: ${times[0].toFixed(1)} ms when first met, ${median(times).toFixed(2)} ms in the median of ${SETUPS}`,
  );
}

function printLarge() {
  const { stdout, stderr, status } = spawnSync(process.execPath, [fileURLToPath(import.meta.url), '--large'], { encoding: 'utf8' });
  if (status !== 0) throw new Error(stderr);
  const [atoms, peak] = stdout.trim().split(' ');
  console.log(`\nsweep of a peptide of ${atoms} atoms, a process of its own with embedding and relaxation: at most ${peak} MB resident`);
}

function printGrowth() {
  setFlagsFromString('--expose-gc');
  const collect = runInNewContext('gc');
  const molecule = moleculeFromSmiles('COc1ccccc1');
  const potential = mmff94(molecule);
  const start = relax(molecule, potential, embed(molecule)).coordinates;
  console.log(`\n| scans of anisole done | resident MB | JavaScript heap MB | array buffers MB |\n|---:|---:|---:|---:|`);
  for (let done = 0; done <= SCANS; done++) {
    if (done > 0) scanRotor(molecule, potential, [0, 1, 2, 3], { starts: [start] });
    if (done % READ_EVERY !== 0) continue;
    collect();
    const { rss, heapUsed, arrayBuffers } = process.memoryUsage();
    console.log(`| ${done} | ${megabytes(rss)} | ${(heapUsed / 2 ** 20).toFixed(1)} | ${(arrayBuffers / 2 ** 20).toFixed(1)} |`);
  }
}

if (process.argv[2] === '--large') scanLarge();
else {
  console.log(`${cpus()[0].model}, Node ${process.version}\n`);
  printCommands();
  printSetUp();
  printLarge();
  printGrowth();
}

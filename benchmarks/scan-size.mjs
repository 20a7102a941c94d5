/**
 * How the time of a relaxed scan grows with the molecule: one sweep of 36 points about the middle bond of linear alkanes and about the first
 * backbone bond of oligopeptides H-(Ala)n-OH, processor time, and the exponent of time over atoms fitted to the logarithms. Needs the build.
 *
 *   node benchmarks/scan-size.mjs
 */
import { cpus } from 'node:os';
import { mmff94 } from '@tordial/forcefield';
import { embed, moleculeFromSmiles } from '@tordial/geometry';
import { relax, scanRotor } from '@tordial/scan';

const POINTS = 36;
/** Sweeps of one molecule: at least so many, and for so many milliseconds, that small molecules are measured warm as well. */
const ROUNDS = 3;
const WARM = 600;

const alkane = (n) => ({ smiles: 'C'.repeat(n), torsion: [n / 2 - 2, n / 2 - 1, n / 2, n / 2 + 1] });
const peptide = (n) => ({ smiles: `${'N[C@@H](C)C(=O)'.repeat(n)}O`, torsion: [0, 1, 3, 5] });
const SERIES = {
  'linear alkanes': [4, 8, 16, 30, 60].map(alkane),
  'alanine peptides': [1, 3, 6, 12, 20, 39].map(peptide),
};

console.log(`${cpus()[0].model}, Node ${process.version}; processor time, the shortest of at least ${ROUNDS} sweeps\n`);
for (const [name, members] of Object.entries(SERIES)) {
  console.log(`${name}\n\n| atoms | evaluations a point | us an evaluation | ms a sweep |\n|---|---|---|---|`);
  const logs = [];
  for (const { smiles, torsion } of members) {
    const molecule = moleculeFromSmiles(smiles);
    const potential = mmff94(molecule);
    const start = relax(molecule, potential, embed(molecule), { maxEvaluations: 5000 }).coordinates;
    let milliseconds = Number.POSITIVE_INFINITY;
    let evaluations = 0;
    for (let round = 0, spent = 0; round < ROUNDS || spent < WARM; round++) {
      const begin = process.cpuUsage();
      ({ evaluations } = scanRotor(molecule, potential, torsion, { starts: [start], search: 'sweep' }));
      const { user, system } = process.cpuUsage(begin);
      milliseconds = Math.min(milliseconds, (user + system) / 1000);
      spent += (user + system) / 1000;
    }
    logs.push([Math.log(molecule.atomCount), Math.log(milliseconds)]);
    console.log(
      `| ${molecule.atomCount} | ${(evaluations / POINTS).toFixed(1)} | ${((1000 * milliseconds) / evaluations).toFixed(1)} | ${milliseconds.toFixed(1)} |`,
    );
  }
  const mean = (k) => logs.reduce((sum, pair) => sum + pair[k], 0) / logs.length;
  const [atoms, time] = [mean(0), mean(1)];
  const slope = logs.reduce((sum, [a, t]) => sum + (a - atoms) * (t - time), 0) / logs.reduce((sum, [a]) => sum + (a - atoms) ** 2, 0);
  console.log(`\ntime grows as atoms^${slope.toFixed(2)}\n`);
}
const { rss } = process.memoryUsage();
console.log(`resident memory at the end: ${(rss / 2 ** 20).toFixed(0)} MB`);

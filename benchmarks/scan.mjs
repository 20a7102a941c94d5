/**
 * Relaxed scans of the 20 molecules of the scan test's reference: 36 points from one starting conformer in one direction, beside python3-rdkit from
 * the same starting geometry with its torsion constraint, and the full search for the lower envelope from 8 conformers. Processor time, so
 * that other work on the machine does not count. Needs the build.
 *
 *   node benchmarks/scan.mjs
 */
import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { cpus } from 'node:os';
import { fileURLToPath } from 'node:url';
import { mmff94 } from '@tordial/forcefield';
import { degrees, embedMany, moleculeFromSmiles, torsion as torsionAngle, wrapDegrees } from '@tordial/geometry';
import { relax, relaxAt, scanRotor } from '@tordial/scan';

const { molecules } = JSON.parse(readFileSync(new URL('../packages/scan/fixtures/scan-reference.json', import.meta.url), 'utf8'));
const CONFORMERS = 8;
const ROUNDS = 3;

/** Processor time of a call in milliseconds, the shortest of a few. */
function measure(call) {
  let best = Number.POSITIVE_INFINITY;
  let result;
  for (let round = 0; round < ROUNDS; round++) {
    const begin = process.cpuUsage();
    result = call();
    const { user, system } = process.cpuUsage(begin);
    best = Math.min(best, (user + system) / 1000);
  }
  return { milliseconds: best, result };
}

function reference(molecule, x, torsion, angles) {
  const input = JSON.stringify({
    elements: [...molecule.atomicNumbers],
    charges: [...molecule.formalCharges],
    bonds: Array.from({ length: molecule.bonds.count }, (_, n) => [molecule.bonds.a[n], molecule.bonds.b[n], molecule.bonds.order[n]]),
    x: [...x],
    torsion,
    angles,
  });
  const script = fileURLToPath(new URL('scan/reference.py', import.meta.url));
  const { status, stdout, stderr, error } = spawnSync('/usr/bin/python3', [script], { input, encoding: 'utf8', maxBuffer: 1 << 26 });
  return status === 0 ? JSON.parse(stdout) : { missing: error?.message ?? stderr.trim().split('\n').at(-1) };
}

const median = (values) => values.toSorted((p, q) => p - q)[values.length >> 1];
const geometricMean = (values) => Math.exp(values.reduce((sum, value) => sum + Math.log(value), 0) / values.length);

console.log(`${cpus()[0].model}, Node ${process.version}; processor time, ours the shortest of ${ROUNDS} rounds\n`);
const columns = [
  'molecule',
  'atoms',
  'ms/point',
  'evaluations/point',
  'reference ms/point',
  'ratio',
  'points above',
  'full ms',
  'full/sweep',
  'full above',
];
console.log(`| ${columns.join(' | ')} |\n|${columns.map(() => '---').join('|')}|`);

const ratios = [];
const evaluationsPerPoint = [];
const above = [];
let points = 0;
let missing = null;
for (const { smiles, torsion } of molecules) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule);
  const starts = embedMany(molecule, CONFORMERS, { seed: 1 }).map((x) => relax(molecule, potential, x).coordinates);
  const sweep = measure(() => scanRotor(molecule, potential, torsion, { starts: [starts[0]], search: 'sweep' }));
  const full = measure(() => scanRotor(molecule, potential, torsion, { starts }));

  const profile = sweep.result;
  // the reference goes the same way round from the same start
  const begins = degrees(torsionAngle(starts[0], ...torsion));
  const apart = profile.points.map(({ angle }) => Math.abs(wrapDegrees(angle - begins)));
  const first = apart.indexOf(Math.min(...apart));
  const order = profile.points.map((_, n) => (first + n) % profile.points.length);
  const answer = missing
    ? { missing }
    : reference(
        molecule,
        starts[0],
        torsion,
        order.map((n) => profile.points[n].angle),
      );
  missing = answer.missing ?? null;

  const row = [smiles, molecule.atomCount, (sweep.milliseconds / 36).toFixed(3), (profile.evaluations / 36).toFixed(1)];
  evaluationsPerPoint.push(profile.evaluations / 36);
  let fullWorse = '';
  if (missing) row.push('', '', '');
  else {
    fullWorse = 0;
    const ratio = (1000 * answer.seconds) / sweep.milliseconds;
    ratios.push(ratio);
    points += 36;
    let worse = 0;
    order.forEach((n, k) => {
      const difference = profile.points[n].energy - answer.energies[k];
      if (difference > 0.01) {
        worse++;
        // a converged minimum on another branch: the reference's geometry leads to its own energy when it is relaxed on
        const { energy } = relaxAt(molecule, potential, torsion, profile.points[n].angle, Float64Array.from(answer.geometries[k]));
        above.push({
          smiles,
          angle: profile.points[n].angle,
          difference,
          residual: profile.points[n].residual,
          other: energy - answer.energies[k],
        });
      }
      if (full.result.points[n].energy > answer.energies[k] + 0.01) fullWorse++;
    });
    row.push(((1000 * answer.seconds) / 36).toFixed(2), ratio.toFixed(0), worse);
  }
  row.push(full.milliseconds.toFixed(0), (full.milliseconds / sweep.milliseconds).toFixed(1), fullWorse);
  console.log(`| ${row.join(' | ')} |`);
}

const sorted = evaluationsPerPoint.toSorted((p, q) => p - q);
console.log(`\nevaluations a point: median ${median(sorted).toFixed(1)}, from ${sorted[0].toFixed(1)} to ${sorted.at(-1).toFixed(1)}`);
if (missing) console.log(`no python3-rdkit beside it: ${missing}`);
else {
  console.log(`time ratio: geometric mean ${geometricMean(ratios).toFixed(0)}, least ${Math.min(...ratios).toFixed(0)}`);
  console.log(
    `${points - above.length} of ${points} points (${((100 * (points - above.length)) / points).toFixed(1)} %) at or below the reference + 0.01 kcal/mol; the others:`,
  );
  for (const { smiles, angle, difference, residual, other } of above)
    console.log(
      `  ${smiles} at ${angle}: ${difference.toFixed(3)} above, converged to ${residual.toExponential(1)}; the reference's own geometry relaxes to ${other.toFixed(4)} from its energy`,
    );
}

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
const POINTS = 36;
/** The reference's force constant, kcal/mol/degree^2: angles stay within 0.001 degree, and stiffer ones make its minimiser stop short. */
const FORCE = 100;
/** Others that it is tried with, on one molecule. */
const FORCES = [0.1, 1, 10, 100, 1000, 10000];
const TRIED = 'CC(C)NCCCOc1ccccc1';
const ROUNDS = { sweep: 15, full: 3 };
/** kcal/mol: a point this much above the reference's is counted and explained. */
const ABOVE = 0.01;

/** Shortest processor time of a call in milliseconds. */
function measure(rounds, call) {
  let milliseconds = Number.POSITIVE_INFINITY;
  let result;
  for (let round = 0; round < rounds; round++) {
    const begin = process.cpuUsage();
    result = call();
    const { user, system } = process.cpuUsage(begin);
    milliseconds = Math.min(milliseconds, (user + system) / 1000);
  }
  return { milliseconds, result };
}

/**
 * Shortest processor time in milliseconds of a sweep until its last point is there. The whole sweep goes on to refine the extrema of the profile,
 * which the reference does not do.
 */
function measurePoints(molecule, potential, torsion, start) {
  let milliseconds = Number.POSITIVE_INFINITY;
  let evaluations = 0;
  const counted = {
    atomCount: potential.atomCount,
    evaluate: (x, gradient) => {
      evaluations++;
      return potential.evaluate(x, gradient);
    },
  };
  let atLast = 0;
  for (let round = 0; round < ROUNDS.sweep; round++) {
    evaluations = 0;
    const begin = process.cpuUsage();
    const onProgress = ({ done }) => {
      if (done !== POINTS) return;
      const { user, system } = process.cpuUsage(begin);
      milliseconds = Math.min(milliseconds, (user + system) / 1000);
      atLast = evaluations;
    };
    scanRotor(molecule, counted, torsion, { starts: [start], search: 'sweep', onProgress });
  }
  return { milliseconds, evaluations: atLast };
}

function reference(molecule, x, torsion, angles, turn, force = FORCE) {
  const { atomicNumbers, formalCharges, bonds } = molecule;
  const input = JSON.stringify({
    elements: [...atomicNumbers],
    charges: [...formalCharges],
    bonds: Array.from({ length: bonds.count }, (_, n) => [bonds.a[n], bonds.b[n], bonds.order[n]]),
    x: [...x],
    torsion,
    angles,
    turn,
    force,
  });
  const script = fileURLToPath(new URL('scan/reference.py', import.meta.url));
  const { status, stdout, stderr, error } = spawnSync('/usr/bin/python3', [script], { input, encoding: 'utf8', maxBuffer: 1 << 26 });
  return status === 0 ? JSON.parse(stdout) : { missing: error?.message ?? stderr.trim().split('\n').at(-1) };
}

/** Places of the points in the order of the sweep: from the start's angle upwards, once round. */
function sweepOrder(points, start, torsion) {
  const begins = degrees(torsionAngle(start, ...torsion));
  const apart = points.map(({ angle }) => Math.abs(wrapDegrees(angle - begins)));
  const first = apart.indexOf(Math.min(...apart));
  return points.map((_, n) => (first + n) % points.length);
}

const geometricMean = (values) => Math.exp(values.reduce((sum, value) => sum + Math.log(value), 0) / values.length);
const row = (cells) => console.log(`| ${cells.join(' | ')} |`);

console.log(
  `${cpus()[0].model}, Node ${process.version}; processor time, ours the shortest of ${ROUNDS.sweep} sweeps and ${ROUNDS.full} full scans\n`,
);
row([
  'molecule',
  'atoms',
  'evaluations a point',
  'the points alone',
  'ms a point',
  'the points alone',
  'reference ms',
  'ratio',
  'pulled ms',
  'ratio',
  'above',
  'full ms',
  'full / sweep',
  'full above',
]);
row(Array.from({ length: 14 }, () => '---'));

const ratios = { turned: [], pulled: [] };
const perPoint = [];
const pointsAlone = [];
const trials = [];
const explained = [];
let missing = null;
for (const { smiles, torsion } of molecules) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule);
  const starts = embedMany(molecule, CONFORMERS, { seed: 1 }).map((x) => relax(molecule, potential, x).coordinates);
  const sweep = measure(ROUNDS.sweep, () => scanRotor(molecule, potential, torsion, { starts: [starts[0]], search: 'sweep' }));
  const alone = measurePoints(molecule, potential, torsion, starts[0]);
  const full = measure(ROUNDS.full, () => scanRotor(molecule, potential, torsion, { starts }));
  const { points, evaluations } = sweep.result;
  perPoint.push(evaluations / POINTS);
  pointsAlone.push(alone.evaluations / POINTS);

  const order = sweepOrder(points, starts[0], torsion);
  const angles = order.map((n) => points[n].angle);
  const turned = missing ? { missing } : reference(molecule, starts[0], torsion, angles, true);
  missing = turned.missing ?? null;
  const beside = [];
  let fullAbove = '';
  if (missing) beside.push('', '', '', '', '');
  else {
    const pulled = reference(molecule, starts[0], torsion, angles, false);
    for (const [kind, { seconds }] of [
      ['turned', turned],
      ['pulled', pulled],
    ]) {
      const ratio = (1000 * seconds) / alone.milliseconds;
      ratios[kind].push(ratio);
      beside.push(((1000 * seconds) / POINTS).toFixed(2), ratio.toFixed(1));
    }
    const above = order
      .map((n, k) => ({ n, k, difference: points[n].energy - turned.energies[k] }))
      .filter(({ difference }) => difference > ABOVE);
    for (const { n, k, difference } of above) {
      // the reference's geometry must lead to its own energy: then ours is a converged minimum on another branch
      const { energy } = relaxAt(molecule, potential, torsion, points[n].angle, Float64Array.from(turned.geometries[k]));
      explained.push(
        `  ${smiles} at ${points[n].angle}: ${difference.toFixed(3)} above, converged to ${points[n].residual.toExponential(1)}; the reference's geometry relaxes to ${(energy - turned.energies[k]).toFixed(4)} from its own energy`,
      );
    }
    beside.push(above.length);
    if (smiles === TRIED)
      for (const force of FORCES) {
        const { seconds, off, energies } = reference(molecule, starts[0], torsion, angles, true, force);
        const over = Math.max(...order.map((n, k) => energies[k] - points[n].energy));
        trials.push([force, ((1000 * seconds) / POINTS).toFixed(2), off.toExponential(1), over.toFixed(4)]);
      }
    fullAbove = order.filter((n, k) => full.result.points[n].energy > turned.energies[k] + ABOVE).length;
  }
  row([
    smiles,
    molecule.atomCount,
    (evaluations / POINTS).toFixed(1),
    (alone.evaluations / POINTS).toFixed(1),
    (sweep.milliseconds / POINTS).toFixed(3),
    (alone.milliseconds / POINTS).toFixed(3),
    ...beside,
    full.milliseconds.toFixed(0),
    (full.milliseconds / sweep.milliseconds).toFixed(1),
    fullAbove,
  ]);
}

for (const [counts, what] of [
  [perPoint, 'with the extrema refined'],
  [pointsAlone, 'the points alone'],
]) {
  counts.sort((p, q) => p - q);
  console.log(
    `\nevaluations a point, ${what}: median ${counts[counts.length >> 1].toFixed(1)}, from ${counts[0].toFixed(1)} to ${counts.at(-1).toFixed(1)}`,
  );
}
if (missing) console.log(`no python3-rdkit beside it: ${missing}`);
else {
  for (const [kind, what] of [
    ['turned', 'its torsion turned first'],
    ['pulled', 'its constraint alone pulling'],
  ])
    console.log(
      `time ratio to the reference, ${what}: geometric mean ${geometricMean(ratios[kind]).toFixed(1)}, least ${Math.min(...ratios[kind]).toFixed(1)}`,
    );
  const all = POINTS * molecules.length;
  console.log(
    `${all - explained.length} of ${all} points of the sweeps at or below the reference + ${ABOVE} kcal/mol${explained.length > 0 ? '; the others:' : ''}`,
  );
  for (const line of explained) console.log(line);
}
if (trials.length > 0) {
  console.log(`\nthe reference's force constant on ${TRIED}, its torsion turned first\n`);
  row(['kcal/mol/degree^2', 'ms a point', 'largest error of an angle, degrees', 'most above ours, kcal/mol']);
  row(['---:', '---:', '---:', '---:']);
  for (const trial of trials) row(trial);
}

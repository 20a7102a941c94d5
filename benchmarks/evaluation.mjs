/**
 * Energy and gradient of MMFF94s at 20 to 400 atoms: this project with and without vectors, beside a hand-written C kernel of the same
 * function (the floor) and python3-rdkit, each where it is to be had. All run one after the other for every molecule, three rounds, so that
 * ratios come from one run. Needs the build.
 *
 *   node benchmarks/evaluation.mjs [SECONDS_PER_MEASUREMENT]
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { cpus, tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { mmff94, nonBondedRows } from '@tordial/forcefield';
import { embed, moleculeFromSmiles } from '@tordial/geometry';

const seconds = Number(process.argv[2] ?? 0.5);
const here = (file) => fileURLToPath(new URL(`evaluation/${file}`, import.meta.url));
const scratch = mkdtempSync(join(tmpdir(), 'tordial-evaluation-'));

// peptides H-(Ala)a-(Gly)g-OH: 3 + 10 a + 7 g atoms
const SIZES = [
  { alanine: 1, glycine: 1 },
  { alanine: 3, glycine: 1 },
  { alanine: 1, glycine: 9 },
  { alanine: 7, glycine: 11 },
  { alanine: 32, glycine: 11 },
];

function peptide({ alanine, glycine }) {
  return `${'N[C@@H](C)C(=O)'.repeat(alanine)}${'NCC(=O)'.repeat(glycine)}O`;
}

/** The tables as the C program reads them: doubles, offsets first. */
function tables(molecule, { parameters, dielectric }, x) {
  const { bondStretching: b, angleBending: a, stretchBend: s, outOfPlane: o, torsion: t, vanDerWaals, partialCharges } = parameters;
  const rows = nonBondedRows(molecule, vanDerWaals, partialCharges, dielectric);
  const sections = [
    [b.i, b.j, b.length, b.force],
    [a.i, a.j, a.k, a.linear, a.angle, a.force],
    [s.i, s.j, s.k, s.length_ij, s.length_kj, s.angle, s.force_ij, s.force_kj],
    [o.i, o.j, o.k, o.l, o.force],
    [t.i, t.j, t.k, t.l, t.v1, t.v2, t.v3],
  ];
  const values = [molecule.atomCount, 1, ...sections.map(([first]) => first.length), rows.a.length, ...x];
  for (const columns of sections) for (let n = 0; n < columns[0].length; n++) for (const column of columns) values.push(column[n]);
  for (const block of [rows.a, rows.b, rows.d, rows.e, rows.q]) for (const value of block) values.push(value);
  return new Uint8Array(Float64Array.from(values).buffer);
}

/** Shortest time of one call in microseconds, from batches of about 2 ms. */
function measure(call) {
  for (let n = 0; n < 300; n++) call();
  let begin = performance.now();
  for (let n = 0; n < 20; n++) call();
  const batch = Math.ceil(2 / ((performance.now() - begin) / 20 + 1e-5));
  let best = Number.POSITIVE_INFINITY;
  const until = performance.now() + 1000 * seconds;
  while (performance.now() < until) {
    begin = performance.now();
    for (let n = 0; n < batch; n++) call();
    best = Math.min(best, (1000 * (performance.now() - begin)) / batch);
  }
  return best;
}

function run(program, args, input) {
  const { status, stdout, stderr, error } = spawnSync(program, args, { input, encoding: 'utf8', maxBuffer: 1 << 26 });
  return status === 0 ? stdout : { missing: error?.message ?? stderr.trim().split('\n').at(-1) };
}

function compileFloor() {
  const program = join(scratch, 'floor');
  const flags = ['-O3', '-march=native', '-fopenmp-simd', '-fno-math-errno', '-fno-trapping-math'];
  const result = run('gcc', [...flags, '-o', program, here('floor.c'), '-lm']);
  return typeof result === 'string' ? program : note('no C floor', result.missing);
}

function findReference() {
  const result = run('/usr/bin/python3', ['-c', 'import rdkit; print(rdkit.__version__)']);
  return typeof result === 'string' ? result.trim() : note('no python3-rdkit', result.missing);
}

function note(what, reason) {
  process.stdout.write(`${what}: ${reason}\n`);
  return undefined;
}

const floor = compileFloor();
const reference = findReference();
process.stdout.write(
  `${cpus()[0].model}, Node ${process.version}${reference ? `, rdkit ${reference}` : ''}; MMFF94s energy and gradient, microseconds\n\n`,
);

const fixed = (value, digits = 1) => (value === undefined ? '-' : value.toFixed(digits));
const line = (cells) => process.stdout.write(`| ${cells.join(' | ')} |\n`);
line(['atoms', 'Tordial', 'without vectors', 'C floor', 'rdkit', 'Tordial / floor', 'rdkit / Tordial', 'largest energy difference']);
line(new Array(8).fill('---:'));
for (const size of SIZES) {
  const molecule = moleculeFromSmiles(peptide(size));
  const x = embed(molecule, { seed: 1 });
  const gradient = new Float64Array(x.length);
  const vectors = mmff94(molecule);
  const plain = mmff94(molecule, { vectors: false });
  const energies = [vectors.evaluate(x), plain.evaluate(x)];
  const best = {};
  const keep = (name, time) => {
    best[name] = Math.min(best[name] ?? Number.POSITIVE_INFINITY, time);
  };
  const file = join(scratch, 'tables');
  writeFileSync(file, tables(molecule, vectors, x));
  const { atomicNumbers, formalCharges, bonds } = molecule;
  const structure = JSON.stringify({
    elements: [...atomicNumbers],
    charges: [...formalCharges],
    bonds: Array.from(bonds.a, (a, n) => [a, bonds.b[n], bonds.order[n]]),
    x: [...x],
    seconds,
  });
  for (let round = 0; round < 3; round++) {
    keep(
      'vectors',
      measure(() => vectors.evaluate(x, gradient)),
    );
    keep(
      'plain',
      measure(() => plain.evaluate(x, gradient)),
    );
    for (const [name, output] of [
      ['floor', floor && run(floor, [file, String(seconds)])],
      ['reference', reference && run('/usr/bin/python3', [here('reference.py')], structure)],
    ]) {
      if (!output) continue;
      if (typeof output !== 'string') throw new Error(`${name}: ${output.missing}`);
      const [energy, time] = output.trim().split(/\s+/).map(Number);
      energies.push(energy);
      keep(name, time);
    }
  }
  const difference = Math.max(...energies.map((energy) => Math.abs(energy - energies[0])));
  line([
    molecule.atomCount,
    fixed(best.vectors),
    fixed(best.plain),
    fixed(best.floor),
    fixed(best.reference),
    fixed(best.floor && best.vectors / best.floor, 2),
    fixed(best.reference && best.reference / best.vectors),
    difference.toExponential(0),
  ]);
}
rmSync(scratch, { recursive: true });

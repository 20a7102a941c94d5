/**
 * MMFF94 and MMFF94s beside 27 published barriers to rotation (data/barriers.json): one profile from SMILES for each molecule, nothing tuned.
 * Prints the table of docs/validation.md; with --write puts it there and draws docs/figures/barriers.svg. Needs the build.
 *
 *   node benchmarks/barriers.mjs [--write]
 */
import { readFileSync } from 'node:fs';
import { mmff94 } from '@tordial/forcefield';
import { degrees, moleculeFromSmiles, torsion as torsionAngle, wrapDegrees } from '@tordial/geometry';
import { conformers, relaxAt, scanRotor } from '@tordial/scan';
import { scatterChart } from './report/chart.mjs';
import { table, writeFigure, writePart } from './report/page.mjs';

const { systems } = JSON.parse(readFileSync(new URL('data/barriers.json', import.meta.url), 'utf8'));
const VARIANTS = ['MMFF94', 'MMFF94s'];
const STEP = 10;
const CONFORMERS = 8;
const SEED = 1;
/** A published structure is the profile's stationary point of its kind within this many degrees, or a structure held at its angle. */
const NEAR = 30;

const apart = (p, q) => Math.abs(wrapDegrees(p - q));
const nearest = (items, distance) => items.reduce((best, item) => (distance(item) < distance(best) ? item : best), items[0]);

/** The profile of one system, and the torsion that was driven. */
function profileOf({ smiles, torsions, sweep }, variant) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule, { variant });
  const starts = conformers(molecule, potential, { count: CONFORMERS, seed: SEED }).conformers.map(({ coordinates }) => coordinates);
  if (sweep === undefined)
    return { molecule, potential, torsion: torsions[0], ...scanRotor(molecule, potential, torsions[0], { starts, step: STEP }) };
  const choices = starts.flatMap((start) => torsions.map((torsion) => ({ start, torsion })));
  const { start, torsion } = nearest(choices, (choice) => apart(degrees(torsionAngle(choice.start, ...choice.torsion)), sweep));
  return { molecule, potential, torsion, ...scanRotor(molecule, potential, torsion, { starts: [start], step: STEP, search: 'sweep' }) };
}

/** Energy of a published structure on a profile: where it stands, and whether it had to be held there. */
function structure(profile, published, isWell) {
  const alike = profile.stationaryPoints.filter(({ kind }) => (kind === 'well') === isWell);
  const found = nearest(alike, ({ angle }) => apart(angle, published));
  if (found && apart(found.angle, published) <= NEAR)
    return { angle: found.angle, energy: found.energy, remark: found.kind === 'crossing' ? 'x' : '' };
  const { coordinates } = nearest(profile.points, ({ angle }) => apart(angle, published));
  const { energy } = relaxAt(profile.molecule, profile.potential, profile.torsion, published, coordinates);
  return { angle: published, energy, remark: 'h' };
}

const rows = systems.flatMap((system) => {
  const profiles = VARIANTS.map((variant) => profileOf(system, variant));
  const wells = new Set(system.rows.map(([from]) => from));
  return system.rows.map(([from, to, published]) => {
    if (system.left?.includes(to)) return { from, to, published, barriers: [] };
    const barriers = profiles.map((profile) => {
      const [low, high] = [from, to].map((name) => structure(profile, system.structures[name], wells.has(name)));
      return { energy: high.energy - low.energy, angles: [low.angle, high.angle], remarks: new Set([low.remark, high.remark]) };
    });
    return { from, to, published, barriers, plain: !system.left && system.sweep === undefined };
  });
});

const number = (value) => (Object.is(value, -0) ? 0 : value).toFixed(2);
const where = ({ angles }) => angles.map((angle) => Math.abs(angle).toFixed(0)).join(' to ');
const cell = ({ energy, remarks }) => `${number(energy)}${remarks.has('h') ? ' (h)' : remarks.has('x') ? ' (x)' : ''}`;
const main = table(
  [':from', ':to', 'published', ...VARIANTS, 'difference', 'difference, s', ':MMFF94s at (degrees)'],
  rows.map(({ from, to, published, barriers }) =>
    barriers.length === 0
      ? [from, to, number(published), 'left out', 'left out', '', '', '']
      : [
          from,
          to,
          number(published),
          ...barriers.map(cell),
          ...barriers.map(({ energy }) => number(energy - published)),
          where(barriers[1]),
        ],
  ),
);

function summary(name, kept) {
  const cells = VARIANTS.flatMap((_, n) => {
    const deviations = kept.map(({ published, barriers }) => barriers[n].energy - published);
    const mean = deviations.reduce((sum, value) => sum + Math.abs(value), 0) / deviations.length;
    const worst = deviations.reduce((most, value) => (Math.abs(value) > Math.abs(most) ? value : most), 0);
    return [number(mean), `${number(worst)} (${kept[deviations.indexOf(worst)].to})`];
  });
  return [name, kept.length, ...cells];
}
const told = rows.filter(({ barriers }) => barriers.length > 0);
const sums = table(
  [':', 'rows', ...VARIANTS.flatMap((variant) => [`${variant}: mean absolute`, 'largest'])],
  [
    summary(
      'plain rotations, no pyramidal nitrogen',
      told.filter(({ plain }) => plain),
    ),
    summary('all that are reported', told),
  ],
);
const text = `${main}\n\n${sums}`;
process.stdout.write(`${text}\n`);

if (process.argv.includes('--write')) {
  writePart('barriers', text);
  writeFigure(
    'barriers.svg',
    scatterChart({
      title: 'Barriers of 14 molecules: published and calculated',
      x: 'published barrier (kcal/mol)',
      y: 'calculated barrier (kcal/mol)',
      series: VARIANTS,
      points: VARIANTS.map((_, n) => told.map(({ published, barriers }) => [published, barriers[n].energy])),
      lines: [
        {
          points: [
            [0, 0],
            [18, 18],
          ],
          dashed: true,
        },
      ],
      xTicks: [0, 3, 6, 9, 12, 15, 18],
      yTicks: [-3, 0, 3, 6, 9, 12, 15, 18],
    }),
  );
}

/**
 * MMFF94s refitted, rotor by rotor, to the published barriers of data/barriers.json where these determine a series. Prints the table of
 * docs/validation.md ("Refitted barriers"); with --write puts it there. Needs the build.
 *
 *   node benchmarks/refit.mjs [--write]
 */
import { readFileSync } from 'node:fs';
import { wrapDegrees } from '@tordial/geometry';
import { findRotors } from '@tordial/scan';
import { checkedReference, moleculeFromSmiles, torsionFit, torsionProfile } from 'tordial';
import { table, writePart } from './report/page.mjs';

const { systems } = JSON.parse(readFileSync(new URL('data/barriers.json', import.meta.url), 'utf8'));

/** Energies of the named structures above the first one, from the published differences. */
function energiesOf(rows) {
  const energies = new Map([[rows[0][0], 0]]);
  for (let known = 0; known !== energies.size; ) {
    known = energies.size;
    for (const [from, to, barrier] of rows) {
      if (energies.has(from)) energies.set(to, energies.get(from) + barrier);
      else if (energies.has(to)) energies.set(from, energies.get(to) - barrier);
    }
  }
  return energies;
}

/** The structures at all angles that are alike by the rotor's symmetry, from 0 to 180 degrees. */
function pointsOf({ structures }, energies, period) {
  const points = new Map();
  for (const [name, energy] of energies)
    for (let turn = 0; turn < 360; turn += period)
      for (const sign of [1, -1]) {
        const angle = Math.abs(wrapDegrees(sign * structures[name] + turn));
        points.set(angle.toFixed(2), { angle, energy });
      }
  return [...points.values()];
}

const leaveOneOut = (input, order) => {
  try {
    return torsionFit([input], { order: { from: order, to: order }, toward: 'existing' }).quality.crossValidation.errors[0].error;
  } catch (error) {
    if (error.code !== 'fit/points') throw error;
    return null;
  }
};

const number = (value) => (value === null ? '' : (Math.round(value * 100) / 100 + 0).toFixed(2));
const lines = [];
for (const system of systems) {
  if (system.sweep !== undefined || system.left) continue;
  const molecule = moleculeFromSmiles(system.smiles);
  const [torsion] = system.torsions;
  const axis = [torsion[1], torsion[2]].sort((p, q) => p - q).join();
  const rotor = findRotors(molecule).find((other) => [...other.axis].sort((p, q) => p - q).join() === axis);
  const energies = energiesOf(system.rows);
  const points = pointsOf(system, energies, rotor.periodicity);
  const profile = await torsionProfile(molecule, torsion, { step: 10 });
  const input = { profile, reference: checkedReference('published', points, []) };
  const symmetric = rotor.periodicity < 360;
  const order = symmetric ? 360 / rotor.periodicity : Math.min(3, energies.size - 1);
  const fit = torsionFit([input], { order });
  const [set] = fit.sets;
  const at = (name) =>
    set.points.reduce((best, point) =>
      Math.abs(Math.abs(point.angle) - Math.abs(system.structures[name])) <
      Math.abs(Math.abs(best.angle) - Math.abs(system.structures[name]))
        ? point
        : best,
    );
  const errors = (pick) => system.rows.map(([from, to, barrier]) => Math.abs(pick(at(to)) - pick(at(from)) - barrier));
  const mean = (values) => values.reduce((sum, value) => sum + value, 0) / values.length;
  const terms = fit.series[0].terms.filter(({ determined }) => determined);
  const lower = symmetric || order < 2 ? null : leaveOneOut(input, order - 1);
  lines.push([
    `\`${system.smiles}\``,
    system.rows.length,
    terms.map(({ n, v }) => `V${n} ${number(v)}`).join(', '),
    number(mean(errors(({ before }) => before))),
    number(Math.max(...errors(({ before }) => before))),
    number(mean(errors(({ after }) => after))),
    number(Math.max(...errors(({ after }) => after))),
    terms.length >= system.rows.length ? 'as many terms as data' : '',
    lower === null ? 'not possible' : number(lower),
  ]);
}
const text = table(
  [
    ':molecule',
    'barriers',
    ':terms (kcal/mol)',
    'mean error before',
    'largest',
    'mean error after',
    'largest',
    ':remark',
    'left out, one term fewer',
  ],
  lines,
);
process.stdout.write(`${text}\n`);
if (process.argv.includes('--write')) writePart('refit', text);

/**
 * Conformers of butane, pentane and hexane, and the stationary points on pentane's two-torsion surface, beside published ones (data/alkanes.json). Each
 * structure is built, brought to the angles that its name means by soft springs, and refined without them: conformers to minima, points of the
 * surface by P-RFO to the order that their name states, which the eigenvalues of the Hessian then prove. MMFF94 and MMFF94s have the same terms
 * for alkanes. Prints the tables of docs/validation.md; with --write puts them there. Needs the build.
 *
 *   node benchmarks/alkanes.mjs [--write]
 */
import { readFileSync } from 'node:fs';
import { mmff94 } from '@tordial/forcefield';
import { degrees, embed, moleculeFromSmiles, radians, torsion, torsionGradient, wrapDegrees, wrapRadians } from '@tordial/geometry';
import { drive, relax, stationaryPoint } from '@tordial/scan';
import { table, writePart } from './report/page.mjs';

const { conformers, pentane } = JSON.parse(readFileSync(new URL('data/alkanes.json', import.meta.url), 'utf8'));

/** Stiffness (kcal/mol/radian^2) of the springs that bring a chain to its angles. */
const SPRING = 400;
/** Degrees that a refined angle may differ from the one its name means: a sickle angle is named 95 and stands anywhere from 60 to 100. */
const MOVED = 35;

function chain(smiles) {
  const molecule = moleculeFromSmiles(smiles);
  const potential = mmff94(molecule, { variant: 'MMFF94' });
  const carbons = [...molecule.atomicNumbers].filter((element) => element === 6).length;
  const torsions = Array.from({ length: carbons - 3 }, (_, n) => [n, n + 1, n + 2, n + 3]);
  return { molecule, potential, torsions, start: embed(molecule, { seed: 1 }) };
}

/** The potential with springs on the torsions. */
function sprung({ potential, torsions }, angles) {
  const slope = new Float64Array(12);
  return {
    atomCount: potential.atomCount,
    evaluate(x, gradient) {
      let energy = potential.evaluate(x, gradient);
      torsions.forEach((atoms, n) => {
        const off = wrapRadians(torsion(x, ...atoms) - radians(angles[n]));
        energy += (SPRING * off * off) / 2;
        if (!gradient) return;
        torsionGradient(x, ...atoms, slope);
        atoms.forEach((atom, p) => {
          for (let k = 0; k < 3; k++) gradient[3 * atom + k] += SPRING * off * slope[3 * p + k];
        });
      });
      return energy;
    },
  };
}

/** The stationary point of an order near the angles, and where its torsions stand. */
function refined(system, angles, order) {
  const held = relax(system.molecule, sprung(system, angles), system.start, { tolerance: 0.01, maxEvaluations: 5000 });
  const start =
    order === 0 ? relax(system.molecule, system.potential, held.coordinates, { tolerance: 1e-3 }).coordinates : held.coordinates;
  const found = drive(stationaryPoint(start, { order, tolerance: 1e-5, maxStep: 0.1 }), system.potential);
  const reached = system.torsions.map((atoms) => degrees(torsion(found.coordinates, ...atoms)));
  const same = reached.every((angle, n) => Math.abs(wrapDegrees(angle - angles[n])) <= MOVED);
  return { ...found, angles: reached, same: same && found.converged && found.order === order };
}

const systems = new Map(Object.entries(conformers.smiles).map(([name, smiles]) => [name, chain(smiles)]));
const shown = (angles) => angles.map((angle) => Math.round(wrapDegrees(angle)) || 0).join(', ');
const fixed = (value) => value.toFixed(2);
const deviations = [];

const rows = conformers.rows.map(({ from, to, published, angles }) => {
  const system = systems.get(from[0]);
  const [a, b] = angles.map((names) => refined(system, names, 0));
  if (!a.same || !b.same) return [from, to, fixed(published), 'absent', '', shown(b.angles)];
  const ours = b.energy - a.energy;
  deviations.push(ours - published);
  return [from, to, fixed(published), fixed(ours), fixed(ours - published), shown(b.angles)];
});

const surface = chain('CCCCC');
const lowest = refined(surface, [180, 180], 0).energy;
const surfaceDeviations = [];
const points = pentane.rows.map(({ name, published, angles, order }) => {
  const found = refined(surface, angles, order);
  if (!found.same) return [name, String(order), fixed(published), 'absent', '', '', `reached ${shown(found.angles)}, order ${found.order}`];
  const ours = found.energy - lowest;
  surfaceDeviations.push(ours - published);
  const negative = [...found.modes.eigenvalues].filter((value) => value < 0).length;
  return [name, String(order), fixed(published), fixed(ours), fixed(ours - published), String(negative), shown(found.angles)];
});

const mean = (values) => values.reduce((sum, value) => sum + Math.abs(value), 0) / values.length;
const most = (values) => values.reduce((p, q) => (Math.abs(q) > Math.abs(p) ? q : p));
const summary = (what, values, all) =>
  `${what}: ${values.length} of ${all} found; mean absolute deviation ${fixed(mean(values))} kcal/mol, largest ${fixed(most(values))}.`;

const conformerTable = `${table([':from', ':to', 'published', 'MMFF94', 'difference', 'angles of the second (degrees)'], rows)}\n\n${summary('Conformers', deviations, rows.length)}`;
const surfaceTable = `${table([':point', 'order', 'published', 'MMFF94', 'difference', 'negative eigenvalues', 'angles (degrees)'], points)}\n\n${summary('Points of the surface', surfaceDeviations, points.length)}`;
console.log(`${conformerTable}\n\n${surfaceTable}`);
if (process.argv.includes('--write')) {
  writePart('alkane conformers', conformerTable);
  writePart('pentane surface', surfaceTable);
}

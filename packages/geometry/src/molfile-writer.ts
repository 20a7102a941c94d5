/** Molfiles and SDF records, written without dates so that equal structures give equal bytes. */
import { elementSymbol } from './elements.js';
import { TordialError } from './errors.js';
import type { Coordinates, Molecule } from './molecule.js';
import { missingHydrogens } from './valence.js';

/** Atoms or bonds that still fit the three columns of a V2000 counts line. */
const V2000_LIMIT = 999;

export interface MolfileOptions {
  /** Title line; the molecule's own name when it is left out. */
  readonly name?: string;
  /** Data fields that follow the molfile, in this order. */
  readonly properties?: ReadonlyMap<string, string>;
}

/** What `writeSdf` writes one record from. */
export interface SdfEntry extends MolfileOptions {
  readonly molecule: Molecule;
  readonly coordinates: Coordinates;
}

/**
 * A molfile with coordinates in angstrom to 4 decimals (the format's limit): V2000, or V3000 beyond 999 atoms or bonds. Data fields, when
 * given, follow behind `M  END`. Throws `molfile/coordinates` for a wrong count or a value that does not fit, `molfile/property` for a
 * field name or value that the format cannot hold.
 */
export function writeMolfile(molecule: Molecule, coordinates: Coordinates, { name, properties }: MolfileOptions = {}): string {
  checkCoordinates(molecule, coordinates);
  const title = (name ?? molecule.name).replace(/\s+/g, ' ').trim().slice(0, 80);
  const large = molecule.atomCount > V2000_LIMIT || molecule.bonds.count > V2000_LIMIT;
  const table = large ? extendedTable(molecule, coordinates) : plainTable(molecule, coordinates);
  return [title, '  Tordial           3D', '', ...table, 'M  END', ...dataFields(properties), ''].join('\n');
}

/** SDF text: one molfile a record, each closed by `$$$$`. Throws as `writeMolfile` does. */
export function writeSdf(entries: Iterable<SdfEntry>): string {
  let text = '';
  for (const { molecule, coordinates, ...options } of entries) text += `${writeMolfile(molecule, coordinates, options)}$$$$\n`;
  return text;
}

function checkCoordinates({ atomCount }: Molecule, coordinates: Coordinates): void {
  if (coordinates.length !== 3 * atomCount)
    throw new TordialError('molfile/coordinates', `${atomCount} atoms need ${3 * atomCount} coordinates, not ${coordinates.length}`);
  const wrong = coordinates.findIndex((value) => !(Math.abs(value) < 9999.9));
  if (wrong >= 0)
    throw new TordialError(
      'molfile/coordinates',
      `the coordinate ${coordinates[wrong]} of atom ${Math.floor(wrong / 3)} does not fit a molfile`,
      {
        atom: Math.floor(wrong / 3),
      },
    );
}

function plainTable({ atomCount, atomicNumbers, formalCharges, isotopes, bonds, ...molecule }: Molecule, x: Coordinates): string[] {
  const pad = (value: number, width: number) => String(value).padStart(width);
  const lines = [`${pad(atomCount, 3)}${pad(bonds.count, 3)}  0  0  0  0  0  0  0  0999 V2000`];
  const valences = statedValences({ atomCount, atomicNumbers, formalCharges, isotopes, bonds, ...molecule });
  for (let i = 0; i < atomCount; i++) {
    const position = [0, 1, 2].map((axis) => fixed(x[3 * i + axis], 4).padStart(10)).join('');
    const valence = valences[i] < 0 ? 0 : valences[i] === 0 ? 15 : valences[i];
    lines.push(`${position} ${elementSymbol(atomicNumbers[i]).padEnd(3)} 0  0  0  0  0${pad(valence, 3)}  0  0  0  0  0  0`);
  }
  for (let n = 0; n < bonds.count; n++) lines.push(`${pad(bonds.a[n] + 1, 3)}${pad(bonds.b[n] + 1, 3)}${pad(bonds.order[n], 3)}  0`);
  return [...lines, ...numberLines('M  CHG', formalCharges), ...numberLines('M  ISO', isotopes)];
}

function numberLines(tag: string, values: ArrayLike<number>): string[] {
  const stated = Array.from(values, (value, i) => [i + 1, value]).filter(([, value]) => value !== 0);
  const lines: string[] = [];
  for (let n = 0; n < stated.length; n += 8) {
    const part = stated.slice(n, n + 8);
    lines.push(
      `${tag}${String(part.length).padStart(3)}${part.map(([i, value]) => ` ${String(i).padStart(3)} ${String(value).padStart(3)}`).join('')}`,
    );
  }
  return lines;
}

function extendedTable(molecule: Molecule, x: Coordinates): string[] {
  const { atomCount, atomicNumbers, formalCharges, isotopes, bonds } = molecule;
  const valences = statedValences(molecule);
  const rows = ['BEGIN CTAB', `COUNTS ${atomCount} ${bonds.count} 0 0 0`, 'BEGIN ATOM'];
  for (let i = 0; i < atomCount; i++) {
    const position = [0, 1, 2].map((axis) => fixed(x[3 * i + axis], 4)).join(' ');
    const charge = formalCharges[i] === 0 ? '' : ` CHG=${formalCharges[i]}`;
    const mass = isotopes[i] === 0 ? '' : ` MASS=${isotopes[i]}`;
    const valence = valences[i] < 0 ? '' : ` VAL=${valences[i] === 0 ? -1 : valences[i]}`;
    rows.push(`${i + 1} ${elementSymbol(atomicNumbers[i])} ${position} 0${charge}${mass}${valence}`);
  }
  rows.push('END ATOM', 'BEGIN BOND');
  for (let n = 0; n < bonds.count; n++) rows.push(`${n + 1} ${bonds.order[n]} ${bonds.a[n] + 1} ${bonds.b[n] + 1}`);
  rows.push('END BOND', 'END CTAB');
  return ['  0  0  0     0  0            999 V3000', ...rows.map((row) => `M  V30 ${row}`)];
}

/** The valence to state for atoms that a reader would otherwise complete with hydrogens; -1 for all others. */
function statedValences({ atomCount, atomicNumbers, formalCharges, bonds }: Molecule): Int32Array {
  const valence = new Int32Array(atomCount);
  for (let n = 0; n < bonds.count; n++) {
    valence[bonds.a[n]] += bonds.order[n];
    valence[bonds.b[n]] += bonds.order[n];
  }
  return valence.map((sum, i) => (missingHydrogens(atomicNumbers[i], formalCharges[i], sum) > 0 ? sum : -1));
}

function dataFields(properties: ReadonlyMap<string, string> = new Map()): string[] {
  const lines: string[] = [];
  for (const [name, value] of properties) {
    if (/[<>\r\n]/.test(name) || name.trim() === '')
      throw new TordialError('molfile/property', `'${name}' cannot name a data field: it is empty or holds <, > or a line end`);
    const text = value.split(/\r\n|\n|\r/);
    if (text.length > 1 && text.some((line) => line.trim() === ''))
      throw new TordialError('molfile/property', `the data field '${name}' holds a blank line, which would end it`);
    if (text.some((line) => line.startsWith('$$$$')))
      throw new TordialError('molfile/property', `the data field '${name}' holds the mark that ends a record`);
    lines.push(`>  <${name}>`, ...(value.trim() === '' ? [] : text), '');
  }
  return lines;
}

/** Decimals without a negative zero, so that equal structures give equal bytes. */
function fixed(value: number, digits: number): string {
  const text = value.toFixed(digits);
  return Number(text) === 0 ? (0).toFixed(digits) : text;
}

/**
 * The connection table of a molfile, V2000 or V3000, checked line by line.
 *
 * Source: CTfile Formats, BIOVIA (2020): header block, counts line, atom, bond and property blocks; extended connection table.
 * Query atoms and bonds, R groups, atom lists and radicals are refused: they are no single structure.
 */
import { atomicMass, atomicNumberOf, elementSymbol } from './elements.js';
import { TordialError } from './errors.js';
import { checkLimit, type Limits } from './limits.js';
import { normalValences } from './valence.js';
import { AROMATIC_ORDER, type WrittenAtom, type WrittenBond } from './written-structure.js';

export interface MolfileAtom extends WrittenAtom {
  readonly x: number;
  readonly y: number;
  readonly z: number;
}

export interface MolfileBond extends WrittenBond {
  /** Seen from atom `a`, the narrow end: 'up', 'down'; 'either' where the file leaves the configuration open; '' for a plain bond. */
  readonly wedge: '' | 'up' | 'down' | 'either';
}

export interface WrittenMolfile {
  readonly name: string;
  /** What the header says, '' where it says nothing. */
  readonly dimension: '2D' | '3D' | '';
  readonly atoms: readonly MolfileAtom[];
  readonly bonds: readonly MolfileBond[];
  /** Lines read, so that data fields can be looked for behind them. */
  readonly lineCount: number;
}

interface AtomDraft {
  atomicNumber: number;
  isotope: number;
  charge: number;
  radical: number;
  /** Total valence that the file states, 0 where it says nothing, -1 for none at all. */
  valence: number;
  x: number;
  y: number;
  z: number;
  line: number;
}

type Fail = (line: number, what: string, code?: string) => never;

const LAST_LINE = 4;

/**
 * Reads the connection table at the start of `lines`. Throws `molfile/syntax` (with `line`, counted from `firstLine`), `molfile/unsupported`,
 * `molecule/radical`, `limit/atoms`.
 */
export function parseMolfile(lines: readonly string[], limits: Limits, firstLine = 1): WrittenMolfile {
  const fail: Fail = (line, what, code = 'molfile/syntax') => {
    throw new TordialError(code, `molfile, line ${line + firstLine}: ${what}`, { line: line + firstLine });
  };
  if (lines.length < LAST_LINE) fail(Math.max(0, lines.length - 1), 'the file ends before the counts line, the fourth');
  const counts = lines[3];
  const version = /V(\d{4})\s*$/i.exec(counts)?.[1] ?? (counts.length > 33 ? counts.slice(33).trim() : '');
  const code = lines[1].slice(20, 22).toUpperCase();
  const header = { name: lines[0].trim(), dimension: code === '2D' || code === '3D' ? code : '' } as const;
  if (version === '3000') return { ...header, ...extendedTable(lines, limits, firstLine, fail) };
  if (version !== '2000' && version !== '') fail(3, `the version '${version}' is not known; V2000 and V3000 are`, 'molfile/unsupported');
  return { ...header, ...plainTable(lines, limits, firstLine, fail) };
}

function plainTable(lines: readonly string[], limits: Limits, firstLine: number, fail: Fail): Omit<WrittenMolfile, 'name' | 'dimension'> {
  const counts = /^([ \d]{2}\d)([ \d]{2}\d)(?: |\d|$)/.exec(lines[3]);
  if (!counts) fail(3, 'the counts line must begin with the numbers of atoms and bonds, three columns each');
  const atomCount = Number(counts[1]);
  const bondCount = Number(counts[2]);
  checkLimit('atoms', atomCount, limits);
  const bondStart = LAST_LINE + atomCount;
  const end = bondStart + bondCount;
  if (lines.length < end) fail(lines.length - 1, `${atomCount} atoms and ${bondCount} bonds are announced, the file ends before`);

  const drafts: AtomDraft[] = [];
  for (let n = LAST_LINE; n < bondStart; n++) drafts.push(plainAtom(lines[n], n, fail));
  const bonds: MolfileBond[] = [];
  for (let n = bondStart; n < end; n++) {
    const line = lines[n];
    const fields = [0, 3, 6, 9].map((at) => line.slice(at, at + 3).trim());
    if (!fields.slice(0, 3).every((field) => /^\d+$/.test(field)) || !/^\d*$/.test(fields[3]))
      fail(n, 'a bond line must hold two atoms and a bond type, three columns each');
    const [a, b, type, stereo] = fields.map(Number);
    const wedge = type === 2 ? (stereo === 3 ? 'either' : '') : stereo === 1 ? 'up' : stereo === 6 ? 'down' : stereo === 4 ? 'either' : '';
    bonds.push(checkedBond(a - 1, b - 1, type, wedge, atomCount, n, fail));
  }
  checkDuplicates(bonds, bondStart, fail);
  const lineCount = properties(lines, end, drafts, fail);
  return { atoms: finish(drafts, bonds, firstLine, fail), bonds, lineCount };
}

const PLAIN_CHARGES = [0, 3, 2, 1, 0, -1, -2, -3];

function plainAtom(line: string, n: number, fail: Fail): AtomDraft {
  const [x, y, z] = [0, 10, 20].map((at) => line.slice(at, at + 10).trim());
  const number = /^[+-]?(?:\d+\.?\d*|\.\d+)$/;
  if (![x, y, z].every((field) => number.test(field))) fail(n, 'an atom line must begin with three coordinates, ten columns each');
  const draft = newAtom(line.slice(30, 34).trim(), n, fail);
  const field = (at: number, width: number) => {
    const text = line.slice(at, at + width).trim();
    if (text === '') return 0;
    if (!/^[+-]?\d+$/.test(text)) fail(n, `columns ${at + 1} to ${at + width} must hold a whole number`);
    return Number(text);
  };
  const massDifference = field(34, 2);
  const charge = field(36, 3);
  const valence = field(48, 3);
  if (massDifference < -3 || massDifference > 4) fail(n, `a mass difference of ${massDifference} is out of range; use an M  ISO line`);
  if (charge < 0 || charge > 7) fail(n, `${charge} is no charge code (0 to 7)`);
  if (valence < 0 || valence > 15) fail(n, `${valence} is no valence code (0 to 15)`);
  if (massDifference !== 0) draft.isotope = Math.round(atomicMass(draft.atomicNumber)) + massDifference;
  draft.charge = PLAIN_CHARGES[charge];
  draft.radical = charge === 4 ? 2 : 0;
  draft.valence = valence === 15 ? -1 : valence;
  return { ...draft, x: Number(x), y: Number(y), z: Number(z) };
}

/** Reads M lines up to M  END; returns the number of the line after it. */
function properties(lines: readonly string[], start: number, drafts: AtomDraft[], fail: Fail): number {
  let chargesStated = false;
  for (let n = start; n < lines.length; n++) {
    const line = lines[n].trimEnd();
    if (/^M {2}END/.test(line)) return n + 1;
    const tag = line.slice(0, 6);
    if (/^[AG] /.test(line)) n++;
    else if (
      tag === 'M  RGP' ||
      tag === 'M  ALS' ||
      tag === 'M  LOG' ||
      tag === 'M  LIN' ||
      tag === 'M  SUB' ||
      tag === 'M  UNS' ||
      tag === 'M  RBC'
    )
      fail(n, 'R groups, atom lists and query features are no single structure', 'molfile/unsupported');
    else if (tag === 'M  CHG' || tag === 'M  RAD' || tag === 'M  ISO') {
      // the first of these lines overrides all charges and radicals of the atom block
      if (tag !== 'M  ISO' && !chargesStated) {
        for (const draft of drafts) draft.charge = draft.radical = 0;
        chargesStated = true;
      }
      const values = line.slice(6).trim().split(/\s+/);
      if (!values.every((value) => /^[+-]?\d+$/.test(value)) || values.length !== 1 + 2 * Number(values[0]))
        fail(n, `${tag} must hold a count and that many pairs of numbers`);
      for (let pair = 0; pair < Number(values[0]); pair++) {
        const atom = Number(values[1 + 2 * pair]);
        const value = Number(values[2 + 2 * pair]);
        const draft = drafts[atom - 1];
        if (!draft) fail(n, `there is no atom ${atom}`);
        if (tag === 'M  CHG') {
          if (Math.abs(value) > 15) fail(n, `a charge of ${value} is out of range`);
          draft.charge = value;
        } else if (tag === 'M  RAD') draft.radical = value;
        else {
          if (value < 1 || value > 400) fail(n, `${value} is no mass number`);
          draft.isotope = value;
        }
      }
    }
  }
  return fail(lines.length - 1, "the line 'M  END' is missing; the file may have been cut short");
}

/** Rows of an extended table with continuation lines joined; `line` is that of the first part. */
function extendedRows(lines: readonly string[], fail: Fail): { rows: { text: string; line: number }[]; lineCount: number } {
  const rows: { text: string; line: number }[] = [];
  for (let n = LAST_LINE; n < lines.length; n++) {
    if (/^M {2}END/.test(lines[n])) return { rows, lineCount: n + 1 };
    if (!lines[n].startsWith('M  V30 ')) {
      if (lines[n].trim() === '') continue;
      fail(n, "a line of an extended table must begin with 'M  V30 '");
    }
    const line = n;
    let text = lines[n].slice(7).trimEnd();
    while (text.endsWith('-') && lines[n + 1]?.startsWith('M  V30 ')) text = text.slice(0, -1) + lines[++n].slice(7).trimEnd();
    rows.push({ text: text.trim(), line });
  }
  return fail(lines.length - 1, "the line 'M  END' is missing; the file may have been cut short");
}

function extendedTable(
  lines: readonly string[],
  limits: Limits,
  firstLine: number,
  fail: Fail,
): Omit<WrittenMolfile, 'name' | 'dimension'> {
  const { rows, lineCount } = extendedRows(lines, fail);
  const drafts: AtomDraft[] = [];
  const bonds: MolfileBond[] = [];
  const indexOf = new Map<number, number>();
  const blocks: string[] = [];
  let announced: [number, number] | null = null;
  let bondLine = LAST_LINE;
  for (const { text, line } of rows) {
    const begin = /^BEGIN (\w+)/i.exec(text);
    const end = /^END (\w+)/i.exec(text);
    if (begin) blocks.push(begin[1].toUpperCase());
    else if (end) {
      if (blocks.pop() !== end[1].toUpperCase()) fail(line, `END ${end[1]} closes a block that is not open`);
    } else if (/^COUNTS /i.test(text)) {
      const found = /^COUNTS (\d+) (\d+)/i.exec(text);
      if (!found) fail(line, 'COUNTS must be followed by the numbers of atoms and bonds');
      announced = [Number(found[1]), Number(found[2])];
      checkLimit('atoms', announced[0], limits);
    } else if (blocks.at(-1) === 'ATOM') {
      const fields = text.split(/\s+/);
      const [index, , , , , map] = fields.map(Number);
      if (fields.length < 6 || ![index, ...fields.slice(2, 5).map(Number), map].every(Number.isFinite) || !Number.isInteger(index))
        fail(line, 'an atom row must hold index, element, three coordinates and a map number');
      if (indexOf.has(index)) fail(line, `the atom index ${index} is used twice`);
      indexOf.set(index, drafts.length);
      const draft = newAtom(fields[1], line, fail);
      for (const field of fields.slice(6)) extendedAttribute(draft, field, line, fail);
      const [x, y, z] = fields.slice(2, 5).map(Number);
      drafts.push({ ...draft, x, y, z });
      checkLimit('atoms', drafts.length, limits);
    } else if (blocks.at(-1) === 'BOND') {
      if (bonds.length === 0) bondLine = line;
      const found = /^(\d+)\s+(\d+)\s+(\d+)\s+(\d+)(?:\s+(.*))?$/.exec(text);
      if (!found) fail(line, 'a bond row must hold index, type and two atoms');
      const [a, b] = [indexOf.get(Number(found[3])), indexOf.get(Number(found[4]))];
      if (a === undefined || b === undefined) fail(line, `the bond joins the atoms ${found[3]} and ${found[4]}, which are not both there`);
      const configuration = /(?:^|\s)CFG=(\d)/i.exec(found[5] ?? '')?.[1] ?? '0';
      const type = Number(found[2]);
      const wedge = configuration === '2' ? 'either' : type === 2 ? '' : configuration === '1' ? 'up' : configuration === '3' ? 'down' : '';
      bonds.push(checkedBond(a, b, type, wedge, drafts.length, line, fail));
    }
  }
  if (!announced) fail(LAST_LINE, 'the COUNTS row is missing');
  if (blocks.length > 0) fail(lineCount - 1, `the block ${blocks.at(-1)} is not closed`);
  if (announced[0] !== drafts.length || announced[1] !== bonds.length)
    fail(lineCount - 1, `${announced[0]} atoms and ${announced[1]} bonds are announced, ${drafts.length} and ${bonds.length} are there`);
  checkDuplicates(bonds, bondLine, fail);
  return { atoms: finish(drafts, bonds, firstLine, fail), bonds, lineCount };
}

function extendedAttribute(draft: AtomDraft, field: string, line: number, fail: Fail): void {
  const [key, value] = field.toUpperCase().split('=');
  const number = Number(value);
  if (!['CHG', 'RAD', 'MASS', 'VAL'].includes(key)) return;
  if (!Number.isInteger(number) || Math.abs(number) > 400) fail(line, `${field} must state a whole number`);
  if (key === 'CHG') {
    if (Math.abs(number) > 15) fail(line, `a charge of ${number} is out of range`);
    draft.charge = number;
  } else if (key === 'RAD') draft.radical = number;
  else if (key === 'MASS') {
    if (number < 1) fail(line, `${number} is no mass number`);
    draft.isotope = number;
  } else draft.valence = number;
}

function newAtom(symbol: string, line: number, fail: Fail): AtomDraft {
  const isotope = symbol === 'D' ? 2 : symbol === 'T' ? 3 : 0;
  const atomicNumber = isotope > 0 ? 1 : atomicNumberOf(symbol);
  if (atomicNumber === 0) {
    const query = /^(?:\*|A|Q|X|M|AH|QH|XH|MH|L|LP|R|R#|R\d+|\[.*|NOT.*)$/.test(symbol);
    fail(
      line,
      query ? `${symbol} is a query atom or R group, no single structure` : `'${symbol}' is no element`,
      query ? 'molfile/unsupported' : 'molfile/syntax',
    );
  }
  return { atomicNumber, isotope, charge: 0, radical: 0, valence: 0, x: 0, y: 0, z: 0, line };
}

function checkedBond(
  a: number,
  b: number,
  type: number,
  wedge: MolfileBond['wedge'],
  atomCount: number,
  line: number,
  fail: Fail,
): MolfileBond {
  if (a < 0 || b < 0 || a >= atomCount || b >= atomCount || a === b)
    fail(line, `a bond cannot join the file's atoms ${a + 1} and ${b + 1} of ${atomCount}`);
  if (type < 1 || type > 4) fail(line, `the bond type ${type} is a query or coordination bond, no single structure`, 'molfile/unsupported');
  return { a, b, order: type === 4 ? AROMATIC_ORDER : type, wedge };
}

function checkDuplicates(bonds: readonly MolfileBond[], firstLine: number, fail: Fail): void {
  const seen = new Set<string>();
  bonds.forEach(({ a, b }, n) => {
    const key = a < b ? `${a} ${b}` : `${b} ${a}`;
    if (seen.has(key)) fail(firstLine + n, `the file's atoms ${a + 1} and ${b + 1} are bonded twice`);
    seen.add(key);
  });
}

function finish(drafts: readonly AtomDraft[], bonds: readonly MolfileBond[], firstLine: number, fail: Fail): MolfileAtom[] {
  const valence = new Int32Array(drafts.length);
  const aromatic = new Uint8Array(drafts.length);
  for (const { a, b, order } of bonds)
    for (const i of [a, b]) {
      valence[i] += order;
      if (order === AROMATIC_ORDER) aromatic[i] = 1;
    }
  return drafts.map((draft, i) => {
    const { atomicNumber, isotope, charge, x, y, z, line } = draft;
    const label = `atom ${i} (${elementSymbol(atomicNumber)}, line ${line + firstLine})`;
    if (draft.radical !== 0 && normalValences(atomicNumber, charge))
      fail(line, `${label} is marked as a radical; only closed-shell structures can be scanned`, 'molecule/radical');
    if (![x, y, z].every((value) => Math.abs(value) < 1e5)) fail(line, 'a coordinate is out of range');
    const stated = draft.valence === 0 || aromatic[i] === 1 ? -1 : draft.valence < 0 ? 0 : draft.valence - valence[i];
    if (draft.valence !== 0 && aromatic[i] === 0 && stated < 0)
      fail(line, `the stated valence ${Math.max(0, draft.valence)} is less than the atom's bonds`);
    return { atomicNumber, isotope, charge, aromatic: aromatic[i] === 1, hydrogens: stated, label, x, y, z };
  });
}

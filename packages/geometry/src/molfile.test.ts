import { readFileSync } from 'node:fs';
import { gunzipSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { canonicalSmiles } from './canonical-smiles.js';
import { TordialError } from './errors.js';
import { angle, distance } from './internal-coordinates.js';
import { neighboursOf } from './molecule.js';
import { readMolfile } from './molfile.js';
import { readSdf } from './records.js';
import { moleculeFromSmiles } from './smiles.js';

const errorOf = (text: string): TordialError => {
  try {
    readMolfile(text);
  } catch (error) {
    if (error instanceof TordialError) return error;
    throw error;
  }
  throw new Error('the molfile was accepted');
};

const ETHANOL = `ethanol
  made by hand      3D
a comment
  3  2  0  0  0  0  0  0  0  0999 V2000
   -1.2800    0.2000    0.0000 C   0  0
    0.0500   -0.5500    0.0000 C   0  0
    1.1700    0.3600    0.0000 O   0  0
  1  2  1  0
  2  3  1  0
M  END
`;

const edit = (line: number, text: string) =>
  ETHANOL.split('\n')
    .map((own, n) => (n === line - 1 ? text : own))
    .join('\n');

describe('molfiles', () => {
  it('keep three-dimensional coordinates and add hydrogens at standard positions', () => {
    const { molecule, coordinates, notes } = readMolfile(ETHANOL);
    expect(molecule.name).toBe('ethanol');
    expect([...molecule.atomicNumbers]).toEqual([6, 6, 8, 1, 1, 1, 1, 1, 1]);
    expect([...(coordinates ?? []).slice(0, 3)]).toEqual([-1.28, 0.2, 0]);
    expect(notes.map(({ code }) => code)).toEqual(['molfile/hydrogens-added']);
    if (!coordinates) throw new Error('no coordinates');
    for (let h = 3; h < 9; h++) {
      const [heavy] = neighboursOf(molecule, h);
      // usual bond lengths and angles: C-H 1.09, O-H 0.97 angstrom; sums of Cordero radii are 1.07 and 0.97
      expect(distance(coordinates, heavy, h)).toBeCloseTo(heavy === 2 ? 0.97 : 1.07, 6);
      for (const other of neighboursOf(molecule, heavy))
        if (other !== h) expect((angle(coordinates, h, heavy, other) * 180) / Math.PI).toBeGreaterThan(100);
      for (let other = 0; other < h; other++) expect(distance(coordinates, h, other)).toBeGreaterThan(0.9);
    }
  });

  it('take Windows and old Mac line ends and trailing blanks', () => {
    for (const text of [
      ETHANOL.replaceAll('\n', '\r\n'),
      ETHANOL.replaceAll('\n', '\r'),
      ETHANOL.replaceAll('\n', '  \n'),
      `\uFEFF${ETHANOL}`,
    ])
      expect(canonicalSmiles(readMolfile(text).molecule)).toBe('CCO');
  });

  it('have no coordinates when they are flat, unless the header says 3D', () => {
    expect(readMolfile(edit(2, '  made by hand      2D')).coordinates).toBeNull();
    expect(readMolfile(edit(2, '')).coordinates).toBeNull();
    expect(readMolfile(ETHANOL).coordinates).not.toBeNull();
  });

  it('read charges, isotopes, valences and aromatic bonds', () => {
    const atoms = (rows: string[], bonds: string[], properties: string[] = []) =>
      readMolfile(
        ['', '', '', `${String(rows.length).padStart(3)}${String(bonds.length).padStart(3)}  0  0  0  0  0  0  0  0999 V2000`]
          .concat(rows, bonds, properties, 'M  END')
          .join('\n'),
      ).molecule;
    const row = (symbol: string, rest: string, x = 0) => `${x.toFixed(4).padStart(10)}    0.0000    0.0000 ${symbol.padEnd(3)}${rest}`;
    expect(canonicalSmiles(atoms([row('N', ' 0  3')], []))).toBe('[NH4+]');
    expect(canonicalSmiles(atoms([row('O', ' 0  5')], []))).toBe('[OH-]');
    expect(canonicalSmiles(atoms([row('C', ' 1  0')], []))).toBe('[13CH4]');
    expect(canonicalSmiles(atoms([row('Br', ' 1  0')], []))).toBe('[81BrH]');
    expect(canonicalSmiles(atoms([row('C', ' 0  0'), row('D', ' 0  0', 1)], ['  1  2  1  0']))).toBe('[2H]C');
    expect(canonicalSmiles(atoms([row('N', ' 0  5')], [], ['M  CHG  1   1   1']))).toBe('[NH4+]');
    expect(canonicalSmiles(atoms([row('C', ' 3  0')], [], ['M  ISO  1   1  14']))).toBe('[14CH4]');
    expect(canonicalSmiles(atoms([row('Na', ' 0  3'), row('Cl', ' 0  5  0  0  0 15', 3)], []))).toBe('[Cl-].[Na+]');
    expect(canonicalSmiles(atoms([row('S', ' 0  0  0  0  0  4')], []))).toBe('[SH4]');
    const ring = [0, 1, 2, 3, 4, 5].map((n) => row(n === 0 ? 'N' : 'C', ' 0  0', n));
    const bonds = [0, 1, 2, 3, 4, 5].map((n) => `${String(n + 1).padStart(3)}${String(((n + 1) % 6) + 1).padStart(3)}  4  0`);
    expect(canonicalSmiles(atoms(ring, bonds))).toBe('c1ccncc1');
  });

  it('read extended tables with continued lines, sparse indices and attributes', () => {
    const text = [
      'acetate',
      '',
      '',
      '  0  0  0     0  0            999 V3000',
      'M  V30 BEGIN CTAB',
      'M  V30 COUNTS 4 3 0 0 0',
      'M  V30 BEGIN ATOM',
    ]
      .concat([
        'M  V30 10 C 0 0 0 0',
        'M  V30 20 C 1.5 0 0 -',
        'M  V30 0 MASS=13',
        'M  V30 30 O 2 1 0 0',
        'M  V30 40 O 2 -1 0 0 CHG=-1',
        'M  V30 END ATOM',
      ])
      .concat([
        'M  V30 BEGIN BOND',
        'M  V30 1 1 10 20',
        'M  V30 2 2 20 30',
        'M  V30 3 1 20 40',
        'M  V30 END BOND',
        'M  V30 END CTAB',
        'M  END',
      ])
      .join('\n');
    expect(canonicalSmiles(readMolfile(text).molecule)).toBe(canonicalSmiles(moleculeFromSmiles('C[13C](=O)[O-]')));
    expect(errorOf(text.replace('COUNTS 4 3', 'COUNTS 4 4'))).toMatchObject({ code: 'molfile/syntax' });
    expect(errorOf(text.replace('2 2 20 30', '2 2 20 31'))).toMatchObject({ code: 'molfile/syntax', place: { line: 16 } });
    expect(errorOf(text.replace('10 C', '10 R#'))).toMatchObject({ code: 'molfile/unsupported', place: { line: 8 } });
    expect(errorOf(text.replace('M  V30 END CTAB\n', ''))).toMatchObject({ code: 'molfile/syntax' });
  });

  it('are refused with the line where they are broken', () => {
    const cases: [string, string, number][] = [
      ['', 'molfile/syntax', 1],
      ['a\nb\nc', 'molfile/syntax', 3],
      [edit(4, 'no counts'), 'molfile/syntax', 4],
      [edit(4, '  3  2  0  0  0  0  0  0  0  0999 V4000'), 'molfile/unsupported', 4],
      [edit(4, '  9  2  0  0  0  0  0  0  0  0999 V2000'), 'molfile/syntax', 11],
      [edit(6, '    0.0500   -0.5x00    0.0000 C   0  0'), 'molfile/syntax', 6],
      [edit(6, '    0.0500   -0.5500    0.0000 Xx  0  0'), 'molfile/syntax', 6],
      [edit(6, '    0.0500   -0.5500    0.0000 A   0  0'), 'molfile/unsupported', 6],
      [edit(6, '    0.0500   -0.5500    0.0000 R#  0  0'), 'molfile/unsupported', 6],
      [edit(6, '    0.0500   -0.5500    0.0000 C   0  4'), 'molecule/radical', 6],
      [edit(6, '    0.0500   -0.5500    0.0000 C   0  9'), 'molfile/syntax', 6],
      [edit(8, '  1  9  1  0'), 'molfile/syntax', 8],
      [edit(8, '  1  1  1  0'), 'molfile/syntax', 8],
      [edit(8, '  2  3  1  0'), 'molfile/syntax', 9],
      [edit(8, '  1  2  8  0'), 'molfile/unsupported', 8],
      [edit(8, '  1 2x  1  0'), 'molfile/syntax', 8],
      [edit(10, ''), 'molfile/syntax', 11],
      [edit(10, 'M  CHG  2   1   1\nM  END'), 'molfile/syntax', 10],
      [edit(10, 'M  CHG  1   7   1\nM  END'), 'molfile/syntax', 10],
      [edit(10, 'M  RAD  1   1   2\nM  END'), 'molecule/radical', 5],
      [edit(10, 'M  ALS   1  2 F C   N\nM  END'), 'molfile/unsupported', 10],
    ];
    for (const [text, code, line] of cases) expect(errorOf(text), text).toMatchObject({ code, place: { line } });
    expect(errorOf(edit(8, '  1  2  3  0\n  1  3  2  0').replace('  3  2  0', '  3  3  0'))).toMatchObject({
      code: 'molecule/valence',
      place: { atom: 0 },
    });
  });

  // the records were written by python3-rdkit from the SMILES in their data field: an independent reader of SMILES, drawer and embedder
  it('give the configuration that another toolkit drew or embedded', () => {
    const text = gunzipSync(readFileSync(new URL('../fixtures/stereo.sdf.gz', import.meta.url))).toString();
    const wrong: string[] = [];
    let flat = 0;
    let solid = 0;
    for (const record of readSdf(text)) {
      if (record instanceof TordialError) throw record;
      if (record.coordinates) solid++;
      else flat++;
      const smiles = record.properties.get('SMILES') ?? '';
      if (canonicalSmiles(record.molecule) !== canonicalSmiles(moleculeFromSmiles(smiles)))
        wrong.push(`${record.coordinates ? 'embedded' : 'drawn'} ${smiles} ${canonicalSmiles(record.molecule)}`);
    }
    expect(wrong).toEqual([]);
    expect([flat, solid]).toEqual([152, 77]);
  });

  it('leave wavy and crossed bonds and contradicting wedges open', () => {
    const record = (wedges: [number, number]) =>
      readMolfile(
        ['', '                    2D', '', '  4  3  0  0  0  0  0  0  0  0999 V2000']
          .concat('    0.0000    0.0000    0.0000 C   0  0', '    1.0000    0.5000    0.0000 F   0  0')
          .concat('   -1.0000    0.5000    0.0000 Cl  0  0', '    0.0000   -1.0000    0.0000 Br  0  0')
          .concat(`  1  2  1${String(wedges[0]).padStart(3)}`, `  1  3  1${String(wedges[1]).padStart(3)}`, '  1  4  1  0', 'M  END')
          .join('\n'),
      );
    const drawn = (wedges: [number, number]) => record(wedges).molecule.stereo.tetrahedral[0].sign;
    // seen from the viewer's side with F in front: Cl, Br counter-clockwise from F, hydrogen behind: F-Cl-Br counter-clockwise
    expect(drawn([1, 0])).toBe(1);
    expect(drawn([6, 0])).toBe(-1);
    expect(drawn([0, 6])).toBe(-1);
    expect(drawn([1, 6])).toBe(0);
    expect(drawn([4, 0])).toBe(0);
    expect(drawn([0, 0])).toBe(0);
    expect(record([1, 6]).notes).toEqual([expect.objectContaining({ code: 'molfile/wedge', place: { atom: 0 } })]);
    expect(record([1, 0]).notes).toEqual([]);
  });
});

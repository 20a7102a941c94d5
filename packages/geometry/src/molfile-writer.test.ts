import { describe, expect, it } from 'vitest';
import { canonicalSmiles } from './canonical-smiles.js';
import { createMolecule } from './molecule.js';
import { readMolfile } from './molfile.js';
import { writeMolfile, writeSdf } from './molfile-writer.js';
import { readSdf } from './records.js';
import { moleculeFromSmiles } from './smiles.js';

const water = moleculeFromSmiles('O water');
const flat = Float64Array.of(0, 0, 0.11730012, 0, 0.7572, -0.4692, 0, -0.7572, -0.4692);

describe('molfile writer', () => {
  it('writes the columns of the format, without a date and without negative zeros', () => {
    expect(
      writeMolfile(
        water,
        flat.map((value) => (value === 0 ? -0 : value)),
      ),
    ).toBe(
      [
        'water',
        '  Tordial           3D',
        '',
        '  3  2  0  0  0  0  0  0  0  0999 V2000',
        '    0.0000    0.0000    0.1173 O   0  0  0  0  0  0  0  0  0  0  0  0',
        '    0.0000    0.7572   -0.4692 H   0  0  0  0  0  0  0  0  0  0  0  0',
        '    0.0000   -0.7572   -0.4692 H   0  0  0  0  0  0  0  0  0  0  0  0',
        '  1  2  1  0',
        '  1  3  1  0',
        'M  END',
        '',
      ].join('\n'),
    );
  });
  it('reads back charges, isotopes, valences, names and data fields', () => {
    for (const smiles of [
      '[13CH3][N+](C)(C)CC([O-])=O',
      '[2H]OC',
      '[Na+].[Cl-]',
      'F[P-](F)(F)(F)(F)F',
      'CS(C)(=O)=O',
      '[SH4]',
      '[AlH3]',
      'O=N(=O)C',
    ]) {
      const molecule = moleculeFromSmiles(smiles);
      const coordinates = Float64Array.from({ length: 3 * molecule.atomCount }, (_, n) => (n % 3 === 2 ? Math.cos(n) : n));
      const back = readMolfile(writeMolfile(molecule, coordinates, { name: 'x', properties: new Map([['a', '1']]) }));
      expect(canonicalSmiles(back.molecule), smiles).toBe(canonicalSmiles(molecule));
      expect([...back.molecule.bonds.order]).toEqual([...molecule.bonds.order]);
      expect([...back.properties]).toEqual([['a', '1']]);
      expect(back.molecule.name).toBe('x');
      expect(back.coordinates?.every((value, n) => Math.abs(value - coordinates[n]) < 5.1e-5)).toBe(true);
    }
  });
  it('goes over to V3000 beyond 999 atoms', () => {
    const count = 1001;
    const chain = createMolecule({ atomicNumbers: new Array(count).fill(2), formalCharges: new Array(count).fill(0), bonds: [] });
    const coordinates = Float64Array.from({ length: 3 * count }, (_, n) => n);
    const text = writeMolfile(chain, coordinates);
    expect(text).toContain('V3000');
    const back = readMolfile(text, { atoms: 2000 });
    expect([back.molecule.atomCount, back.coordinates?.[3002]]).toEqual([count, 3002]);
  });
  it('refuses what the format cannot hold', () => {
    expect(() => writeMolfile(water, new Float64Array(6))).toThrow(/need 9 coordinates/);
    expect(() =>
      writeMolfile(
        water,
        Float64Array.from(flat, () => Number.NaN),
      ),
    ).toThrow(/does not fit/);
    expect(() => writeMolfile(water, flat, { properties: new Map([['a>', '1']]) })).toThrow(/cannot name/);
    expect(() => writeMolfile(water, flat, { properties: new Map([['a', '1\n\n2']]) })).toThrow(/blank line/);
    expect(() => writeMolfile(water, flat, { properties: new Map([['a', '$$$$']]) })).toThrow(/ends a record/);
  });
  it('ends each SDF record with its mark', () => {
    const text = writeSdf([
      { molecule: water, coordinates: flat },
      { molecule: water, coordinates: flat, properties: new Map([['empty', '']]) },
    ]);
    expect(text.match(/^\$\$\$\$$/gm)).toHaveLength(2);
    expect([...readSdf(text)]).toHaveLength(2);
  });
});

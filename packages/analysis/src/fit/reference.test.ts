import { createMolecule, writeXyz } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { checkedReference, referenceOfFrames, referenceOfTable } from './reference.js';

// hydrogen peroxide built by hand: H-O-O-H at phi degrees
const molecule = createMolecule({
  atomicNumbers: [1, 8, 8, 1],
  bonds: [
    [0, 1, 1],
    [1, 2, 1],
    [2, 3, 1],
  ],
});
const target = { molecule, torsion: [0, 1, 2, 3] as const };
const at = (phi: number): Float64Array => {
  const [c, s] = [Math.cos((phi * Math.PI) / 180), Math.sin((phi * Math.PI) / 180)];
  return Float64Array.of(-0.15, 0.95, 0, 0, 0, 0, 1.45, 0, 0, 1.6, 0.95 * c, 0.95 * s);
};
const codes = (reference: { notes: readonly { code: string }[] }): string[] => reference.notes.map(({ code }) => code);
const thrown = (code: string, words = '') => expect.objectContaining({ code, message: expect.stringContaining(words) });

describe('a table', () => {
  it.each([
    ['commas and kcal/mol', 'angle (degree),energy (kcal/mol)\n0,2\n90,0\n180,1', 2],
    ['semicolons and kJ/mol', '# a remark\nphi;E (kJ/mol)\n0;8.368\n90;0\n180;4.184', 2],
    ['tabs and hartree', 'torsion angle\tenergy (hartree)\n0\t-151.000\n90\t-151.0031872\n180\t-151.0015936', 2],
    ['columns apart by blanks, eV', 'dihedral  energy (eV)\n0  0.0867283\n90  0\n180  0.04336', 2],
  ])('with %s', (_, text, height) => {
    const { points } = referenceOfTable(text);
    expect(points.map(({ angle }) => angle)).toEqual([-180, 0, 90]);
    expect(points[1].energy - points[2].energy).toBeCloseTo(height, 3);
  });
  it('carries weights', () => {
    expect(referenceOfTable('angle,energy (kcal/mol),weight\n0,2,1\n90,0,3\n180,1,0').points.map(({ weight }) => weight)).toEqual([
      0, 1, 3,
    ]);
  });
  it.each([
    ['no unit', 'angle,energy\n0,1\n90,2\n180,3', 'reference/unit', 'states no unit'],
    ['no angle', 'x,energy (kcal/mol)\n0,1\n90,2\n180,3', 'reference/table', 'no angle'],
    ['no row', 'angle,energy (kcal/mol)', 'reference/table', 'no row'],
    ['a value that is none', 'angle,energy (kcal/mol)\n0,1\n90,NaN\n180,3', 'reference/value', 'line 3'],
    ['an empty cell', 'angle,energy (kcal/mol)\n0,1\n90,\n180,3', 'reference/value', 'line 3'],
    ['two angles', 'angle,energy (kcal/mol)\n0,1\n90,2', 'reference/points', '2 different angles'],
    ['two energies at one angle', 'angle,energy (kcal/mol)\n-180,1\n90,2\n0,0\n180,3', 'reference/duplicate', 'two energies'],
    ['hartree read as kcal/mol', 'angle,energy (kcal/mol)\n0,-151.000\n90,-151.003\n180,-151.001', 'reference/unit', 'hartree'],
    ['kcal/mol read as hartree', 'angle,energy (hartree)\n0,4.1\n90,0\n180,1', 'reference/unit', 'another unit'],
  ])('is refused with %s', (_, text, code, words) => {
    expect(() => referenceOfTable(text)).toThrow(thrown(code, words));
  });
  it('takes a unit from the caller where the header states none', () => {
    expect(referenceOfTable('angle,energy\n0,8.368\n90,0\n180,4.184', 'kJ/mol').points[1].energy).toBeCloseTo(2, 9);
  });
});

describe('a reference as a whole', () => {
  const smooth = (angle: number) => 2 * (1 + Math.cos((angle * Math.PI) / 180));
  const points = (angles: readonly number[], change = (_angle: number) => 0) =>
    angles.map((angle) => ({ angle, energy: smooth(angle) + change(angle) }));
  const full = Array.from({ length: 24 }, (_, n) => -180 + 15 * n);
  it('says nothing of one that is sound', () => {
    expect(codes(checkedReference('x', points(full), []))).toEqual([]);
    expect(codes(checkedReference('x', points(full.filter((a) => a >= 0).concat(180)), []))).toEqual([]);
  });
  it('tells of duplicates, gaps, jumps and large ranges', () => {
    expect(codes(checkedReference('x', points([...full, 180]), []))).toEqual(['reference/duplicate']);
    expect(codes(checkedReference('x', points(full.filter((a) => a < 30 || a > 90)), []))).toContain('reference/gap');
    const jump = checkedReference(
      'x',
      points(full, (angle) => (angle === 45 ? 4 : 0)),
      [],
    );
    expect(jump.notes).toEqual([expect.objectContaining({ code: 'reference/jump', message: expect.stringContaining('45 degrees') })]);
    expect(
      codes(
        checkedReference(
          'x',
          points(full).map((p) => ({ ...p, energy: 100 * p.energy })),
          [],
        ),
      ),
    ).toContain('reference/range');
  });
});

describe('XYZ frames', () => {
  const frames = (comment: (phi: number) => string, order = [0, 1, 2, 3], turned = 0): string =>
    [0, 60, 120, 180]
      .map((phi) => {
        const x = at(phi + turned);
        const moved = Float64Array.from(order.flatMap((atom) => [...x.subarray(3 * atom, 3 * atom + 3)]));
        const bonds = molecule.bonds;
        const places = Array.from({ length: 3 }, (_, n) => [order.indexOf(bonds.a[n]), order.indexOf(bonds.b[n]), 1] as const);
        return writeXyz(
          createMolecule({ atomicNumbers: order.map((atom) => molecule.atomicNumbers[atom]), bonds: places }),
          moved,
          comment(phi),
        );
      })
      .join('');
  const energy = (phi: number) => 3 + Math.cos((phi * Math.PI) / 180);

  it('carry energies in their comments and angles in their geometries', () => {
    for (const text of [frames((phi) => `energy ${energy(phi)} kcal/mol`), frames((phi) => `phi ${phi}; E = ${energy(phi)} kcal/mol`)]) {
      const { points } = referenceOfFrames(text, target);
      expect(points.map(({ angle }) => Math.round(angle))).toEqual([-180, 0, 60, 120]);
      expect(points[1].energy).toBeCloseTo(4, 9);
      expect(points[0].coordinates).toHaveLength(12);
    }
    expect(
      referenceOfFrames(
        frames((phi) => `${energy(phi)}`),
        target,
        'kcal/mol',
      ).points[1].energy,
    ).toBeCloseTo(4, 9);
  });
  it('read the comments of our own profiles', () => {
    const own = frames((phi) => `torsion 0-1-2-3 ${phi}.000000 degree; MMFF94s energy ${energy(phi)} kJ/mol; relative energy 0.1 kJ/mol`);
    expect(referenceOfFrames(own, target).points[1].energy).toBeCloseTo(4 / 4.184, 9);
  });
  it('are mapped by the molecular graph when their atoms stand in another order, and that is told', () => {
    const mapped = referenceOfFrames(
      frames((phi) => `angle ${phi} degree, energy ${energy(phi)} kcal/mol`, [1, 0, 3, 2]),
      target,
    );
    expect(codes(mapped)).toEqual(['reference/mapped']);
    expect(mapped.points.map(({ angle }) => Math.round(angle))).toEqual([-180, 0, 60, 120]);
    expect([...(mapped.points[2].coordinates ?? [])].map((value) => Math.abs(value))).toHaveLength(12);
  });
  it('are refused for another molecule, another angle, no energy, no unit, no number', () => {
    const water = '3\nenergy 1 kcal/mol\nO 0 0 0\nH 0 0 0.96\nH 0.93 0 -0.24\n';
    expect(() => referenceOfFrames(water, target)).toThrow(thrown('reference/molecule', 'another molecule'));
    expect(() =>
      referenceOfFrames(
        frames((phi) => `${phi + 20} degree, energy 1 kcal/mol`),
        target,
      ),
    ).toThrow(thrown('reference/angle', '20'));
    expect(() =>
      referenceOfFrames(
        frames(() => 'a peroxide'),
        target,
      ),
    ).toThrow(thrown('reference/comment'));
    expect(() =>
      referenceOfFrames(
        frames(() => 'energy 3.1'),
        target,
      ),
    ).toThrow(thrown('reference/unit'));
    expect(() =>
      referenceOfFrames(
        frames(() => 'energy nan hartree'),
        target,
      ),
    ).toThrow(thrown('reference/value'));
  });
});

import { describe, expect, it } from 'vitest';
import { moleculeFromSmiles } from './smiles.js';
import { geometriesFor, readXyz, writeXyz } from './xyz.js';

const water = moleculeFromSmiles('O');
const positions = Float64Array.of(0, 0, 0.1173, -0, 0.7572, -0.4692, 0, -0.7572, -0.4692);

describe('XYZ', () => {
  it('writes six decimals and reads them back, frame after frame', () => {
    const text =
      writeXyz(water, positions, 'frame 1') +
      writeXyz(
        water,
        positions.map((value) => value + 1),
        'frame\n2',
      );
    expect(text.split('\n')[3]).toBe('H      0.000000     0.757200    -0.469200');
    const frames = readXyz(text);
    expect(frames.map(({ comment, line }) => [comment, line])).toEqual([
      ['frame 1', 1],
      ['frame 2', 6],
    ]);
    expect([...frames[0].elements]).toEqual([8, 1, 1]);
    expect(geometriesFor(water, frames)[1][2]).toBeCloseTo(1.1173, 12);
  });
  it('takes blank lines between frames, Windows line ends, numbers for elements, exponents and further columns', () => {
    const frames = readXyz('\r\n2\r\nx\r\n6 0 0 0 0.1\r\nCL 1.5e0 0 -1E-3\r\n\r\n1\r\n\r\nh 0 0 0\r\n');
    expect(frames.map(({ elements }) => [...elements])).toEqual([[6, 17], [1]]);
    expect([...frames[0].coordinates]).toEqual([0, 0, 0, 1.5, 0, -0.001]);
  });
  it('names the line that is wrong', () => {
    for (const [text, line] of [
      ['', 1],
      ['water', 1],
      ['0\n\n', 1],
      ['2\n\nC 0 0 0', 3],
      ['1\n\nQ 0 0 0', 3],
      ['1\n\nC 0 0', 3],
      ['1\n\nC 0 0 x', 3],
      ['1\n\nC 0 0 0\nC 0 0 0', 4],
    ] as const)
      expect(() => readXyz(text), text).toThrow(expect.objectContaining({ code: 'xyz/syntax', place: { line } }));
  });
  it('refuses frames in another atom order, and sets that are no coordinates', () => {
    const frames = readXyz('3\n\nH 0 0 0\nO 0 0 1\nH 0 1 1\n');
    expect(() => geometriesFor(water, frames)).toThrow(
      expect.objectContaining({ code: 'xyz/atoms', place: { record: 1, line: 3, atom: 0 } }),
    );
    expect(() => geometriesFor(moleculeFromSmiles('C'), frames)).toThrow(/has 3 atoms, the molecule 5/);
    expect(() => writeXyz(water, new Float64Array(3))).toThrow(/9 finite coordinates/);
    expect(() =>
      writeXyz(
        water,
        Float64Array.from(positions, () => Number.NaN),
      ),
    ).toThrow(/finite/);
  });
});

describe('geometries of a molecule', () => {
  it('must have the configuration that it states', () => {
    const molecule = moleculeFromSmiles('[C@](F)(Cl)(Br)I');
    const corners = [
      [0, 0, 0],
      [1, 1, 1],
      [1, -1, -1],
      [-1, 1, -1],
      [-1, -1, 1],
    ].flat();
    const mirrored = corners.map((value, k) => (k % 3 === 0 ? -value : value));
    const framesOf = (x: number[]) => readXyz(writeXyz(molecule, Float64Array.from(x)));
    const taken = [corners, mirrored].filter((x) => {
      try {
        return geometriesFor(molecule, framesOf(x)).length === 1;
      } catch (error) {
        expect(error).toMatchObject({ code: 'xyz/stereo', place: { record: 1, line: 1, atom: 0 } });
        return false;
      }
    });
    expect(taken).toHaveLength(1);
    expect(geometriesFor(moleculeFromSmiles('C(F)(Cl)(Br)I'), framesOf(mirrored))).toHaveLength(1);
  });
});

/** XYZ files: the number of atoms, a comment, then symbol and position of each atom; frames follow one another. */
import { atomicNumberOf, elementSymbol } from './elements.js';
import { TordialError } from './errors.js';
import type { Coordinates, Molecule } from './molecule.js';
import { perceiveStereo } from './stereo-perception.js';

export interface XyzFrame {
  /** Atomic number of each atom. */
  readonly elements: Uint8Array;
  /** Angstrom, 3 per atom. */
  readonly coordinates: Coordinates;
  readonly comment: string;
  /** Line of the frame's atom count, from 1. */
  readonly line: number;
}

/** One frame, 6 decimals, angstrom; concatenated frames make a multi-frame file. Throws `xyz/coordinates` for a wrong or non-finite set. */
export function writeXyz({ atomCount, atomicNumbers, name }: Molecule, coordinates: Coordinates, comment: string = name): string {
  if (coordinates.length !== 3 * atomCount || !coordinates.every(Number.isFinite))
    throw new TordialError('xyz/coordinates', `${atomCount} atoms need ${3 * atomCount} finite coordinates`);
  const lines = [String(atomCount), comment.replace(/[\r\n]+/g, ' ')];
  for (let i = 0; i < atomCount; i++)
    lines.push(elementSymbol(atomicNumbers[i]).padEnd(2) + [0, 1, 2].map((axis) => fixed(coordinates[3 * i + axis]).padStart(13)).join(''));
  return `${lines.join('\n')}\n`;
}

function fixed(value: number): string {
  const text = value.toFixed(6);
  return text === '-0.000000' ? '0.000000' : text;
}

/**
 * All frames of an XYZ file, blank lines between frames ignored; an element may be its symbol or its atomic number.
 * Throws `xyz/syntax` with the line.
 */
export function readXyz(text: string): XyzFrame[] {
  const lines = text.split(/\r\n|\n|\r/);
  const fail = (n: number, what: string): never => {
    throw new TordialError('xyz/syntax', `XYZ file, line ${n + 1}: ${what}`, { line: n + 1 });
  };
  const frames: XyzFrame[] = [];
  for (let at = 0; at < lines.length; ) {
    if (lines[at].trim() === '') {
      at++;
      continue;
    }
    const start = at;
    if (!/^\s*\d+\s*$/.test(lines[at])) fail(at, 'a frame must begin with its number of atoms');
    const count = Number(lines[at]);
    if (count === 0) fail(at, 'a frame without atoms');
    if (lines.length < at + 2 + count)
      fail(lines.length - 1, `the frame that begins in line ${start + 1} announces ${count} atoms and ends before`);
    const elements = new Uint8Array(count);
    const coordinates = new Float64Array(3 * count);
    for (let i = 0; i < count; i++) {
      const [symbol = '', ...position] = lines[at + 2 + i].trim().split(/\s+/);
      const named = symbol.charAt(0).toUpperCase() + symbol.slice(1).toLowerCase();
      const z = /^\d+$/.test(symbol) ? Number(symbol) : atomicNumberOf(named === 'D' || named === 'T' ? 'H' : named);
      if (z < 1 || z > 118) fail(at + 2 + i, `'${symbol}' is no element`);
      const values = position.slice(0, 3).map(Number);
      if (position.length < 3 || !values.every(Number.isFinite)) fail(at + 2 + i, 'an atom must have three coordinates');
      elements[i] = z;
      coordinates.set(values, 3 * i);
    }
    frames.push({ elements, coordinates, comment: lines[at + 1].trim(), line: start + 1 });
    at += 2 + count;
  }
  if (frames.length === 0) fail(0, 'the file holds no frame');
  return frames;
}

/**
 * Coordinates of each frame as geometries of a molecule. Throws `xyz/atoms` naming frame and atom where the elements do not follow the
 * molecule's atom order, `xyz/stereo` where a stereocentre or an allene has the opposite of the configuration that the molecule states: that is
 * another molecule. Double bonds may have turned.
 */
export function geometriesFor(molecule: Molecule, frames: readonly XyzFrame[]): Coordinates[] {
  return frames.map(({ elements, coordinates, line }, n) => {
    if (elements.length !== molecule.atomCount)
      throw new TordialError(
        'xyz/atoms',
        `frame ${n + 1} has ${elements.length} atoms, the molecule ${molecule.atomCount} (hydrogens included)`,
        {
          record: n + 1,
          line,
        },
      );
    const wrong = elements.findIndex((z, i) => z !== molecule.atomicNumbers[i]);
    if (wrong >= 0)
      throw new TordialError(
        'xyz/atoms',
        `frame ${n + 1}: atom ${wrong} is ${elementSymbol(elements[wrong])}, in the molecule ${elementSymbol(molecule.atomicNumbers[wrong])}; ` +
          'the atoms must follow the order of the molecule, added hydrogens last',
        { record: n + 1, line: line + 2 + wrong, atom: wrong },
      );
    checkConfiguration(molecule, coordinates, n, line);
    return coordinates;
  });
}

function checkConfiguration(molecule: Molecule, coordinates: Coordinates, frame: number, line: number): void {
  const seen = perceiveStereo(molecule, coordinates);
  const { tetrahedral, axes } = molecule.stereo;
  const centre = tetrahedral.find(({ sign }, n) => sign * seen.tetrahedral[n].sign < 0);
  const axis = axes.find(({ sign }, n) => sign * seen.axes[n].sign < 0);
  if (!centre && !axis) return;
  const what = centre ? `atom ${centre.atom}` : `the axis ${axis?.a}-${axis?.b}`;
  throw new TordialError(
    'xyz/stereo',
    `frame ${frame + 1}: ${what} has the opposite of the configuration that the molecule states; mirror the frame or correct the molecule`,
    { record: frame + 1, line, ...(centre ? { atom: centre.atom } : {}) },
  );
}

/** Words of the command line turned into values; each refuses what it cannot mean with a sentence that shows the right form. */
import { InvalidArgumentError } from 'commander';

/** Four 0-based atom indices, `A,B,C,D`. */
export function atomQuadruple(text: string): [number, number, number, number] {
  const atoms = indices(text, ',');
  if (atoms?.length !== 4 || new Set(atoms).size !== 4)
    throw new InvalidArgumentError('four different atom indices are meant, such as 0,1,2,3.');
  return [atoms[0], atoms[1], atoms[2], atoms[3]];
}

/** Two 0-based atom indices, `B-C`. */
export function axisPair(text: string): [number, number] {
  const atoms = indices(text, '-');
  if (atoms?.length !== 2 || atoms[0] === atoms[1]) throw new InvalidArgumentError('the two atoms of a bond are meant, such as 1-2.');
  return [atoms[0], atoms[1]];
}

function indices(text: string, separator: string): number[] | undefined {
  const words = text.split(separator).map((word) => word.trim());
  return words.every((word) => /^\d{1,6}$/.test(word)) ? words.map(Number) : undefined;
}

export function positiveInteger(text: string): number {
  const value = Number(text);
  if (!/^\d+$/.test(text.trim()) || value < 1 || !Number.isSafeInteger(value))
    throw new InvalidArgumentError('a whole number from 1 up is meant.');
  return value;
}

export function nonNegativeInteger(text: string): number {
  const value = Number(text);
  if (!/^\d+$/.test(text.trim()) || !Number.isSafeInteger(value)) throw new InvalidArgumentError('a whole number from 0 up is meant.');
  return value;
}

export function finiteNumber(text: string): number {
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value)) throw new InvalidArgumentError('a number is meant.');
  return value;
}

export function positiveNumber(text: string): number {
  const value = finiteNumber(text);
  if (value <= 0) throw new InvalidArgumentError('a number above 0 is meant.');
  return value;
}

/** `constant:C` or `distance:C`, C the dielectric constant; the constant may be left out (1). */
export function dielectric(text: string): { model: 'constant' | 'distance'; constant: number } {
  const [model, constant = '1'] = text.split(':');
  if (model !== 'constant' && model !== 'distance')
    throw new InvalidArgumentError('constant:1 (the default), constant:4, distance:1 and the like are meant.');
  return { model, constant: positiveNumber(constant) };
}

/** Two angles, `FROM:TO`, degrees. */
export function angleRange(text: string): [number, number] {
  const words = text.split(':').map((word) => word.trim());
  const [from, to] = words.map(Number);
  if (words.length !== 2 || words.includes('') || !Number.isFinite(from) || !Number.isFinite(to) || from >= to)
    throw new InvalidArgumentError('two angles are meant, the smaller one first, such as -60:60.');
  return [from, to];
}

/** Degrees between grid angles: they must close on a full turn. */
export function gridStep(text: string): number {
  const step = positiveNumber(text);
  const count = Math.round(360 / step);
  if (count < 3 || Math.abs(count * step - 360) > 1e-9) throw new InvalidArgumentError('a divisor of 360 is meant, such as 5, 10 or 15.');
  return step;
}

export function nonNegativeNumber(text: string): number {
  const value = finiteNumber(text);
  if (value < 0) throw new InvalidArgumentError('a number from 0 up is meant.');
  return value;
}

/** A positive number with or without its unit, `0.35ppm`. */
export function quantity(unit: string): (text: string) => number {
  return (text) => {
    const bare = text.trim().toLowerCase().endsWith(unit.toLowerCase()) ? text.trim().slice(0, -unit.length) : text;
    const value = Number(bare);
    if (bare.trim() === '' || !Number.isFinite(value) || value <= 0)
      throw new InvalidArgumentError(`a number above 0 in ${unit} is meant, such as 1${unit}.`);
    return value;
  };
}

/** Temperatures in kelvin: one, a list `a,b,c`, or a range `from:to:step`. */
export function temperatures(text: string): number[] {
  const range = text.split(':').map(Number);
  if (text.includes(':')) {
    const [from, to, step] = range;
    const count = Math.floor((to - from) / step + 1e-9) + 1;
    if (range.length !== 3 || !range.every(Number.isFinite) || !(from > 0 && step > 0 && count >= 1 && count <= MOST_TEMPERATURES))
      throw new InvalidArgumentError(`a range above 0 K is meant, such as 250:400:10, of at most ${MOST_TEMPERATURES} temperatures.`);
    return Array.from({ length: count }, (_, n) => from + n * step);
  }
  const values = text.split(',').map((word) => (word.trim() === '' ? Number.NaN : Number(word)));
  if (values.length > MOST_TEMPERATURES || !values.every((value) => Number.isFinite(value) && value > 0))
    throw new InvalidArgumentError('kelvin above 0 are meant, such as 298.15 or 250:400:10.');
  return values;
}

const MOST_TEMPERATURES = 1000;

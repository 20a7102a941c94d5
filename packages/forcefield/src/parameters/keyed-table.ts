/**
 * Lookup of published rows by class and atom types. A key packs the class and up to four types into one integer of 32 bits, seven for a
 * type, so that a lookup neither builds a string nor allocates. Tables are parsed when first asked for.
 */

/** Row numbers by key, and the values of all rows one after the other. */
export interface KeyedTable {
  readonly rows: ReadonlyMap<number, number>;
  readonly values: Float64Array;
}

/** Packs a class (0 to 11) and three types. */
export function key3(class_: number, i: number, j: number, k: number): number {
  return (((((class_ << 7) | i) << 7) | j) << 7) | k;
}

/** Packs a class (0 to 7) and four types. */
export function key4(class_: number, i: number, j: number, k: number, l: number): number {
  return (key3(class_, i, j, k) << 7) | l;
}

/** All numbers of a generated table, row after row. */
export function numbers(text: string): Float64Array {
  return Float64Array.from(text.split(/[ \n]/), Number);
}

/** Calls the function at the first use only. */
export function lazily<T>(make: () => T): () => T {
  let made: T | undefined;
  return () => {
    made ??= make();
    return made;
  };
}

/**
 * A table whose rows hold `keyLength` integers and `valueLength` values. `keysOf` gives the keys of a row (the same interaction may be read
 * from either end) as it stands at `at` in `data`.
 */
export function keyedTable(
  text: string,
  keyLength: number,
  valueLength: number,
  keysOf: (data: Float64Array, at: number) => readonly number[],
): KeyedTable {
  const data = numbers(text);
  const width = keyLength + valueLength;
  const count = data.length / width;
  const rows = new Map<number, number>();
  const values = new Float64Array(count * valueLength);
  for (let row = 0; row < count; row++) {
    for (const key of keysOf(data, row * width)) rows.set(key, row);
    for (let n = 0; n < valueLength; n++) values[row * valueLength + n] = data[row * width + keyLength + n];
  }
  return { rows, values };
}

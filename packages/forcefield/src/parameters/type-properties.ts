/**
 * Properties of the numeric atom types (MMFFPROP) and their equivalences (MMFFDEF).
 *
 * Source: T. A. Halgren, J. Comput. Chem. 17, 490 and 616 (1996).
 */
import { lazily, numbers } from './keyed-table.js';
import { EQUIVALENCES, TYPE_PROPERTIES } from './tables.generated.js';

const TYPES = 100;

/** One entry a numeric type (index 0 unused). */
export interface TypeProperties {
  readonly atomicNumber: Uint8Array;
  /** Number of neighbours. */
  readonly crd: Uint8Array;
  /** Sum of bond orders; 34 and 12 stand for three or four and one or two. */
  readonly val: Uint8Array;
  /** 1 with a pi lone pair. */
  readonly pilp: Uint8Array;
  /** 2 or 3 with a double or triple bond, 1 with a partial double bond. */
  readonly mltb: Uint8Array;
  /** 1 in an aromatic ring. */
  readonly arom: Uint8Array;
  /** 1 at a linear centre. */
  readonly lin: Uint8Array;
  /** 1 where a single bond may join two multiply bonded atoms. */
  readonly sbmb: Uint8Array;
}

export const typeProperties: () => TypeProperties = lazily(() => {
  const data = numbers(TYPE_PROPERTIES);
  const column = (n: number) => {
    const values = new Uint8Array(TYPES);
    for (let at = 0; at < data.length; at += 9) values[data[at]] = data[at + n];
    return values;
  };
  return {
    atomicNumber: column(1),
    crd: column(2),
    val: column(3),
    pilp: column(4),
    mltb: column(5),
    arom: column(6),
    lin: column(7),
    sbmb: column(8),
  };
});

/** The type that stands for a type at step-down level 3; levels 1 and 2 are the type itself, level 5 is the wildcard 0. */
export const levelThree: () => Uint8Array = lazily(() => equivalents(2));
export const levelFour: () => Uint8Array = lazily(() => equivalents(3));

function equivalents(column: number): Uint8Array {
  const data = numbers(EQUIVALENCES);
  const level = new Uint8Array(TYPES);
  for (let at = 0; at < data.length; at += 5) level[data[at]] = data[at + column];
  return level;
}

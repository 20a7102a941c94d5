import { TordialError } from './errors.js';

/** Bounds on what a reader accepts, so that a stray file cannot hold the process up. Every bound is inclusive. */
export interface Limits {
  /** Atoms of one molecule, added hydrogens included. */
  readonly atoms: number;
  /** Independent cycles of one molecule (bonds - atoms + fragments). */
  readonly rings: number;
  /** Characters of one record: a SMILES line, a molfile with its data fields. */
  readonly recordLength: number;
}

export const DEFAULT_LIMITS: Limits = { atoms: 1000, rings: 200, recordLength: 2_000_000 };

/** The defaults with the caller's bounds in their place. */
export function withDefaults(limits: Partial<Limits> = {}): Limits {
  return { ...DEFAULT_LIMITS, ...limits };
}

/** Throws `limit/atoms`, `limit/rings` or `limit/record-length` when `value` is above the bound. */
export function checkLimit(what: keyof Limits, value: number, limits: Limits): void {
  if (value <= limits[what]) return;
  const [code, noun, name] = NAMES[what];
  throw new TordialError(
    `limit/${code}`,
    `${value} ${noun} are more than the limit of ${limits[what]}; raise the limit '${name}' when this is meant`,
  );
}

const NAMES: Record<keyof Limits, [string, string, string]> = {
  atoms: ['atoms', 'atoms', 'atoms'],
  rings: ['rings', 'rings', 'rings'],
  recordLength: ['record-length', 'characters in one record', 'recordLength'],
};

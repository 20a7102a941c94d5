/** Works through the records of an input: one that fails is reported and costs only itself. */
import { basename } from 'node:path';
import { largestFragment, type MolecularRecord, type Note, TordialError } from '@tordial/geometry';
import type { InputFlags } from '../commands/common.js';
import { exitCodeOf, report } from '../failures.js';
import { readRecords } from './input.js';

/** Where a record stands among the others. */
export interface RecordPosition {
  /** From 0. */
  readonly index: number;
  /** Whether the input holds no other. */
  readonly alone: boolean;
  /** What messages call it: its own name, or what the user would recognise it by. */
  readonly label: string;
}

/**
 * Calls `work` for each record that could be read and `failed` for each that could not be read or done. Resolves to the exit code: 0, 1
 * when a record failed, 2 when the request fits none of the records. An error that is no TordialError is a bug and ends everything.
 */
export async function eachRecord(
  argument: string,
  { largestFragment: reduce = false, maxAtoms, maxRings, maxRecord }: InputFlags,
  work: (record: MolecularRecord, position: RecordPosition) => Promise<void> | void,
  failed: (error: TordialError, index: number, name: string) => void = () => undefined,
): Promise<number> {
  let index = 0;
  let failures = 0;
  let misfits = 0;
  const records = readRecords(argument, { atoms: maxAtoms, rings: maxRings, recordLength: maxRecord });
  let current = await records.next();
  while (!current.done) {
    const record = current.value;
    const following = await records.next();
    try {
      if (record instanceof TordialError) throw record;
      const alone = index === 0 && following.done === true;
      await work(reduce ? reduced(record) : record, { index, alone, label: labelOf(record, argument, index, alone) });
    } catch (error) {
      if (!(error instanceof TordialError)) throw error;
      const placed = new TordialError(error.code, error.message, { ...record.place, ...error.place }, { cause: error });
      report(placed);
      failed(placed, index, record instanceof TordialError ? '' : record.molecule.name);
      failures++;
      // whoever interrupts means the rest of the list too
      if (error.code === 'usage/interrupted') return 1;
      if (exitCodeOf(error) === 2) misfits++;
    }
    index++;
    current = following;
  }
  if (index === 0) throw new TordialError('file/empty', 'the input holds no record; give a SMILES, or a file with at least one molecule');
  if (misfits === index) return 2;
  return failures > 0 ? 1 : 0;
}

/** The record without its smaller fragments, and a note that says what went. */
function reduced(record: MolecularRecord): MolecularRecord {
  const { molecule, atoms } = largestFragment(record.molecule);
  const lost = record.molecule.atomCount - molecule.atomCount;
  if (lost === 0) return record;
  const note = {
    code: 'molecule/fragments',
    message: `the largest organic fragment was kept and the rest (${lost} ${lost === 1 ? 'atom' : 'atoms'}) left out; atom indices count within the fragment`,
  };
  const { coordinates } = record;
  const kept =
    coordinates && Float64Array.from({ length: 3 * atoms.length }, (_, n) => coordinates[3 * atoms[Math.floor(n / 3)] + (n % 3)]);
  return { ...record, molecule, coordinates: kept, notes: [...record.notes, note] };
}

function labelOf({ molecule, place }: MolecularRecord, argument: string, index: number, alone: boolean): string {
  if (molecule.name !== '') return molecule.name;
  const input = place.file ? basename(place.file) : argument === '-' ? 'input' : argument;
  return alone ? input : `${input} record ${place.record ?? index + 1}`;
}

/** Tells notes on standard error. */
export function tell(notes: readonly Note[], label = ''): void {
  for (const { message } of notes) process.stderr.write(`note: ${label === '' ? '' : `${label}: `}${message}\n`);
}

/** What went wrong, in the user's terms, and what the process says of it when it ends. */
import { TordialError } from '@tordial/geometry/errors';

/** Codes that tell of a wrong request rather than of a record that cannot be done. */
const USAGE =
  /^(usage|file|output|torsion|document|reference)\/|^fit\/(order|input|folds|weights|restraint|type)|^engine\/config|^scan\/(grid|range|period|linear)/;

/** 2 for a wrong request, 1 for a record that could not be done. */
export function exitCodeOf(error: unknown): 1 | 2 {
  return error instanceof TordialError && USAGE.test(error.code) ? 2 : 1;
}

/** One line for people: where, what, and the code to look up. A bug shows its stack, for it is ours to mend. */
export function describeFailure(error: unknown): string {
  if (!(error instanceof TordialError)) return `internal error: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`;
  const { file, record, line } = error.place;
  const named = file !== undefined && error.message.includes(file);
  // readers of files name the record and its line themselves
  const counted = error.message.startsWith(`record ${record} `);
  const where = [
    named ? undefined : file,
    record === undefined || counted ? undefined : `record ${record}`,
    line === undefined || counted ? undefined : `line ${line}`,
  ].filter((part) => part !== undefined);
  return `${where.length > 0 ? `${where.join(', ')}: ` : ''}${error.message} [${error.code}]`;
}

/** Writes a failure on standard error. */
export function report(error: unknown): void {
  process.stderr.write(`error: ${describeFailure(error)}\n`);
}

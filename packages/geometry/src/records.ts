/** Files of many records, SDF and lists of SMILES, read whole or as a stream; a broken record costs only itself. */
import { type ErrorPlace, TordialError } from './errors.js';
import { checkLimit, type Limits, withDefaults } from './limits.js';
import { type MolecularRecord, readRecord } from './molfile.js';
import { moleculeFromSmiles } from './smiles.js';

/** A record, or the error that it ended in, with `place.record` and `place.line`. */
export type RecordResult = MolecularRecord | TordialError;

/** Text of a stream in pieces of any size. */
export type Chunks = AsyncIterable<string> | Iterable<string>;

/** Takes lines one by one and hands out what they complete. */
interface RecordReader {
  line(text: string): RecordResult | null;
  end(): RecordResult | null;
}

/**
 * Reads the records of an SDF text in turn. Nothing is thrown for a broken record: its error stands in its place, with the record's number
 * (from 1) and the line of the file. Blank lines at the end are no record.
 */
export function* readSdf(text: string, limits?: Partial<Limits>): Generator<RecordResult> {
  yield* readLines(text, sdfReader(withDefaults(limits)));
}

/** The same from a stream of any length; only one record is held at a time. */
export async function* sdfRecords(chunks: Chunks, limits?: Partial<Limits>): AsyncGenerator<RecordResult> {
  const bounds = withDefaults(limits);
  yield* readChunks(chunks, sdfReader(bounds), bounds);
}

/**
 * Reads a list of SMILES in turn: one a line, then white space and a name; blank lines and lines that begin with '#' are passed over.
 * Errors stand in the place of their record as in `readSdf`.
 */
export function* readSmilesList(text: string, limits?: Partial<Limits>): Generator<RecordResult> {
  yield* readLines(text, smilesReader(withDefaults(limits)));
}

/** The same from a stream of any length. */
export async function* smilesRecords(chunks: Chunks, limits?: Partial<Limits>): AsyncGenerator<RecordResult> {
  const bounds = withDefaults(limits);
  yield* readChunks(chunks, smilesReader(bounds), bounds);
}

function sdfReader(limits: Limits): RecordReader {
  let lines: string[] = [];
  let length = 0;
  let record = 0;
  let lineNumber = 0;
  let start = 1;
  const finish = (): RecordResult => {
    const [own, size, place] = [lines, length, { record: ++record, line: start }];
    lines = [];
    length = 0;
    start = lineNumber + 1;
    return attempt(place, () => {
      checkLimit('recordLength', size, limits);
      return readRecord(own, limits, place);
    });
  };
  return {
    line(text) {
      lineNumber++;
      if (text.startsWith('$$$$')) return finish();
      length += text.length + 1;
      if (length <= limits.recordLength) lines.push(text);
      return null;
    },
    end: () => (lines.every((line) => line.trim() === '') && length <= limits.recordLength ? null : finish()),
  };
}

function smilesReader(limits: Limits): RecordReader {
  let record = 0;
  let lineNumber = 0;
  return {
    line(text) {
      lineNumber++;
      const content = text.trim();
      if (content === '' || content.startsWith('#')) return null;
      record++;
      const place = { record, line: lineNumber };
      return attempt(place, () => ({
        molecule: moleculeFromSmiles(content, limits),
        coordinates: null,
        properties: new Map(),
        notes: [],
        place,
      }));
    },
    end: () => null,
  };
}

/** Turns an error of a record into a result that says which record it was. */
function attempt(place: { record: number; line: number }, read: () => MolecularRecord): RecordResult {
  try {
    return read();
  } catch (error) {
    if (!(error instanceof TordialError)) throw error;
    const at: ErrorPlace = { ...place, ...error.place };
    return new TordialError(error.code, `record ${place.record} (line ${place.line}): ${error.message}`, at, { cause: error });
  }
}

function* readLines(text: string, reader: RecordReader): Generator<RecordResult> {
  for (let from = text.startsWith(BYTE_ORDER_MARK) ? 1 : 0; from < text.length; ) {
    const found = text.indexOf('\n', from);
    const end = found < 0 ? text.length : found;
    const result = reader.line(withoutReturn(text.slice(from, end)));
    if (result) yield result;
    from = end + 1;
  }
  const last = reader.end();
  if (last) yield last;
}

/** A line that is longer than a record may be is held only as far as it takes to refuse it. */
async function* readChunks(chunks: Chunks, reader: RecordReader, limits: Limits): AsyncGenerator<RecordResult> {
  let held = '';
  let begun = false;
  for await (const piece of chunks) {
    const chunk = !begun && piece.startsWith(BYTE_ORDER_MARK) ? piece.slice(1) : piece;
    begun ||= piece.length > 0;
    let from = 0;
    for (let found = chunk.indexOf('\n'); found >= 0; found = chunk.indexOf('\n', from)) {
      const result = reader.line(withoutReturn(held + chunk.slice(from, found)));
      held = '';
      from = found + 1;
      if (result) yield result;
    }
    held += chunk.slice(from, from + Math.max(0, limits.recordLength + 2 - held.length));
  }
  const result = held === '' ? null : reader.line(withoutReturn(held));
  if (result) yield result;
  const last = reader.end();
  if (last) yield last;
}

const BYTE_ORDER_MARK = '\uFEFF';

const withoutReturn = (line: string): string => (line.endsWith('\r') ? line.slice(0, -1) : line);

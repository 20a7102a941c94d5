/** What MOLECULE on the command line stands for, as a stream of records; one that cannot be read comes as its error, and the rest goes on. */
import { createReadStream, existsSync, readFileSync, statSync } from 'node:fs';
import type { Readable } from 'node:stream';
import { createGunzip, gunzipSync } from 'node:zlib';
import { type Limits, type MolecularRecord, moleculeFromSmiles, readXyz, sdfRecords, smilesRecords, TordialError } from '@tordial/geometry';

/** A record, or what is wrong with it. */
export type InputRecord = MolecularRecord | TordialError;

const FORMAT = /\.(smi|smiles|mol|sdf|sd|xyz)(\.gz)?$/i;

/** Records of a SMILES, a file or standard input. Throws `file/missing` and `file/format` before the first record. */
export async function* readRecords(argument: string, limits: Partial<Limits>): AsyncGenerator<InputRecord> {
  if (argument === '-') return yield* fromText(chunksOf(process.stdin), undefined, limits);
  // a folder that bears the name of a molecule does not stand in the way of its SMILES
  if (existsSync(argument) && (statSync(argument).isFile() || /[./\\]/.test(argument))) {
    const format = FORMAT.exec(argument)?.[1].toLowerCase();
    if (format === undefined || !statSync(argument).isFile())
      throw new TordialError(
        'file/format',
        `${argument} is no file that can be read: its name must end in .smi, .mol or .sdf (or in these and .gz)`,
        {
          file: argument,
        },
      );
    const stream = createReadStream(argument);
    const unpacked = argument.endsWith('.gz') ? stream.pipe(createGunzip()) : stream;
    stream.on('error', (error) => unpacked.destroy(error));
    for await (const record of fromText(chunksOf(unpacked, argument), format, limits)) {
      if (record instanceof TordialError) yield new TordialError(record.code, record.message, { file: argument, ...record.place });
      else yield { ...record, place: { file: argument, ...record.place } };
    }
    return;
  }
  if (FORMAT.test(argument))
    throw new TordialError('file/missing', `there is no file ${argument}; check the path, or give a SMILES`, { file: argument });
  yield smilesRecord(argument, limits);
}

function smilesRecord(smiles: string, limits: Partial<Limits>): InputRecord {
  try {
    return { molecule: moleculeFromSmiles(smiles, limits), coordinates: null, properties: new Map(), notes: [], place: {} };
  } catch (error) {
    if (error instanceof TordialError) return error;
    throw error;
  }
}

async function* fromText(chunks: AsyncIterable<string>, format: string | undefined, limits: Partial<Limits>): AsyncGenerator<InputRecord> {
  switch (format) {
    case 'smi':
    case 'smiles':
      return yield* smilesRecords(chunks, limits);
    case 'mol':
    case 'sdf':
    case 'sd':
      return yield* sdfRecords(chunks, limits);
    case 'xyz':
      throw new TordialError(
        'file/format',
        'an XYZ file says nothing of bonds; give the molecule as SMILES or molfile and the XYZ file with --geometry',
      );
    default:
      return yield* guessed(chunks, limits);
  }
}

/** Text of unknown kind: a molfile has a counts line or ends in `$$$$`; everything else is read as a list of SMILES. */
async function* guessed(chunks: AsyncIterable<string>, limits: Partial<Limits>): AsyncGenerator<InputRecord> {
  const iterator = chunks[Symbol.asyncIterator]();
  let head = '';
  while (head.split('\n').length < 6) {
    const { value, done } = await iterator.next();
    if (done) break;
    head += value;
  }
  const whole = (async function* () {
    yield head;
    yield* { [Symbol.asyncIterator]: () => iterator };
  })();
  const isMolfile = /V[23]000\s*$/.test(head.split(/\r?\n/)[3] ?? '');
  yield* isMolfile ? sdfRecords(whole, limits) : smilesRecords(whole, limits);
}

async function* chunksOf(stream: Readable, file?: string): AsyncGenerator<string> {
  stream.setEncoding('utf8');
  try {
    for await (const chunk of stream) yield String(chunk);
  } catch (cause) {
    throw unreadable(file, cause);
  }
}

function unreadable(file: string | undefined, cause: unknown): TordialError {
  const reason = cause instanceof Error ? cause.message : String(cause);
  return new TordialError('file/read', `${file ?? 'standard input'} cannot be read (${reason})`, { file }, { cause });
}

/** The frames of an XYZ file, gzipped or not. Throws `file/missing`, `file/read`, and as `readXyz` does. */
export function readFrames(path: string): ReturnType<typeof readXyz> {
  if (!existsSync(path)) throw new TordialError('file/missing', `there is no file ${path}`, { file: path });
  let text: string;
  try {
    const content = readFileSync(path);
    text = (path.endsWith('.gz') ? gunzipSync(content) : content).toString('utf8');
  } catch (cause) {
    throw unreadable(path, cause);
  }
  try {
    return readXyz(text);
  } catch (error) {
    throw error instanceof TordialError
      ? new TordialError(error.code, error.message, { file: path, ...error.place }, { cause: error })
      : error;
  }
}

import { describe, expect, it } from 'vitest';
import { canonicalSmiles } from './canonical-smiles.js';
import { TordialError } from './errors.js';
import { writeSdf } from './molfile-writer.js';
import { type RecordResult, readSdf, readSmilesList, sdfRecords, smilesRecords } from './records.js';
import { moleculeFromSmiles } from './smiles.js';

/** A record on the table: enough for reading, the positions mean nothing. */
function entry(smiles: string, name: string, properties: [string, string][] = []) {
  const molecule = moleculeFromSmiles(smiles);
  const coordinates = Float64Array.from({ length: 3 * molecule.atomCount }, (_, n) => Math.floor(n / 3) + (n % 3) * Math.sin(n));
  return { molecule, coordinates, name, properties: new Map(properties) };
}
const SDF = writeSdf([entry('CCO', 'first', [['note', 'two\nlines']]), entry('CC=O', 'second'), entry('c1ccncc1', 'third')]);
const BROKEN = SDF.replace(/second\n(.*\n){2}/, (head) => head).replace(/(second\n.*\n.*\n)(.*)/, '$1 not a counts line');

const summary = (results: readonly RecordResult[]) =>
  results.map((result) =>
    result instanceof TordialError
      ? `${result.place.record} ${result.place.line} ${result.code}`
      : `${result.place.record} ${result.place.line} ${result.molecule.name} ${canonicalSmiles(result.molecule)}`,
  );
async function collected(results: AsyncIterable<RecordResult>): Promise<RecordResult[]> {
  const all: RecordResult[] = [];
  for await (const result of results) all.push(result);
  return all;
}
const pieces = (text: string, size: number) =>
  Array.from({ length: Math.ceil(text.length / size) }, (_, n) => text.slice(n * size, (n + 1) * size));

describe('SDF', () => {
  it('gives records in order with their names, lines and data fields', () => {
    const results = [...readSdf(SDF)];
    expect(summary(results)).toEqual(['1 1 first CCO', '2 28 second CC=O', '3 47 third c1ccncc1']);
    expect(results[0] instanceof TordialError ? null : results[0].properties.get('note')).toBe('two\nlines');
  });
  it('loses only the broken record and says where it is', () => {
    const results = [...readSdf(BROKEN)];
    expect(summary(results)).toEqual(['1 1 first CCO', '2 31 molfile/syntax', '3 47 third c1ccncc1']);
    expect(results[1]).toMatchObject({ message: expect.stringMatching(/^record 2 \(line 28\): molfile, line 31: /) });
  });
  it('takes Windows line ends, a byte order mark, no mark at the end and blank lines after it', () => {
    const expected = summary([...readSdf(SDF)]);
    for (const text of [SDF.replaceAll('\n', '\r\n'), `\uFEFF${SDF}`, SDF.replace(/\$\$\$\$\n$/, ''), `${SDF}\n\n  \n`])
      expect(summary([...readSdf(text)])).toEqual(expected);
    expect(summary([...readSdf('')])).toEqual([]);
    expect(summary([...readSdf(`${SDF}$$$$\n`)]).at(-1)).toBe('4 75 molfile/syntax');
  });
  it('reads the same from a stream cut anywhere', async () => {
    const expected = summary([...readSdf(BROKEN)]);
    for (const size of [1, 7, 64, 100_000]) expect(summary(await collected(sdfRecords(pieces(BROKEN, size))))).toEqual(expected);
  });
  it('bounds a record without holding it, and goes on behind it', async () => {
    const long = `${'x'.repeat(300)}\n`.repeat(40);
    const results = await collected(sdfRecords(pieces(`${long}$$$$\n${SDF}`, 50), { recordLength: 5000 }));
    expect(summary(results)).toEqual(['1 1 limit/record-length', '2 42 first CCO', '3 69 second CC=O', '4 88 third c1ccncc1']);
    const endless = await collected(sdfRecords(pieces('y'.repeat(100_000), 1000), { recordLength: 5000 }));
    expect(summary(endless)).toEqual(['1 1 limit/record-length']);
  });
});

describe('lists of SMILES', () => {
  const LIST = '# a comment\nCCO ethanol\n\n  CC(C\tbroken\r\nc1ccccc1\tbenzene ring\n#C\nO';
  const expected = ['1 2 ethanol CCO', '2 4 smiles/syntax', '3 5 benzene ring c1ccccc1', '4 7  O'];
  it('take comments, blank lines, tabs, names with blanks and Windows line ends', () => {
    expect(summary([...readSmilesList(LIST)])).toEqual(expected);
    expect(summary([...readSmilesList(LIST.replaceAll('\n', '\r\n'))])).toEqual(expected);
  });
  it('read the same from a stream cut anywhere', async () => {
    for (const size of [1, 5, 1000]) expect(summary(await collected(smilesRecords(pieces(LIST, size))))).toEqual(expected);
  });
});

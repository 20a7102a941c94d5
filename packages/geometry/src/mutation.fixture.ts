/** Mutated text for robustness tests: seeded, so that a failure can be repeated. */
import fc from 'fast-check';

/** An edit at a place given as a fraction of the text: delete, insert, replace, double or swap. */
type Edit = readonly [kind: number, place: number, piece: string, length: number];

const apply = (text: string, [kind, place, piece, length]: Edit): string => {
  const at = Math.floor(place * text.length);
  const end = Math.min(text.length, at + length);
  switch (kind) {
    case 0:
      return text.slice(0, at) + text.slice(end);
    case 1:
      return text.slice(0, at) + piece + text.slice(at);
    case 2:
      return text.slice(0, at) + piece + text.slice(end);
    case 3:
      return text.slice(0, end) + text.slice(at);
    default:
      return text.slice(0, at) + text.slice(end) + text.slice(at, end);
  }
};

/** Texts that differ from one of `seeds` by one to `edits` edits, with `pieces` put in. */
export function mutated(seeds: readonly string[], pieces: readonly string[], edits = 4): fc.Arbitrary<string> {
  const fraction = fc.integer({ min: 0, max: 999_999 }).map((n) => n / 1_000_000);
  const edit = fc.tuple(fc.integer({ min: 0, max: 4 }), fraction, fc.constantFrom(...pieces), fc.integer({ min: 1, max: 6 }));
  return fc
    .tuple(fc.constantFrom(...seeds), fc.array(edit, { minLength: 1, maxLength: edits }))
    .map(([seed, changes]) => changes.reduce(apply, seed));
}

/** Pieces of SMILES, right and wrong. */
export const SMILES_PIECES = [
  ...'CNOSPFIBHcnospb()[]=#$:/\\@.%+-0123456789*~> ?',
  ...[
    'Cl',
    'Br',
    '[nH]',
    '[C@H]',
    '[C@@H]',
    '[N+]',
    '[O-]',
    '[2H]',
    '[H]',
    '[Si]',
    '[Fe+2]',
    '[CH2]',
    '%10',
    '%(100)',
    'c1ccccc1',
    'C=C',
    'C=C=C',
    '/C=C/',
    '@@',
    '[Xx]',
    '[13C]',
  ],
];

/** Pieces of connection tables, right and wrong. */
export const MOLFILE_PIECES = [
  ...' 0123456789-.CNOHMVX\n\r\t',
  ...[
    '  1',
    '  4',
    '999',
    'V2000',
    'V3000',
    'M  END\n',
    'M  CHG  1   1   1\n',
    'M  RAD  1   1   2\n',
    'M  ISO  1   1  13\n',
    'M  V30 ',
    '$$$$\n',
    '> <x>\n',
    ' R# ',
    ' Cl',
    '1e9',
    'NaN',
    '\u0000',
  ],
];

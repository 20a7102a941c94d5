import { moleculeFromSmiles } from '@tordial/geometry';
import { expect, it } from 'vitest';
import { torsionPatterns } from './torsion-smarts.js';

// numbers of matches: GetSubstructMatches of Debian's python3-rdkit 2022.09.3 for these very patterns, each torsion counted once; the matched atoms were the same
it.each([
  ['COc1ccccc1', [8, 0, 1, 2], '[#1;X1;A;!R:1]-[#6;X4;A;!R:2]-[#8;X2;A;!R:3]-[#6;X3;a;R:4]', 3],
  ['COc1ccccc1', [0, 1, 2, 3], '[#6;X3;a;R:1]:[#6;X3;a;R:2]-[#8;X2;A;!R:3]-[#6;X4;A;!R:4]', 2],
  ['CC(=O)Nc1ccc(O)cc1', [11, 0, 1, 2], '[#1;X1;A;!R:1]-[#6;X4;A;!R:2]-[#6;X3;A;!R:3]=[#8;X1;A;!R:4]', 3],
  ['CC(=O)Nc1ccc(O)cc1', [2, 1, 3, 4], '[#6;X3;a;R:1]-[#7;X3;A;!R:2]-[#6;X3;A;!R:3]=[#8;X1;A;!R:4]', 1],
  ['CC(=O)Nc1ccc(O)cc1', [1, 3, 4, 5], '[#6;X3;A;!R:1]-[#7;X3;A;!R:2]-[#6;X3;a;R:3]:[#6;X3;a;R:4]', 2],
  ['CC(=O)Nc1ccc(O)cc1', [6, 7, 8, 17], '[#1;X1;A;!R:1]-[#8;X2;A;!R:2]-[#6;X3;a;R:3]:[#6;X3;a;R:4]', 2],
  ['CCCC', [4, 0, 1, 2], '[#1;X1;A;!R:1]-[#6;X4;A;!R:2]-[#6;X4;A;!R:3]-[#6;X4;A;!R:4]', 10],
  ['CCCC', [0, 1, 2, 3], '[#6;X4;A;!R:1]-[#6;X4;A;!R:2]-[#6;X4;A;!R:3]-[#6;X4;A;!R:4]', 1],
  ['C[N+](C)(C)CCO', [7, 0, 1, 4], '[#1;X1;A;!R:1]-[#6;X4;A;!R:2]-[#7;X4;A;!R;+1:3]-[#6;X4;A;!R:4]', 33],
  ['C[N+](C)(C)CCO', [0, 1, 4, 5], '[#6;X4;A;!R:1]-[#6;X4;A;!R:2]-[#7;X4;A;!R;+1:3]-[#6;X4;A;!R:4]', 3],
  ['C[N+](C)(C)CCO', [1, 4, 5, 6], '[#7;X4;A;!R;+1:1]-[#6;X4;A;!R:2]-[#6;X4;A;!R:3]-[#8;X2;A;!R:4]', 1],
  ['C[N+](C)(C)CCO', [4, 5, 6, 20], '[#1;X1;A;!R:1]-[#8;X2;A;!R:2]-[#6;X4;A;!R:3]-[#6;X4;A;!R:4]', 1],
  ['c1ccc(-c2ccccn2)cc1', [2, 3, 4, 9], '[#6;X3;a;R:1]:[#6;X3;a;R:2]-[#6;X3;a;R:3]:[#7;X2;a;R:4]', 2],
  ['C1CC1CC=C', [10, 2, 3, 4], '[#1;X1;A;!R:1]-[#6;X4;A;R:2]-[#6;X4;A;!R:3]-[#6;X3;A;!R:4]', 1],
  ['C1CC1CC=C', [2, 3, 4, 5], '[#6;X3;A;!R:1]=[#6;X3;A;!R:2]-[#6;X4;A;!R:3]-[#6;X4;A;R:4]', 1],
  ['N#CCCO', [1, 2, 3, 4], '[#6;X2;A;!R:1]-[#6;X4;A;!R:2]-[#6;X4;A;!R:3]-[#8;X2;A;!R:4]', 1],
] as const)('%s, torsion %j, is written so that another program finds the same torsions', (smiles, torsion, smarts, count) => {
  const [pattern] = torsionPatterns(moleculeFromSmiles(smiles), [torsion]);
  expect(pattern.smarts).toBe(smarts);
  expect(pattern.matches).toHaveLength(count);
  expect(pattern.matches.some((atoms) => atoms.join() === torsion.join() || [...atoms].reverse().join() === torsion.join())).toBe(true);
});

it('writes a pattern once, whichever way its torsions run', () => {
  const butane = moleculeFromSmiles('CCCC');
  expect(
    torsionPatterns(butane, [
      [0, 1, 2, 3],
      [3, 2, 1, 0],
    ]),
  ).toHaveLength(1);
});

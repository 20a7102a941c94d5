import { moleculeFromSmiles } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { groupLabel, labelRuns, labelText, labelWidth, reversedLabel } from './group-label.js';

/** The group that atom 1 of the SMILES begins, seen from atom 0; condensed formulas as chemists write them. */
function label(smiles: string, atom = 1, from = 0) {
  return groupLabel(moleculeFromSmiles(smiles), atom, from);
}

describe('groupLabel', () => {
  it.each([
    ['C', 'H', 'H'],
    ['CF', 'F', 'F'],
    ['CC', 'CH3', 'H3C'],
    ['CCC', 'C2H5', 'C2H5'],
    ['CC(C)C', 'i-Pr', 'i-Pr'],
    ['CC(C)(C)C', 't-Bu', 't-Bu'],
    ['COC(C)(C)C', 'OtBu', 'tBuO'],
    ['CO', 'OH', 'HO'],
    ['COC', 'OCH3', 'H3CO'],
    ['COCC', 'OC2H5', 'C2H5O'],
    ['CN', 'NH2', 'H2N'],
    ['CN(C)C', 'N(CH3)2', '(H3C)2N'],
    ['C[NH3+]', 'NH3+', 'H3N+'],
    ['C[N+](=O)[O-]', 'NO2', 'O2N'],
    ['CN=[N+]=[N-]', 'N3', 'N3'],
    ['CN=C=O', 'NCO', 'OCN'],
    ['CC#N', 'CN', 'NC'],
    ['CC#C', 'C≡CH', 'HC≡C'],
    ['CC=C', 'CH=CH2', 'H2C=CH'],
    ['CC=O', 'CHO', 'OHC'],
    ['CC(=O)C', 'COCH3', 'H3CCO'],
    ['CC(=O)O', 'CO2H', 'HO2C'],
    ['CC(=O)[O-]', 'CO2−', 'O2C−'],
    ['CC(=O)OC', 'CO2CH3', 'H3CO2C'],
    ['CC(=O)N', 'CONH2', 'H2NCO'],
    ['CNC(C)=O', 'NHCOR', 'RCONH'],
    ['COC(=O)C', 'OCOCH3', 'H3CCOO'],
    ['CS', 'SH', 'HS'],
    ['CS(=O)(=O)C', 'SO2CH3', 'H3CSO2'],
    ['C[S+]([O-])C', 'SOCH3', 'H3CSO'],
    ['CS(=O)(=O)O', 'SO3H', 'HO3S'],
    ['CS(=O)(=O)N', 'SO2NH2', 'H2NSO2'],
    ['CP(=O)(O)O', 'PO3H2', 'H2O3P'],
    ['CB(O)O', 'B(OH)2', '(HO)2B'],
    ['CC(F)(F)F', 'CF3', 'F3C'],
    ['COC(F)(F)F', 'OCF3', 'F3CO'],
    ['CCCl', 'CH2Cl', 'ClCH2'],
    ['CCO', 'CH2OH', 'HOCH2'],
    ['CC(O)C', 'CH(OH)R', 'R(HO)CH'],
    ['CC(=N)N', 'C(=NH)NH2', 'H2N(HN=)C'],
    ['Cc1ccccc1', 'Ph', 'Ph'],
    ['CCc1ccccc1', 'CH2Ph', 'PhCH2'],
    ['COc1ccccc1', 'OPh', 'PhO'],
    ['Cc1ccc(F)cc1', 'C6H4F', 'FC6H4'],
    ['Cc1ccc(CCC)cc1', 'C6H4R', 'RC6H4'],
    ['Cc1c(F)c(F)c(F)c(F)c1F', 'C6F5', 'F5C6'],
    ['Cc1ccccn1', 'pyridyl', 'pyridyl'],
    ['Cc1cccs1', 'thienyl', 'thienyl'],
    ['Cc1cccc2ccccc12', 'Ar', 'Ar'],
    ['CC1CC1', 'c-Pr', 'c-Pr'],
    ['CN1CCOCC1', 'NR2', 'R2N'],
  ])('names the group in %s %s, reversed %s', (smiles, forwards, backwards) => {
    expect(labelText(label(smiles))).toBe(forwards);
    expect(labelText(reversedLabel(label(smiles)))).toBe(backwards);
  });

  it.each([
    ['c1ccccc1-c1ccccc1', 4, 5, 'CH'],
    ['c1ccnc(-c2ccccc2)c1', 3, 4, 'N'],
    ['Cc1ccccc1-c1ccccc1F', 1, 6, 'C–CH3'],
    ['COc1ccccc1-c1ccccc1', 2, 7, 'C–OCH3'],
    ['CC(C)(C)CCc1ccccc1-c1ccccc1', 6, 11, 'C–CH2R'],
    ['c1cccc2c1cccc2-c1ccccc1-c1ccccc1', 10, 15, 'C–Ar'],
    ['O=C1CCCN1c1ccccc1', 1, 5, 'C=O'],
    ['CC1(C)CCCN1c1ccccc1', 1, 6, 'CR2'],
    ['c1ccc2c(c1)cccc2-c1ccccc1', 3, 9, 'C'],
    ['CC1CCCCC1', 2, 1, 'CH2'],
  ])('names a ring member of %s with what it bears', (smiles, atom, from, text) => {
    expect(labelText(label(smiles, atom, from))).toBe(text);
  });

  it('keeps every label short', () => {
    for (const smiles of ['CC(=O)NCCCCCC', 'CC(OC)(OC)CC', 'CS(=O)(=O)NCCc1ccccc1', 'CC(C(=O)O)C(=O)O', 'CC(=CC)CC'])
      expect(labelWidth(label(smiles), 10)).toBeLessThan(50);
  });

  it('lowers counts and raises charges', () => {
    expect(labelRuns(label('C[NH3+]'))).toEqual([
      { text: 'NH', shift: 'line' },
      { text: '3', shift: 'subscript' },
      { text: '+', shift: 'superscript' },
    ]);
  });

  it('does not name what is not bonded', () => {
    expect(() => label('CCC', 2, 0)).toThrow(expect.objectContaining({ code: 'figure/group' }));
  });
});

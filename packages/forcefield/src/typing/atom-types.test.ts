import { createMolecule, type Molecule, moleculeFromSmiles, TordialError } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { readSuite } from '../validation.fixture.js';
import { typeAtoms } from './atom-types.js';
import { NUMERIC_TYPES } from './symbolic-types.js';

const symbols = (molecule: Molecule) => typeAtoms(molecule).symbolicTypes.join(' ');

// T. A. Halgren, J. Comput. Chem. 17, 490 (1996) and 20, 720 (1999): the validation suites
describe.each(['MMFF94', 'MMFF94s'] as const)('the %s validation suite', (variant) => {
  it('has the printed type for every atom, in both writings', () => {
    const wrong: string[] = [];
    let atoms = 0;
    for (const { name, molecule, hypervalent, types } of readSuite(variant))
      for (const writing of new Set([molecule, hypervalent])) {
        const { atomTypes, symbolicTypes } = typeAtoms(writing);
        types.forEach((type, i) => {
          if (type === null) return;
          atoms++;
          if (atomTypes[i] !== type) wrong.push(`${name} atom ${i}: ${symbolicTypes[i]} ${atomTypes[i]}, not ${type}`);
        });
      }
    expect(wrong).toEqual([]);
    expect(atoms).toBeGreaterThan(variant === 'MMFF94' ? 16000 : 6000);
  });
});

// definitions of the symbolic types: T. A. Halgren, J. Comput. Chem. 17, 490 (1996), Table III (from memory); heavy atoms in SMILES order,
// then hydrogens
const DEFINITIONS: readonly (readonly [smiles: string, types: string])[] = [
  ['[H]C([H])=C([H])[H]', 'HC C=C HC C=C HC HC'],
  ['FC(F)(Cl)C(Br)I', 'F CR F CL CR BR I HC'],
  ['O', 'OH2 HOH HOH'],
  ['[OH3+]', 'O+ HO+ HO+ HO+'],
  ['CC=[OH+]', 'CR C=OR O=+ HC HC HC HC HO=+'],
  ['N', 'NR H3N H3N H3N'],
  ['CN', 'CR NR HC HC HC HNR HNR'],
  ['C[NH3+]', 'CR NR+ HC HC HC HNR+ HNR+ HNR+'],
  ['CO', 'CR OR HC HC HC HOR'],
  ['C[O-]', 'CR OM HC HC HC'],
  ['C=C[O-]', 'C=C C=C OM2 HC HC HC'],
  ['[OH-]', 'OM HOM'],
  ['OO', '-O- -O- HO HO'],
  ['CS', 'CR S HC HC HC HS'],
  ['C[S-]', 'CR SM HC HC HC'],
  ['CP', 'CR P HC HC HC HP HP'],
  ['[SiH4]', 'SI HSI HSI HSI HSI'],
  ['C1CC1', 'CR3R CR3R CR3R HC HC HC HC HC HC'],
  ['C1CCC1=C', 'CR4R CR4R CR4R CE4R C=C HC HC HC HC HC HC HC HC'],
  ['C=C=C', 'C=C =C= C=C HC HC HC HC'],
  ['C#N', 'CSP NSP HC'],
  ['[C-]#[N+]C', 'C% NR% CR HC HC HC'],
  ['O=C=O', 'O=C =C= O=C'],
  ['CN=C=S', 'CR N=C =C= S=C HC HC HC'],
  ['CC=O', 'CR C=OR O=CR HC HC HC HC'],
  ['OC=O', 'OC=O COO O=CO HOCO HC'],
  ['CC(=O)[O-]', 'CR CO2M O2CM O2CM HC HC HC'],
  ['CC(=S)[S-]', 'CR CS2M S2CM S2CM HC HC HC'],
  ['NC(=O)OC', 'NC=O COON O=CN OC=O CR HNCO HNCO HC HC HC'],
  ['COC(=O)OC', 'CR OC=O COOO O=CO OC=O CR HC HC HC HC HC HC'],
  ['CSC(C)=O', 'CR S C=OS CR O=C HC HC HC HC HC HC'],
  ['NC(N)=S', 'NC=S C=SN NC=S S=C HNCS HNCS HNCS HNCS'],
  ['C=NO', 'C=N N=C -O- HC HC HO'],
  ['CC(O)=N', 'CR C=N OC=N N=C HC HC HC HOCN HN=C'],
  ['NC(N)=N', 'NC=N CGD NC=N N=C HNCN HNCN HNCN HNCN HN=C'],
  ['NC(N)=[NH2+]', 'NGD+ CGD+ NGD+ NGD+ HGD+ HGD+ HGD+ HGD+ HGD+ HGD+'],
  ['NC=[NH2+]', 'NCN+ CNN+ NCN+ HNC+ HNC+ HC HNC+ HNC+'],
  ['C=[NH2+]', 'C=N N+=C HC HC HNC+ HNC+'],
  ['CC=NN', 'CR C=N N=C NN=C HC HC HC HC HNNC HNNC'],
  ['CN=NN', 'CR N=N N=N NN=N HC HC HC HNNN HNNN'],
  ['N=N', 'N=N N=N HN=N HN=N'],
  ['C=CN', 'C=C C=C NC=C HC HC HC HNCC HNCC'],
  ['C#CN', 'CSP CSP NC%C HC HNC% HNC%'],
  ['NC#N', 'NC%N CSP NSP HNC% HNC%'],
  ['CN=[N+]=[N-]', 'CR N=N =N= NAZT HC HC HC'],
  ['C[N+]#N', 'CR NR% NSP HC HC HC'],
  ['CC#[N+][O-]', 'CR CSP NR% OXN HC HC HC'],
  ['CN=O', 'CR N=O O=N HC HC HC'],
  ['C[N+](=O)[O-]', 'CR NO2 O2N O2N HC HC HC'],
  ['O=[N+]([O-])[O-]', 'O3N NO3 O3N O3N'],
  ['C[N+](C)(C)[O-]', 'CR N3OX CR CR OXN HC HC HC HC HC HC HC HC HC'],
  ['C=[N+](C)[O-]', 'C=N N2OX CR OXN HC HC HC HC HC'],
  ['CS(N)(=O)=O', 'CR SO2N NSO2 O2S O2S HC HC HC HNSO HNSO'],
  ['CS(=O)(=O)[NH-]', 'CR SO2N O2S O2S NM HC HC HC HNM'],
  ['CS(=O)(=N)C', 'CR SNO O-S NSO CR HC HC HC HNSO HC HC HC'],
  ['CS(C)=O', 'CR S=O CR O=S HC HC HC HC HC HC'],
  ['CS(=O)(=O)[O-]', 'CR SO3 O3S O3S O3S HC HC HC'],
  ['CS(=O)[O-]', 'CR SO2M O2S O2S HC HC HC'],
  ['CS(=O)[S-]', 'CR SSOM OSMS SSMO HC HC HC'],
  ['OS(O)(=O)=O', 'OSO3 SO2 OSO3 O2S O2S HOS HOS'],
  ['C=S=O', 'C=SO =S=O O=S= HC HC'],
  ['C=S(=O)=O', 'CSO2 =SO2 O2S O2S HC HC'],
  ['COP(=O)([O-])OC', 'CR OPO3 PO4 O2P O2P OPO3 CR HC HC HC HC HC HC'],
  ['OP(C)(C)=O', 'OPO PO2 CR CR OP HOP HC HC HC HC HC HC'],
  ['CP(C)(C)=S', 'CR PTET CR CR S-P HC HC HC HC HC HC HC HC HC'],
  ['CP=C', 'CR -P=C C=P HC HC HC HC HC'],
  ['c1cccnc1', 'CB CB CB CB NPYD CB HC HC HC HC HC'],
  ['c1ccc[nH+]c1', 'CB CB CB CB NPD+ CB HC HC HC HC HPD+ HC'],
  ['[O-][n+]1ccccc1', 'OXN NPOX CB CB CB CB CB HC HC HC HC HC'],
  ['Oc1ccccc1', 'OC=C CB CB CB CB CB CB HOCC HC HC HC HC HC'],
  ['c1cc[nH]c1', 'C5B C5B C5A NPYL C5A HC HC HC HPYL HC'],
  ['c1ccoc1', 'C5B C5B C5A OFUR C5A HC HC HC HC'],
  ['c1ccsc1', 'C5B C5B C5A STHI C5A HC HC HC HC'],
  ['c1cn[nH]c1', 'C5B C5B N5A NPYL C5A HC HC HPYL HC'],
  ['c1c[nH]cn1', 'C5B C5A NPYL C5A N5B HC HC HPYL HC'],
  ['c1c[nH]c[nH+]1', 'C5 C5 NIM+ CIM+ NIM+ HC HC HIM+ HC HIM+'],
  ['c1cs[nH+]c1', 'C5B C5A STHI N5A+ C5B HC HC HN5+ HC'],
  ['c1csc[nH+]1', 'C5B C5A STHI C5A N5B+ HC HC HC HN5+'],
  ['[n-]1nnnc1', 'N5M N5M N5M N5M C5 HC'],
  ['[O-][n+]1cccn1C', 'OXN N5AX C5B C5B C5A NPYL CR HC HC HC HC HC HC'],
  ['[O-][n+]1ccn(C)c1', 'OXN N5BX C5B C5A NPYL CR C5A HC HC HC HC HC HC'],
  ['c1csc2sccc12', 'C5B C5A STHI C5A STHI C5A C5B C5B HC HC HC HC'],
  ['c1csc2ccsc12', 'C5B C5A STHI C5 C5B C5A STHI C5 HC HC HC HC'],
  ['[Li+].[Na+].[K+].[Mg+2].[Ca+2].[Zn+2]', 'LI+ NA+ K+ MG+2 CA+2 ZN+2'],
  ['[Fe+2].[Fe+3].[Cu+].[Cu+2].[F-].[Cl-].[Br-]', 'FE+2 FE+3 CU+1 CU+2 F- CL- BR-'],
  ['[O-]Cl(=O)(=O)=O', 'O4CL CLO4 O4CL O4CL O4CL'],
];

describe('symbolic types', () => {
  it.each(DEFINITIONS)('%s', (smiles, types) => {
    expect(symbols(moleculeFromSmiles(smiles))).toBe(types);
  });

  it('cover every numeric type of the force field', () => {
    const found = new Set<number>();
    for (const [smiles] of DEFINITIONS) for (const type of typeAtoms(moleculeFromSmiles(smiles)).atomTypes) found.add(type);
    for (const { molecule } of readSuite('MMFF94')) for (const type of typeAtoms(molecule).atomTypes) found.add(type);
    const known = [...new Set<number>(Object.values(NUMERIC_TYPES))].sort((a, b) => a - b);
    expect(known).toHaveLength(95);
    expect(known.filter((type) => !found.has(type))).toEqual([]);
  });
});

const nitromethane = (hypervalent: boolean) =>
  createMolecule({
    atomicNumbers: [6, 7, 8, 8, 1, 1, 1],
    formalCharges: hypervalent ? [0, 0, 0, 0, 0, 0, 0] : [0, 1, 0, -1, 0, 0, 0],
    bonds: [
      [0, 1, 1],
      [1, 2, 2],
      [1, 3, hypervalent ? 2 : 1],
      [0, 4, 1],
      [0, 5, 1],
      [0, 6, 1],
    ],
  });
const hydrazoicAcid = (hypervalent: boolean) =>
  createMolecule({
    atomicNumbers: [1, 7, 7, 7],
    formalCharges: hypervalent ? [0, 0, 0, 0] : [0, 0, 1, -1],
    bonds: [
      [0, 1, 1],
      [1, 2, 2],
      [2, 3, hypervalent ? 3 : 2],
    ],
  });
const sulfone = (hypervalent: boolean) =>
  createMolecule({
    atomicNumbers: [16, 8, 8, 1, 1],
    formalCharges: hypervalent ? [0, 0, 0, 0, 0] : [2, -1, -1, 0, 0],
    bonds: [
      [0, 1, hypervalent ? 2 : 1],
      [0, 2, hypervalent ? 2 : 1],
      [0, 3, 1],
      [0, 4, 1],
    ],
  });
const perchlorate = (hypervalent: boolean) =>
  createMolecule({
    atomicNumbers: [17, 8, 8, 8, 8],
    formalCharges: hypervalent ? [0, 0, 0, 0, -1] : [3, -1, -1, -1, -1],
    bonds: [1, 2, 3, 4].map((oxygen) => [0, oxygen, hypervalent && oxygen < 4 ? 2 : 1] as const),
  });

describe('one structure in two writings', () => {
  it.each([
    ['a nitro group', nitromethane, 'CR NO2 O2N O2N HC HC HC'],
    ['an azide', hydrazoicAcid, 'HN=N N=N =N= NAZT'],
    ['a sulfone', sulfone, 'SO2 O2S O2S HS HS'],
    ['perchlorate', perchlorate, 'CLO4 O4CL O4CL O4CL O4CL'],
  ] as const)('%s', (_, write, types) => {
    expect(symbols(write(false))).toBe(types);
    expect(symbols(write(true))).toBe(types);
  });

  it('gives atoms of a resonance pair one type, however the charge and the double bonds are drawn', () => {
    expect(symbols(moleculeFromSmiles('C[N+]1=CC=CN1C')).split(' ').slice(0, 7)).toEqual(['CR', 'NIM+', 'C5', 'C5B', 'C5', 'NIM+', 'CR']);
    for (const [one, other] of [
      ['CC1=CC=CC=C1F', 'CC=1C=CC=CC=1F'],
      ['C[N+]1=CN(C)C=C1', 'CN1C=[N+](C)C=C1'],
      ['CN1C=CN=[N+]1C', 'C[N+]1=CC=NN1C'],
    ])
      expect(symbols(moleculeFromSmiles(one))).toBe(symbols(moleculeFromSmiles(other)));
  });
});

describe('an atom without a type', () => {
  const bare = (atomicNumbers: number[], bonds: [number, number, number][], formalCharges?: number[]) =>
    createMolecule({ atomicNumbers, bonds, ...(formalCharges ? { formalCharges } : {}) });
  it.each([
    [
      'boron',
      bare(
        [5, 9, 9, 9],
        [
          [0, 1, 1],
          [0, 2, 1],
          [0, 3, 1],
        ],
      ),
      0,
      /\(B\).*outside the force field/,
    ],
    [
      'a metal with a bond',
      bare(
        [6, 30, 6, 1, 1, 1, 1, 1, 1],
        [
          [0, 1, 1],
          [1, 2, 1],
          [0, 3, 1],
          [0, 4, 1],
          [0, 5, 1],
          [2, 6, 1],
          [2, 7, 1],
          [2, 8, 1],
        ],
      ),
      1,
      /\(Zn\).*only as an ion/,
    ],
    [
      'selenium',
      bare(
        [34, 1, 1],
        [
          [0, 1, 1],
          [0, 2, 1],
        ],
      ),
      0,
      /\(Se\).*outside/,
    ],
    [
      'a radical',
      bare(
        [6, 1, 1, 1],
        [
          [0, 1, 1],
          [0, 2, 1],
          [0, 3, 1],
        ],
      ),
      0,
      /\(C\).*sum to 3 with charge 0/,
    ],
    [
      'a carbanion',
      bare(
        [6, 1, 1, 1],
        [
          [0, 1, 1],
          [0, 2, 1],
          [0, 3, 1],
        ],
        [-1, 0, 0, 0],
      ),
      0,
      /\(C\).*carbanion/,
    ],
    [
      'a carbocation',
      bare(
        [6, 1, 1, 1],
        [
          [0, 1, 1],
          [0, 2, 1],
          [0, 3, 1],
        ],
        [1, 0, 0, 0],
      ),
      0,
      /\(C\)/,
    ],
    [
      'a sulfonium ion',
      bare(
        [16, 1, 1, 1],
        [
          [0, 1, 1],
          [0, 2, 1],
          [0, 3, 1],
        ],
        [1, 0, 0, 0],
      ),
      0,
      /\(S\)/,
    ],
    ['the iodide ion', bare([53], [], [-1]), 0, /\(I\).*single atom/],
    ['a proton', bare([1], [], [1]), 0, /\(H\).*single atom/],
    ['the hydrogen molecule', bare([1, 1], [[0, 1, 1]]), 0, /\(H\).*no hydrogen on this neighbour/],
    [
      'carbonate',
      bare(
        [6, 8, 8, 8],
        [
          [0, 1, 2],
          [0, 2, 1],
          [0, 3, 1],
        ],
        [0, 0, -1, -1],
      ),
      0,
      /carbonate/,
    ],
    [
      'nitrite',
      bare(
        [8, 7, 8],
        [
          [0, 1, 2],
          [1, 2, 1],
        ],
        [0, 0, -1],
      ),
      1,
      /nitrite/,
    ],
    [
      'perchloric acid',
      bare(
        [17, 8, 8, 8, 8, 1],
        [
          [0, 1, 2],
          [0, 2, 2],
          [0, 3, 2],
          [0, 4, 1],
          [4, 5, 1],
        ],
      ),
      1,
      /perchlorate/,
    ],
    [
      'a sulphur ylide',
      bare(
        [16, 6, 1, 1, 1, 1],
        [
          [0, 1, 2],
          [0, 2, 1],
          [0, 3, 1],
          [1, 4, 1],
          [1, 5, 1],
        ],
      ),
      1,
      /ylide/,
    ],
  ] as const)('is an error that names it: %s', (_, molecule, atom, message) => {
    try {
      typeAtoms(molecule);
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(TordialError);
      expect(error).toMatchObject({ code: 'mmff94/atom-type', place: { atom } });
      expect(String(error)).toMatch(message);
    }
  });
});

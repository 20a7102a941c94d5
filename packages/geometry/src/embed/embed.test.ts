import { describe, expect, it } from 'vitest';
import { angle, degrees, distance, torsion } from '../internal-coordinates.js';
import { type Coordinates, createMolecule, type Molecule, neighboursOf } from '../molecule.js';
import { moleculeFromSmiles } from '../smiles.js';
import { perceiveStereo } from '../stereo-perception.js';
import { leastRmsd } from '../superpose.js';
import { embed, embedMany } from './embed.js';
import { atomShapes } from './shapes.js';
import { threadedRing } from './threading.js';

/** What is hard to build: every line a reason of its own. */
const HARD: readonly (readonly [string, string])[] = [
  ['morphinan', 'CN1CC[C@]23c4c5ccc(O)c4O[C@H]2[C@@H](O)C=C[C@H]3[C@H]1C5'],
  ['steroid', 'C[C@]12CC[C@H]3[C@@H](CCC4=CC(=O)CC[C@]34C)[C@@H]1CC[C@@H]2O'],
  ['bridged peroxide', 'C[C@@H]1CC[C@H]2[C@@H](C)C(=O)O[C@@H]3O[C@@]4(C)CC[C@@H]1[C@@]23OO4'],
  ['taxane', 'CC1=C2[C@@H](C(=O)[C@@]3([C@H](C[C@@H]4[C@]([C@H]3[C@@H]([C@@](C2(C)C)(C[C@@H]1O)O)OC(=O)c5ccccc5)(CO4)OC(=O)C)O)C)OC(=O)C'],
  ['penam', 'CC1(C)S[C@@H]2[C@H](NC(=O)Cc3ccccc3)C(=O)N2[C@H]1C(=O)O'],
  ['cubane', 'C12C3C4C1C5C2C3C45'],
  ['adamantane', 'C1C2CC3CC1CC(C2)C3'],
  ['dodecahedrane', 'C12C3C4C5C1C6C7C2C8C3C9C4C1C5C6C2C7C8C9C12'],
  ['tetrahedrane', 'C12C3C1C23'],
  ['propellane', 'C1C23CC21C3'],
  ['bicyclobutane', 'C1C2CC12'],
  ['spiropentane', 'C1CC12CC2'],
  ['dispiro', 'C1CC2(C1)CC1(CCC1)C2'],
  ['camphor', 'CC1(C)[C@@H]2CC[C@@]1(C)C(=O)C2'],
  ['pinene', 'CC1(C)[C@H]2CC=C(C)[C@@H]1C2'],
  ['barrelene', 'C1=CC2C=CC1C=C2'],
  ['trans-cyclooctene', 'C1CCC/C=C/CC1'],
  ['cis-cyclooctene', 'C1CCC/C=C\\CC1'],
  ['cyclooctyne', 'C1CCCCCC#C1'],
  ['cyclooctatetraene', 'C1=CC=CC=CC=C1'],
  ['trans,trans,trans triene ring', 'CC1=C/CC(C)(C)/C=C/C/C(C)=C/CC1'],
  ['twelve-membered ring', 'C1CCCCCCCCCCC1'],
  ['crown', 'C1COCCOCCOCCOCCOCCO1'],
  ['thirty-membered ring', 'C1CCCCCCC/C=C/CCCCCCCCCCCCCCCCCCC1'],
  [
    'macrolide',
    'CC[C@H]1OC(=O)[C@H](C)[C@@H](O[C@H]2C[C@@](C)(OC)[C@@H](O)[C@H](C)O2)[C@H](C)[C@@H](O)[C@](C)(O)C[C@@H](C)C(=O)[C@H](C)[C@@H](O)[C@]1(C)O',
  ],
  ['cyclic peptide', 'CC(C)C[C@@H]1NC(=O)[C@H](Cc2ccccc2)NC(=O)[C@@H]2CCCN2C(=O)[C@H](CO)NC(=O)[C@H](C)NC1=O'],
  ['ortho biaryl', 'Cc1cccc(C)c1-c1c(C)cccc1C'],
  ['paracyclophane', 'C1Cc2ccc(cc2)CCc2ccc1cc2'],
  ['helicene', 'c1ccc2c(c1)ccc1ccc3ccc4ccccc4c3c12'],
  ['azulene', 'c1ccc2cccc2cc1'],
  ['porphine', 'c1cc2cc3ccc([nH]3)cc3ccc(n3)cc3ccc([nH]3)cc1n2'],
  ['dibenzazepine', 'NC(=O)N1c2ccccc2C=Cc2ccccc21'],
  ['phenothiazine', 'c1ccc2c(c1)Sc1ccccc1N2'],
  ['sucrose', 'OC[C@H]1O[C@@](CO)(O[C@H]2O[C@H](CO)[C@@H](O)[C@H](O)[C@H]2O)[C@@H](O)[C@@H]1O'],
  ['triphosphate', 'Nc1ncnc2c1ncn2[C@@H]1O[C@H](COP(=O)(O)OP(=O)(O)OP(=O)(O)O)[C@@H](O)[C@H]1O'],
  ['sulfoxide', 'C[S@@](=O)CC[C@H](N)C(=O)O'],
  ['sulfoximine', 'C[S@@](=N)(=O)c1ccccc1'],
  ['phosphine', 'C[P@](c1ccccc1)c1ccc(OC)cc1'],
  ['quaternary nitrogen', 'CC[N@@+](C)(CC=C)c1ccccc1'],
  ['zwitterion', '[NH3+][C@@H](Cc1ccccc1)C([O-])=O'],
  ['allene', 'CC(Cl)=[C@]=C(C)Br'],
  ['butatriene', 'C/C=C=C=C/C'],
  ['diyne', 'CCC#CC#CCC'],
  ['oxime', 'C/C(=N\\O)c1ccccc1'],
  ['hydrazone and diene', 'C/C=C/C=C\\C=N\\N'],
  ['azide', '[N-]=[N+]=Nc1ccccc1'],
  ['crowded alcohol', 'CC(C)(C)C(C(C)(C)C)(C(C)(C)C)O'],
  ['crowded arene', 'CC(C)(C)c1ccccc1C(C)(C)C'],
  ['trans-decalin', 'C1CC[C@H]2CCCC[C@@H]2C1'],
  ['cis-decalin', 'C1CC[C@@H]2CCCC[C@@H]2C1'],
  ['cyclic siloxane', 'C[Si]1(C)O[Si](C)(C)O[Si](C)(C)O[Si](C)(C)O1'],
  ['pentavalent phosphorus', 'ClP(Cl)(Cl)(Cl)Cl'],
  ['hexavalent sulfur', 'FS(F)(F)(F)(F)F'],
  ['tropane', 'CN1[C@@H]2CC[C@H]1[C@H]([C@H](C2)OC(=O)c1ccccc1)C(=O)OC'],
  ['quinuclidine', 'COc1ccc2nccc([C@@H](O)[C@@H]3C[C@@H]4CCN3C[C@@H]4C=C)c2c1'],
  ['open centres in fused rings', 'C1CCC2C(C1)CCC1C2CCC2CCCC12'],
  ['hydrogen', '[H][H]'],
  ['one atom', '[Cl-]'],
];

/** Stated configurations that the coordinates do not have. */
function lostStereo(molecule: Molecule, x: Coordinates): number {
  const seen = perceiveStereo(molecule, x);
  const { tetrahedral, doubleBonds, axes } = molecule.stereo;
  return (
    tetrahedral.filter(({ sign }, n) => sign !== 0 && seen.tetrahedral[n].sign !== sign).length +
    doubleBonds.filter(({ cis }, n) => cis !== null && seen.doubleBonds[n].cis !== cis).length +
    axes.filter(({ sign }, n) => sign !== 0 && seen.axes[n].sign !== sign).length
  );
}

/** Shortest distance of two atoms more than two bonds apart. */
function closest(molecule: Molecule, x: Coordinates): number {
  let least = Number.POSITIVE_INFINITY;
  for (let i = 0; i < molecule.atomCount; i++) {
    const near = new Set([i, ...neighboursOf(molecule, i)]);
    for (const j of [...near]) for (const k of neighboursOf(molecule, j)) near.add(k);
    for (let j = 0; j < i; j++) if (!near.has(j)) least = Math.min(least, distance(x, i, j));
  }
  return least;
}

/** Largest torsion angle (degrees) inside an aromatic ring. */
function aromaticTwist(molecule: Molecule, x: Coordinates): number {
  const { aromaticBond } = atomShapes(molecule);
  let most = 0;
  for (const ring of molecule.rings) {
    const n = ring.length;
    for (let m = 0; m < n; m++) {
      const [i, j, k, l] = [0, 1, 2, 3].map((step) => ring[(m + step) % n]);
      const bonds = [...neighboursOf(molecule, j)].indexOf(k);
      if (n > 3 && n < 7 && aromaticBond[molecule.neighbours.bond[molecule.neighbours.start[j] + bonds]] === 1)
        most = Math.max(most, Math.abs(degrees(torsion(x, i, j, k, l))));
    }
  }
  return most;
}

describe('embedding', () => {
  it.each(HARD)('builds %s with its stereo, without threading or overlap', (name, smiles) => {
    const molecule = moleculeFromSmiles(smiles);
    for (const x of embedMany(molecule, 3, { seed: 5 })) {
      expect(x.every(Number.isFinite)).toBe(true);
      expect(lostStereo(molecule, x)).toBe(0);
      expect(threadedRing(molecule.rings, molecule.bonds, x)).toBeNull();
      // the shortest contact over three bonds is that across bicyclobutane, about 1.9 (hydrogens in a planar Z form reach 1.5)
      expect(closest(molecule, x)).toBeGreaterThan(1.4);
      if (!['paracyclophane', 'helicene'].includes(name)) expect(aromaticTwist(molecule, x)).toBeLessThan(10);
    }
  });

  it('takes 250 atoms', () => {
    const molecule = moleculeFromSmiles(`C${'[C@H](O)[C@@H](C)OC(=O)CCNC(=O)'.repeat(10)}${'C'.repeat(10)}`);
    expect(molecule.atomCount).toBeGreaterThan(240);
    const x = embed(molecule);
    expect(lostStereo(molecule, x)).toBe(0);
    expect(closest(molecule, x)).toBeGreaterThan(1.4);
  });

  it('gives the same bytes for a seed and another structure for another', () => {
    const molecule = moleculeFromSmiles('CC(C)C[C@H](N)C(=O)OCCc1ccccc1');
    expect(embed(molecule, { seed: 3 })).toEqual(embed(molecule, { seed: 3 }));
    expect(embedMany(molecule, 2, { seed: 3 })[0]).toEqual(embed(molecule, { seed: 3 }));
    expect(leastRmsd(embed(molecule, { seed: 3 }), embed(molecule, { seed: 4 }))).toBeGreaterThan(0.3);
  });

  it('makes either form of an open centre', () => {
    const molecule = moleculeFromSmiles('CC(N)C(=O)O');
    const signs = embedMany(molecule, 12, { seed: 1 }).map((x) => perceiveStereo(molecule, x).tetrahedral[0].sign);
    expect(new Set(signs)).toEqual(new Set([-1, 1]));
  });

  // electron diffraction and microwave structures as the CRC Handbook's section 9 lists them, from memory: angstrom, degrees
  it.each<[string, string, number[], number, number]>([
    ['ethane C-C', 'CC', [0, 1], 1.534, 0.03],
    ['ethene C=C', 'C=C', [0, 1], 1.339, 0.03],
    ['ethyne C-C', 'C#C', [0, 1], 1.203, 0.03],
    ['benzene C-C', 'c1ccccc1', [0, 1], 1.399, 0.03],
    ['methanol C-O', 'CO', [0, 1], 1.421, 0.03],
    ['chloromethane C-Cl', 'CCl', [0, 1], 1.781, 0.03],
    ['bromomethane C-Br', 'CBr', [0, 1], 1.939, 0.03],
    ['water H-O', 'O', [0, 1], 0.958, 0.03],
    ['water H-O-H', 'O', [1, 0, 2], 104.5, 2],
    ['dimethyl sulfide C-S-C', 'CSC', [0, 1, 2], 98.9, 3],
    ['dimethyl ether C-O-C', 'COC', [0, 1, 2], 111.5, 3],
    ['acetone C-C-C', 'CC(=O)C', [0, 1, 3], 116, 3],
    ['allene C=C=C', 'C=C=C', [0, 1, 2], 180, 6],
    ['cyclobutane C-C-C', 'C1CCC1', [0, 1, 2], 88, 3],
    ['cyclopropane H-C-H', '[H]C1([H])CC1', [0, 1, 2], 114.5, 4],
    ['cubane C-C-H', '[H]C12C3C4C1C5C2C3C45', [0, 1, 2], 125.3, 4],
  ])('comes near the measured %s', (_, smiles, atoms, measured, tolerance) => {
    const x = embed(moleculeFromSmiles(smiles));
    const [i, j, k] = atoms;
    const value = k === undefined ? distance(x, i, j) : degrees(angle(x, i, j, k));
    expect(Math.abs(value - measured)).toBeLessThan(tolerance);
  });

  it('places fragments side by side without contact', () => {
    const molecule = moleculeFromSmiles('C[C@H](N)C(=O)[O-].c1ccccc1.[Na+].O');
    const x = embed(molecule);
    expect(lostStereo(molecule, x)).toBe(0);
    const owner = [0, 0, 0, 0, 0, 0, 1, 1, 1, 1, 1, 1, 2, 3];
    for (let i = 0; i < owner.length; i++)
      for (let j = 0; j < i; j++) if (owner[i] !== owner[j]) expect(distance(x, i, j)).toBeGreaterThan(3);
  });

  it('says so when a configuration is impossible in space', () => {
    // camphor with one bridgehead inverted: the bridge of one atom does not reach
    const impossible = moleculeFromSmiles('CC1(C)[C@@H]2CC[C@]1(C)C(=O)C2');
    expect(() => embed(impossible, { attempts: 8 })).toThrow(expect.objectContaining({ code: 'embed/failed' }));
  });

  it('embeds a molecule that was made by hand', () => {
    const water = createMolecule({
      atomicNumbers: [8, 1, 1],
      bonds: [
        [0, 1, 1],
        [0, 2, 1],
      ],
    });
    expect(embed(water)).toEqual(embed(moleculeFromSmiles('O')));
  });
});

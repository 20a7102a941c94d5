import { createMolecule, embed, type Molecule, moleculeFromSmiles, neighboursOf, perceiveStereo } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { findRotors, type Rotor, rotorOfTorsion } from './rotor.js';
import { ROTOR_TABLE } from './rotor-table.fixture.js';

/** `a-b n,n kind letter`, classes lettered in the order of the axes. */
function written(rotors: readonly Rotor[]): string[] {
  return rotors.map(
    ({ axis, symmetryNumbers, kind, equivalenceClass }) =>
      `${axis.join('-')} ${symmetryNumbers.join()} ${kind} ${String.fromCharCode(97 + equivalenceClass)}`,
  );
}

/** The table's rows in the order of the axes, classes lettered anew in that order. */
function expected(rows: readonly string[]): string[] {
  const byAxis = rows.toSorted((p, q) => {
    const [[a, b], [c, d]] = [p, q].map((text) => text.split(' ')[0].split('-').map(Number));
    return a - c || b - d;
  });
  const letters = new Map<string, string>();
  return byAxis.map((text) => {
    const letter = text.slice(-1);
    if (!letters.has(letter)) letters.set(letter, String.fromCharCode(97 + letters.size));
    return `${text.slice(0, -1)}${letters.get(letter)}`;
  });
}

/** The same molecule with atom i renumbered to `order[i]`; for molecules without stereochemistry. */
function renumbered(molecule: Molecule, order: readonly number[]): Molecule {
  const at = (values: ArrayLike<number>) => {
    const moved: number[] = [];
    order.forEach((target, i) => {
      moved[target] = values[i];
    });
    return moved;
  };
  const rows = Array.from(
    molecule.bonds.order,
    (bondOrder, n) => [order[molecule.bonds.a[n]], order[molecule.bonds.b[n]], bondOrder] as const,
  );
  return createMolecule({
    atomicNumbers: at(molecule.atomicNumbers),
    formalCharges: at(molecule.formalCharges),
    isotopes: at(molecule.isotopes),
    bonds: rows.toReversed(),
  });
}

/** A fixed permutation of n numbers for each seed. */
function shuffle(n: number, seed: number): number[] {
  const order = Array.from({ length: n }, (_, i) => i);
  let state = seed;
  for (let i = n - 1; i > 0; i--) {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    const j = state % (i + 1);
    [order[i], order[j]] = [order[j], order[i]];
  }
  return order;
}

describe('rotors of common molecules', () => {
  it.each(ROTOR_TABLE)('$name', ({ smiles, rotors }) => {
    expect(written(findRotors(moleculeFromSmiles(smiles)))).toEqual(expected(rotors));
  });

  it('have sides that part the molecule, torsions along bonds and relabellings that map one onto another', () => {
    for (const { smiles } of ROTOR_TABLE) {
      const molecule = moleculeFromSmiles(smiles);
      const rotors = findRotors(molecule);
      for (const { axis, torsion, sides, equivalenceClass, relabelling, periodicity, symmetryNumbers } of rotors) {
        expect(torsion.slice(1, 3)).toEqual([...axis]);
        expect([neighboursOf(molecule, axis[0]).includes(torsion[0]), neighboursOf(molecule, axis[1]).includes(torsion[3])]).toEqual([
          true,
          true,
        ]);
        expect(new Set(torsion).size).toBe(4);
        expect([...sides[0], ...sides[1]].sort((p, q) => p - q)).toEqual(Array.from({ length: molecule.atomCount }, (_, i) => i));
        expect([sides[0].includes(axis[0]), sides[1].includes(axis[1])]).toEqual([true, true]);
        expect(Number.isInteger(360 / periodicity / symmetryNumbers[0]) && Number.isInteger(360 / periodicity / symmetryNumbers[1])).toBe(
          true,
        );
        const first = rotors.find((rotor) => rotor.equivalenceClass === equivalenceClass);
        expect(first?.axis.map((i) => relabelling[i]).sort((p, q) => p - q)).toEqual([...axis]);
      }
    }
  });

  it('do not depend on the order of the atoms', () => {
    for (const { name, smiles } of ROTOR_TABLE) {
      const molecule = moleculeFromSmiles(smiles);
      const flat = renumbered(
        molecule,
        Array.from({ length: molecule.atomCount }, (_, i) => i),
      );
      for (const seed of [1, 2, 3]) {
        const order = shuffle(molecule.atomCount, seed);
        const back: number[] = [];
        order.forEach((target, i) => {
          back[target] = i;
        });
        // classes are compared as sets of axes, torsion atoms up to equivalent ones
        const summary = (rotors: readonly Rotor[], name: (i: number) => number) => {
          const axisName = ({ axis }: Rotor) =>
            axis
              .map(name)
              .sort((p, q) => p - q)
              .join('-');
          return rotors
            .map((rotor) => {
              const straight = name(rotor.axis[0]) < name(rotor.axis[1]);
              const numbers = straight ? rotor.symmetryNumbers : rotor.symmetryNumbers.toReversed();
              const torsion = (straight ? rotor.torsion : rotor.torsion.toReversed()).map((i) => flat.symmetryClasses[name(i)]);
              const alike = rotors
                .filter((other) => other.equivalenceClass === rotor.equivalenceClass)
                .map(axisName)
                .sort();
              return `${axisName(rotor)} ${numbers} ${rotor.kind} ${rotor.periodicity} [${torsion}] ${alike}`;
            })
            .sort();
        };
        expect(
          summary(findRotors(renumbered(flat, order)), (i) => back[i]),
          name,
        ).toEqual(summary(findRotors(flat), (i) => i));
      }
    }
  });
});

describe('symmetry of rotors', () => {
  const rotorsOf = (smiles: string) => findRotors(moleculeFromSmiles(smiles));
  it('takes isotopes into account', () => {
    expect(rotorsOf('[2H]C([2H])([2H])O')[0]).toMatchObject({ kind: 'terminal methyl', symmetryNumbers: [3, 1] });
    expect(rotorsOf('[2H]CO')[0].symmetryNumbers).toEqual([1, 1]);
    expect(rotorsOf('[13CH3]CC').map(({ equivalenceClass }) => equivalenceClass)).toEqual([0, 1]);
  });
  it('marks rotors that only the mirror image relates', () => {
    const hydroxyls = (smiles: string) =>
      rotorsOf(smiles)
        .filter(({ kind }) => kind === 'hydroxyl')
        .map(({ mirrored }) => mirrored);
    expect(hydroxyls('C[C@@H](O)[C@H](O)C')).toEqual([false, false]);
    expect(hydroxyls('C[C@@H](O)[C@@H](O)C')).toEqual([false, true]);
    // enantiotopic methyls
    expect(
      rotorsOf('CC(C)O')
        .slice(0, 2)
        .map(({ mirrored }) => mirrored),
    ).toEqual([false, true]);
    expect(rotorsOf('CCCC').map(({ mirrored }) => mirrored)).toEqual([false, false, false]);
  });
  it.each([
    'C[C@@H](O)[C@H](O)C',
    'C[C@@H](O)[C@@H](O)C',
    'CC(C)[C@@H](O)[C@H](O)C(C)C',
    'OC[C@H]1CC[C@@H](CO)CC1',
    'OC[C@@H]1CC[C@@H]1CO',
    'OC[C@@H]1CC[C@H]1CO',
    'CC/C=C/CC',
    'C[C@H](F)c1ccc([C@@H](C)F)cc1',
    'CC=C=CC',
    'C[C@H](O)C(C)C',
  ])('leads to a structure of the stated configuration: %s', (smiles) => {
    const molecule = moleculeFromSmiles(smiles);
    const x = embed(molecule, { seed: 1 });
    const stated = perceiveStereo(molecule, x);
    for (const { relabelling, mirrored } of findRotors(molecule)) {
      const copy = new Float64Array(x.length);
      relabelling.forEach((target, i) => {
        copy.set([mirrored ? -x[3 * i] : x[3 * i], x[3 * i + 1], x[3 * i + 2]], 3 * target);
      });
      expect(perceiveStereo(molecule, copy)).toEqual(stated);
    }
  });
  it('does not count a phenyl whose sides differ in configuration alone', () => {
    // 2,6-bis(1-fluoroethyl)phenol: with both centres alike the ring has a twofold axis, with opposite ones it has not
    const ring = (smiles: string) => rotorsOf(smiles).find(({ kind }) => kind === 'hydroxyl')?.symmetryNumbers;
    expect(ring('Oc1c([C@H](F)C)cccc1[C@H](F)C')).not.toEqual(ring('Oc1c([C@H](F)C)cccc1[C@@H](F)C'));
  });
  it('keeps equivalent rotors apart rather than guess when the group is too large', () => {
    // four tert-butyl groups on silicon, 24 * 6 ** 4 permutations
    const crowded = rotorsOf('CC(C)(C)[Si](C(C)(C)C)(C(C)(C)C)C(C)(C)C');
    expect(crowded).toHaveLength(16);
    expect(new Set(crowded.map(({ equivalenceClass }) => equivalenceClass)).size).toBe(16);
    expect(crowded.filter(({ kind }) => kind === 'symmetric top')).toHaveLength(4);
  });
});

describe('the rotor of a given torsion', () => {
  it('keeps the torsion and its direction', () => {
    const anisole = moleculeFromSmiles('COc1ccccc1');
    const rotor = rotorOfTorsion(anisole, [3, 2, 1, 0]);
    expect(rotor).toMatchObject({
      axis: [2, 1],
      torsion: [3, 2, 1, 0],
      kind: 'aryl ether',
      symmetryNumbers: [2, 1],
      periodicity: 180,
      equivalenceClass: 1,
    });
    expect([...rotor.sides[1]]).toEqual([0, 1, 8, 9, 10]);
  });
  it('accepts a double bond and a ring bond under their names', () => {
    const butene = rotorOfTorsion(moleculeFromSmiles('CC=CC'), [0, 1, 2, 3]);
    expect(butene).toMatchObject({ kind: 'double bond', axis: [1, 2], equivalenceClass: 1, periodicity: 360 });
    expect(butene.sides.map((side) => side.length)).toEqual([6, 6]);
    expect(rotorOfTorsion(moleculeFromSmiles('C1CCCCC1'), [0, 1, 2, 3])).toMatchObject({ kind: 'ring bond', symmetryNumbers: [1, 1] });
  });
});

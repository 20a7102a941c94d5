/** Bonds whose two sides turn against each other. */
import { type Molecule, neighboursOf, sidesOfBond } from '@tordial/geometry';
import { atomShape } from './atom-shape.js';
import { bondKinds, type RotorKind } from './bond-kind.js';
import { type Torsion, torsionOfAxis } from './defining-torsion.js';
import { type RotorEquivalence, rotorEquivalence } from './equivalence.js';
import { profilePeriod, symmetryNumberOfSide } from './symmetry-number.js';

export interface Rotor extends RotorEquivalence {
  /** The two atoms of the bond. */
  readonly axis: readonly [number, number];
  /** The four atoms whose torsion angle describes it; the inner two are the axis in its order. */
  readonly torsion: Torsion;
  /** What a chemist calls the bond. */
  readonly kind: RotorKind;
  /** Atoms that turn with the axis's first and second atom, ascending, the axis's own included. */
  readonly sides: readonly [Int32Array, Int32Array];
  /** Rotational symmetry of each side about the axis: methyl 3, phenyl 2. */
  readonly symmetryNumbers: readonly [number, number];
  /** Degrees after which the profile of two rigid, symmetric sides repeats: 120 for ethane, 60 for toluene, 360 without symmetry. */
  readonly periodicity: number;
}

/**
 * The rotors of a molecule, ascending by axis, the axis's lower atom first.
 *
 * A rotor is a single bond outside rings whose atoms both have a further neighbour. Bonds to a linear centre (the C-C of C-C#C and
 * C-C#N) are none, as no torsion angle is defined about them; the two ends of an alkyne turn almost freely about the whole linear unit.
 * Amides, esters and other partial double bonds are listed.
 */
export function findRotors(molecule: Molecule): Rotor[] {
  const { bonds } = molecule;
  const kindOf = bondKinds(molecule);
  const found: Omit<Rotor, keyof RotorEquivalence>[] = [];
  for (let n = 0; n < bonds.count; n++)
    if (bonds.order[n] === 1 && canTurn(molecule, bonds.a[n], bonds.b[n])) {
      const sides = sidesOfBond(molecule, bonds.a[n], bonds.b[n]);
      if (sides) found.push(describe(molecule, [bonds.a[n], bonds.b[n]], sides, kindOf));
    }
  found.sort((p, q) => p.axis[0] - q.axis[0] || p.axis[1] - q.axis[1]);
  const classes = rotorEquivalence(
    molecule,
    found.map(({ axis }) => axis),
  );
  return found.map((rotor, n) => ({ ...rotor, ...classes[n] }));
}

/**
 * The rotor about the inner bond of a torsion, with that torsion as the defining one and its direction as the axis's. The torsion must
 * have passed `checkTorsion`. A double bond is accepted: asked for by name, it can be turned.
 */
export function rotorOfTorsion(molecule: Molecule, torsion: Torsion): Rotor {
  const [, a, b] = torsion;
  const rotors = findRotors(molecule);
  const listed = rotors.find(({ axis }) => (axis[0] === a && axis[1] === b) || (axis[0] === b && axis[1] === a));
  if (listed) {
    const straight = listed.axis[0] === a;
    const [first, second] = listed.sides;
    const [p, q] = listed.symmetryNumbers;
    return {
      ...listed,
      axis: [a, b],
      torsion,
      sides: straight ? [first, second] : [second, first],
      symmetryNumbers: straight ? [p, q] : [q, p],
    };
  }
  const sides = sidesOfBond(molecule, a, b) ?? { a: Int32Array.of(a), b: Int32Array.of(b) };
  return {
    ...describe(molecule, [a, b], sides, bondKinds(molecule)),
    torsion,
    equivalenceClass: new Set(rotors.map((rotor) => rotor.equivalenceClass)).size,
    relabelling: identity(molecule),
    mirrored: false,
  };
}

/** Whether both atoms have a further neighbour and neither is a linear centre. */
function canTurn(molecule: Molecule, a: number, b: number): boolean {
  return [a, b].every((i) => neighboursOf(molecule, i).length > 1 && atomShape(molecule, i) !== 'linear');
}

function describe(
  molecule: Molecule,
  axis: readonly [number, number],
  sides: { a: Int32Array; b: Int32Array },
  kindOf: ReturnType<typeof bondKinds>,
): Omit<Rotor, keyof RotorEquivalence> {
  const [a, b] = axis;
  const symmetryNumbers = [symmetryNumberOfSide(molecule, a, b, sides.a), symmetryNumberOfSide(molecule, b, a, sides.b)] as const;
  return {
    axis,
    torsion: torsionOfAxis(molecule, a, b),
    kind: kindOf(a, b, symmetryNumbers),
    sides: [sides.a, sides.b],
    symmetryNumbers,
    periodicity: profilePeriod(...symmetryNumbers),
  };
}

const identity = ({ atomCount }: Molecule): Int32Array => Int32Array.from({ length: atomCount }, (_, i) => i);

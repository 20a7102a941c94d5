/** The rotors next to a driven one, turned on: geometries of other branches that a scan would not come upon by itself. */
import { bondBetween, type Coordinates, type Molecule, neighboursOf, radians, sidesOfBond, turnAbout } from '@tordial/geometry';
import type { DrivenRotor } from './driven-rotor.js';
import { atomShape } from './rotors/atom-shape.js';
import { symmetryNumberOfSide } from './rotors/symmetry-number.js';

export interface NeighbouringRotor {
  /** An axis atom of the driven rotor, and the atom next to it that turns with all behind it. */
  readonly axis: readonly [number, number];
  readonly atoms: Int32Array;
  /** Turns that lead to another geometry, radian. */
  readonly turns: readonly number[];
}

/** Degrees between the turns that are tried: the wells of a methyl against a tetrahedral and against a planar atom are half of its period apart. */
const TURN = 60;

/** The single bonds outside rings that start at the driven rotor's axis and can be turned, with the turns that its symmetry leaves different. */
export function neighbouringRotors(molecule: Molecule, { torsion: [, a, b] }: DrivenRotor): NeighbouringRotor[] {
  const found: NeighbouringRotor[] = [];
  for (const [near, far] of [
    [a, b],
    [b, a],
  ])
    for (const next of neighboursOf(molecule, near)) {
      if (next === far || neighboursOf(molecule, next).length < 2 || atomShape(molecule, next) === 'linear') continue;
      if (molecule.bonds.order[bondBetween(molecule, near, next)] !== 1) continue;
      const sides = sidesOfBond(molecule, near, next);
      if (!sides) continue;
      const period = 360 / symmetryNumberOfSide(molecule, next, near, sides.b);
      const turns: number[] = [];
      for (let turn = TURN; turn < period - 1; turn += TURN) turns.push(radians(turn));
      found.push({ axis: [near, next], atoms: sides.b, turns });
    }
  return found;
}

/** One geometry for each turn of each neighbouring rotor. */
export function turnedNeighbours(rotors: readonly NeighbouringRotor[], x: Coordinates): Coordinates[] {
  return rotors.flatMap(({ axis, atoms, turns }) =>
    turns.map((turn) => {
      const turned = x.slice();
      turnAbout(turned, axis[0], axis[1], atoms, turn);
      return turned;
    }),
  );
}

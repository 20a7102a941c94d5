/** Other rotors of a molecule, turned on: geometries of branches that a scan of one rotor would not come upon by itself. */
import { type Coordinates, type Molecule, radians, turnAbout } from '@tordial/geometry';
import type { DrivenRotor } from './driven-rotor.js';
import { findRotors } from './rotors/rotor.js';

export interface OtherRotor {
  /** From the side that stays to the side that turns, which has no part in the driven axis. */
  readonly axis: readonly [number, number];
  readonly atoms: Int32Array;
  /** Turns that lead to another geometry, radian. */
  readonly turns: readonly number[];
  /** Whether it starts at the driven axis. */
  readonly isNext: boolean;
}

/** Degrees between the turns that are tried: the wells of a methyl against a tetrahedral and against a planar atom are half of its period apart. */
const TURN = 60;

/** All rotors but the driven one, with the turns that their symmetry leaves different; those next to the driven axis first. */
export function otherRotors(molecule: Molecule, { torsion: [, a, b] }: DrivenRotor): OtherRotor[] {
  const rotors = findRotors(molecule).flatMap(({ axis: [p, q], sides: [sideP, sideQ], symmetryNumbers: [atP, atQ] }) => {
    if (Math.min(p, q) === Math.min(a, b) && Math.max(p, q) === Math.max(a, b)) return [];
    // the side without the driven axis turns, so that the driven torsion stays as it is
    const straight = sideP.includes(a) && sideP.includes(b);
    const [near, far, atoms, symmetry] = straight ? [p, q, sideQ, atQ] : [q, p, sideP, atP];
    const turns: number[] = [];
    for (let turn = TURN; turn < 360 / symmetry - 1; turn += TURN) turns.push(radians(turn));
    return [{ axis: [near, far] as const, atoms, turns, isNext: near === a || near === b }];
  });
  return [...rotors.filter(({ isNext }) => isNext), ...rotors.filter(({ isNext }) => !isNext)];
}

/** One geometry for each turn of each rotor. */
export function turnedRotors(rotors: readonly OtherRotor[], x: Coordinates): Coordinates[] {
  return rotors.flatMap(({ axis, atoms, turns }) =>
    turns.map((turn) => {
      const turned = x.slice();
      turnAbout(turned, axis[0], axis[1], atoms, turn);
      return turned;
    }),
  );
}

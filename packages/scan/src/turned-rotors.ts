/** Other rotors of a molecule, turned on: geometries of branches that a scan of one rotor would not come upon by itself. */
import { type Coordinates, type Molecule, neighboursOf, radians, turnAbout } from '@tordial/geometry';
import type { DrivenRotor } from './driven-rotor.js';
import { findRotors } from './rotors/rotor.js';

export interface OtherRotor {
  /** From the side that stays to the side that turns, which has no part in the driven axis. */
  readonly axis: readonly [number, number];
  readonly atoms: Int32Array;
  /** Turns that lead to another geometry, radian. */
  readonly turns: readonly number[];
  /** Bonds between the driven axis and this one; 0 for a neighbour. */
  readonly distance: number;
}

/** Degrees between the turns that are tried: the wells of a methyl against a tetrahedral and against a planar atom are half of its period apart. */
const TURN = 60;
/** Rotors farther off than this many others bear little on the driven one's profile. */
const MOST = 12;

/** The rotors nearest to the driven one, twelve at most, with the turns that their symmetry leaves different. */
export function otherRotors(molecule: Molecule, { torsion: [, a, b] }: DrivenRotor): OtherRotor[] {
  const steps = stepsFrom(molecule, [a, b]);
  const rotors = findRotors(molecule).flatMap(({ axis: [p, q], sides: [sideP, sideQ], symmetryNumbers: [atP, atQ] }) => {
    if (Math.min(p, q) === Math.min(a, b) && Math.max(p, q) === Math.max(a, b)) return [];
    // the side without the driven axis turns, so that the driven torsion stays as it is
    const straight = sideP.includes(a) && sideP.includes(b);
    const [near, far, atoms, symmetry] = straight ? [p, q, sideQ, atQ] : [q, p, sideP, atP];
    const turns: number[] = [];
    for (let turn = TURN; turn < 360 / symmetry - 1; turn += TURN) turns.push(radians(turn));
    return [{ axis: [near, far] as const, atoms, turns, distance: steps[near] }];
  });
  return rotors.sort((p, q) => p.distance - q.distance).slice(0, MOST);
}

/** Bonds from the nearest of the atoms `from` to each atom. */
function stepsFrom(molecule: Molecule, from: readonly number[]): Int32Array {
  const steps = new Int32Array(molecule.atomCount).fill(molecule.atomCount);
  const queue = [...from];
  for (const i of from) steps[i] = 0;
  for (const i of queue)
    for (const j of neighboursOf(molecule, i)) {
      if (steps[j] <= steps[i] + 1) continue;
      steps[j] = steps[i] + 1;
      queue.push(j);
    }
  return steps;
}

/** One geometry for each way to turn so many of the rotors at once, each by every second of its turns: by 120 degrees, from well to well. */
export function turnedTogether(rotors: readonly OtherRotor[], count: number, x: Coordinates): Coordinates[] {
  if (count === 0) return [x];
  return rotors.flatMap((rotor, n) => {
    const coarse = { ...rotor, turns: rotor.turns.filter((_, turn) => turn % 2 === 1) };
    return turnedRotors([coarse], x).flatMap((turned) => turnedTogether(rotors.slice(n + 1), count - 1, turned));
  });
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

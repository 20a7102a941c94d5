/** Whether four atoms are a torsion that can be driven, and what to say when they are not. */
import { bondBetween, type Molecule, sidesOfBond, TordialError } from '@tordial/geometry';
import { atomShape } from './atom-shape.js';
import type { Torsion } from './defining-torsion.js';
import { findRotors, type Rotor } from './rotor.js';

/** Torsions listed in a message at most. */
const SUGGESTIONS = 8;

/**
 * Returns the four atoms as a torsion. Throws `torsion/index` when there are not four different atoms of the molecule,
 * `torsion/chain` when they are not bonded in a chain, `torsion/ring` when the inner bond is part of a ring (unless `rings` are taken, as a
 * scan over a range does), `torsion/linear` when an inner atom is a linear centre. Each message names the atoms and lists torsions that
 * would work.
 */
export function checkTorsion(molecule: Molecule, atoms: readonly number[], { rings = false } = {}): Torsion {
  const { atomCount } = molecule;
  const written = atoms.join(',');
  if (atoms.length !== 4) throw new TordialError('torsion/index', `a torsion is four atoms, ${atoms.length} were given (${written})`);
  const outside = atoms.find((i) => !Number.isInteger(i) || i < 0 || i >= atomCount);
  if (outside !== undefined)
    throw new TordialError(
      'torsion/index',
      `torsion ${written}: there is no atom ${outside}; the molecule's ${atomCount} atoms count from 0 to ${atomCount - 1}, added hydrogens last`,
    );
  const [i, j, k, l] = atoms;
  const torsion: Torsion = [i, j, k, l];
  const twice = atoms.find((atom, n) => atoms.indexOf(atom) !== n);
  if (twice !== undefined) throw new TordialError('torsion/index', `torsion ${written} names atom ${twice} twice`, { atom: twice });
  for (const [p, q] of [
    [i, j],
    [j, k],
    [k, l],
  ])
    if (bondBetween(molecule, p, q) < 0)
      throw new TordialError(
        'torsion/chain',
        `torsion ${written}: atoms ${p} and ${q} are not bonded, the four must be bonded in a chain; ${suggestions(molecule, atoms)}`,
        { atom: p },
      );
  if (!rings && sidesOfBond(molecule, j, k) === null)
    throw new TordialError(
      'torsion/ring',
      `torsion ${written}: the bond between ${j} and ${k} is part of a ring, so that its sides cannot turn freely; drive it over a range of angles (--range FROM:TO, such as --range -60:60; \`range\` in the library); ${suggestions(molecule, atoms)}`,
      { atom: j, bond: bondBetween(molecule, j, k) },
    );
  const linear = [j, k].find((atom) => atomShape(molecule, atom) === 'linear');
  if (linear !== undefined)
    throw new TordialError(
      'torsion/linear',
      `torsion ${written}: atom ${linear} is a linear centre, so that the angle is not defined; ${suggestions(molecule, atoms)}`,
      { atom: linear },
    );
  return torsion;
}

/** The rotor about the requested inner bond comes first, then those that share most atoms with the request. */
function suggestions(molecule: Molecule, atoms: readonly number[]): string {
  const rotors = findRotors(molecule);
  if (rotors.length === 0) return 'the molecule has no bond that turns';
  const [, j, k] = atoms;
  const nearness = ({ axis, torsion }: Rotor) =>
    (axis.includes(j) && axis.includes(k) ? 4 : 0) + torsion.filter((atom) => atoms.includes(atom)).length;
  const ranked = rotors.toSorted((p, q) => nearness(q) - nearness(p));
  const listed = ranked.slice(0, SUGGESTIONS).map(({ torsion, kind }) => `${torsion.join(',')} (${kind})`);
  const more = ranked.length > SUGGESTIONS ? ` and ${ranked.length - SUGGESTIONS} more` : '';
  return `torsions that can be driven: ${listed.join('; ')}${more}`;
}

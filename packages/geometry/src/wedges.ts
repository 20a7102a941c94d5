/**
 * Configuration from a flat drawing: wedges at stereocentres and axes, the shape of double bonds.
 *
 * A wedge lifts the far end of its bond by a bond length; the handedness of the drawn bonds then follows as in three dimensions. A hidden
 * hydrogen or lone pair lies on the side that three drawn bonds leave free; where they leave none (two of them in a line, the third
 * lifted) the drawing is ambiguous and the centre stays open. Source of the reading of wedges: J. Brecher, Graphical
 * representation of stereochemical configuration (IUPAC Recommendations 2006), Pure Appl. Chem. 78, 1897 (2006).
 */

import type { StereoTable } from './molecule.js';
import type { WrittenMolfile } from './molfile-syntax.js';
import { perceiveStereo, tripleSign } from './stereo-perception.js';

/** Volume of unit vectors below which a drawing does not show a handedness. */
const FLAT_DRAWING = 0.002;

/** The table with the signs that the drawing shows; elements without wedges, or with contradicting or wavy ones, stay open. */
export function drawnStereo(possible: StereoTable, { atoms, bonds }: WrittenMolfile): StereoTable {
  const wavy = new Set<number>();
  const crossed = new Set<string>();
  const lifts = new Map<number, Map<number, 1 | -1>>();
  for (const { a, b, order, wedge } of bonds) {
    if (wedge === '') continue;
    if (wedge === 'either' && order === 2) crossed.add(`${Math.min(a, b)} ${Math.max(a, b)}`);
    else if (wedge === 'either') wavy.add(a);
    else lifts.set(a, (lifts.get(a) ?? new Map()).set(b, wedge === 'up' ? 1 : -1));
  }

  /** Direction of a bond in the drawing, of unit length in the plane, with the depth its wedge gives it. */
  const drawn = (from: number, to: number): [number, number, number] => {
    const [x, y] = [atoms[to].x - atoms[from].x, atoms[to].y - atoms[from].y];
    const length = Math.hypot(x, y) || 1;
    return [x / length, y / length, lifts.get(from)?.get(to) ?? 0];
  };
  const isDrawn = (i: number) => i >= 0 && i < atoms.length;

  return {
    tetrahedral: possible.tetrahedral.map((centre) => {
      const { atom, neighbours } = centre;
      if (wavy.has(atom) || !lifts.has(atom) || neighbours.filter(isDrawn).length < 3) return { ...centre, sign: 0 };
      return {
        ...centre,
        sign: tripleSign(
          neighbours.filter(isDrawn).map((j) => drawn(atom, j)),
          FLAT_DRAWING,
        ),
      };
    }),
    doubleBonds: possible.doubleBonds.map((bond) => {
      if (crossed.has(`${bond.a} ${bond.b}`) || wavy.has(bond.a) || wavy.has(bond.b)) return { ...bond, cis: null };
      const side = (end: number, other: number, substituent: number, ligands: readonly number[]) => {
        const across = (j: number) => {
          const [ax, ay] = drawn(end, other);
          const [x, y] = drawn(end, j);
          return ax * y - ay * x;
        };
        if (isDrawn(substituent)) return across(substituent);
        const rest = ligands.filter((j) => isDrawn(j) && j !== other);
        return rest.length === 1 ? -across(rest[0]) : 0;
      };
      const around = (i: number) => bonds.flatMap(({ a, b, order }) => (order !== 1 ? [] : a === i ? [b] : b === i ? [a] : []));
      const product = side(bond.a, bond.b, bond.substituentA, around(bond.a)) * side(bond.b, bond.a, bond.substituentB, around(bond.b));
      // seen from the other end the sides of the axis are exchanged
      return { ...bond, cis: Math.abs(product) < 0.05 ? null : product < 0 };
    }),
    axes: liftedAxes(),
  };

  function liftedAxes(): StereoTable['axes'] {
    return possible.axes.map((axis) => {
      const ends = [axis.a, axis.b].filter((i) => lifts.has(i));
      if (ends.length !== 1 || wavy.has(axis.a) || wavy.has(axis.b)) return { ...axis, sign: 0 };
      // only the axis itself is looked at: its atoms as drawn, the lifted end's ligands out of the plane
      const [lifted] = ends;
      const coordinates = new Float64Array(3 * (Math.max(axis.a, axis.b, axis.substituentA, axis.substituentB, atoms.length - 1) + 1));
      for (const [i, { x, y }] of atoms.entries()) coordinates.set([x, y, 0], 3 * i);
      const marks = lifts.get(lifted) ?? new Map<number, number>();
      const ligands = bonds.flatMap(({ a, b, order }) => (order === 1 && a === lifted ? [b] : order === 1 && b === lifted ? [a] : []));
      for (const ligand of ligands) {
        const own = marks.get(ligand);
        const others = [...marks].filter(([j]) => j !== ligand).map(([, mark]) => -mark);
        coordinates[3 * ligand + 2] = own ?? others[0] ?? 0;
      }
      return perceiveStereo({ stereo: { tetrahedral: [], doubleBonds: [], axes: [axis] } }, coordinates).axes[0];
    });
  }
}

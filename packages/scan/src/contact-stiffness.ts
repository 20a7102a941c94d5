/**
 * How stiffly two atoms that touch without a bond resist being pushed together, for the model Hessian.
 *
 * The second derivative of the buffered 14-7 potential, T. A. Halgren, J. Am. Chem. Soc. 114, 7827 (1992), with radii and well depths rounded
 * by element: the model needs the order of magnitude, of whatever potential it serves.
 */
import { type Coordinates, type Molecule, neighboursOf } from '@tordial/geometry';

/** Half the distance of the minimum, angstrom, and the well depth, kcal/mol. */
interface Contact {
  readonly radius: number;
  readonly depth: number;
}

const HYDROGEN: Contact = { radius: 1.5, depth: 0.02 };
/** Bonded to nitrogen, oxygen, fluorine or sulfur: it comes close to what it bonds to without touching. */
const POLAR_HYDROGEN: Contact = { radius: 0.6, depth: 0.02 };
const BY_ELEMENT: Readonly<Record<number, Contact>> = {
  6: { radius: 1.95, depth: 0.07 },
  7: { radius: 1.85, depth: 0.07 },
  8: { radius: 1.75, depth: 0.07 },
  9: { radius: 1.6, depth: 0.07 },
};
const OTHER: Contact = { radius: 2.05, depth: 0.07 };

/** Farther apart than this no pair is stiff enough to count, angstrom. */
const REACH = 3.5;
/** Softer than this a contact does not count, and none is stiffer than that, kcal/mol/angstrom^2. */
const LEAST = 1;
const MOST = 50;

/** Each atom's part in contacts. */
export function contactAtoms(molecule: Molecule): readonly Contact[] {
  const { atomicNumbers } = molecule;
  return Array.from(atomicNumbers, (z, i) => {
    if (z !== 1) return BY_ELEMENT[z] ?? OTHER;
    return [...neighboursOf(molecule, i)].some((j) => [7, 8, 9, 16].includes(atomicNumbers[j])) ? POLAR_HYDROGEN : HYDROGEN;
  });
}

/** The pairs of atoms (flat, the lower one first) that touch at x, and how stiffly, kcal/mol/angstrom^2; pairs with the key i * atomCount + j in `bonded` are left out. */
export function contactsAt(
  atoms: readonly Contact[],
  bonded: ReadonlySet<number>,
  x: Coordinates,
): { readonly pairs: readonly number[]; readonly stiffness: readonly number[] } {
  const count = atoms.length;
  const pairs: number[] = [];
  const stiffness: number[] = [];
  for (let i = 0; i < count; i++) {
    const xi = x[3 * i],
      yi = x[3 * i + 1],
      zi = x[3 * i + 2];
    for (let j = i + 1; j < count; j++) {
      const dx = xi - x[3 * j],
        dy = yi - x[3 * j + 1],
        dz = zi - x[3 * j + 2];
      const square = dx * dx + dy * dy + dz * dz;
      if (square > REACH * REACH || bonded.has(i * count + j)) continue;
      const size = atoms[i].radius + atoms[j].radius;
      const depth = Math.sqrt(atoms[i].depth * atoms[j].depth);
      const k = (depth / (size * size)) * bendOfWell(Math.sqrt(square) / size);
      if (k < LEAST) continue;
      pairs.push(i, j);
      stiffness.push(Math.min(k, MOST));
    }
  }
  return { pairs, stiffness };
}

/** Second derivative of the buffered 14-7 potential with depth 1 at the distance rho, in units of its minimum's. */
function bendOfWell(distance: number): number {
  // closer than half way the potential is of no use, the stiffness is cut off anyway
  const rho = Math.max(distance, 0.5);
  const b = rho + 0.07;
  const p6 = rho ** 6;
  const d = p6 * rho + 0.12;
  const outer = (1.07 / b) ** 7;
  const inner = 1.12 / d - 2;
  const innerSlope = (-7.84 * p6) / (d * d);
  const innerBend = -7.84 * ((6 * p6) / (rho * d * d) - (14 * p6 * p6) / (d * d * d));
  return outer * ((56 / (b * b)) * inner - (14 / b) * innerSlope + innerBend);
}

/**
 * Three-dimensional structures by distance geometry: bounds from the bonding, triangle smoothing, coordinates from drawn distances in
 * four dimensions, refinement against bounds and signed volumes, collapse to three, a light strain function, and a check of everything
 * that must hold; another start where something does not.
 *
 * Sources: G. M. Crippen, T. F. Havel, Distance Geometry and Molecular Conformation, Research Studies Press, Taunton (1988);
 * J. M. Blaney, J. S. Dixon, Rev. Comput. Chem. 5, 299 (1994).
 */
import { TordialError } from '../errors.js';
import { separateFragments } from '../fragments.js';
import { torsion } from '../internal-coordinates.js';
import { bondBetween, type Coordinates, type Molecule } from '../molecule.js';
import { type Random, seededRandom } from '../random.js';
import { sidesOfBond, turnAbout } from '../turn.js';
import { bondAngles } from './bond-angles.js';
import { bondLengths } from './bond-lengths.js';
import { bondDistances, distanceBounds, type IdealGeometry } from './bounds.js';
import { distanceError } from './distance-error.js';
import { structureFault } from './faults.js';
import { signedVolume, signedVolumes } from './handedness.js';
import { descend } from './lbfgs.js';
import { embedDistances, randomCoordinates } from './metric-matrix.js';
import { atomShapes } from './shapes.js';
import { sideBySide } from './side-by-side.js';
import { strain } from './strain.js';
import { smoothTriangles } from './triangle-smoothing.js';
import { turning } from './turning.js';

export interface EmbedOptions {
  /** Start of the random numbers; the same seed gives the same structure. Default 1. */
  readonly seed?: number;
  /** Starts tried for a structure before giving up. Default 60. */
  readonly attempts?: number;
}

/**
 * A three-dimensional structure of the molecule, angstrom, with the configuration that it states; what it leaves open comes out one way or the
 * other. Separate fragments stand side by side along x without contact. Throws `embed/failed` when no start gives a sound structure.
 */
export function embed(molecule: Molecule, options: EmbedOptions = {}): Coordinates {
  return embedMany(molecule, 1, options)[0];
}

/** `count` structures from one stream of random numbers, the first as `embed` gives it; they need not differ. Throws as `embed` does. */
export function embedMany(molecule: Molecule, count: number, { seed = 1, attempts = 60 }: EmbedOptions = {}): Coordinates[] {
  const fragments = separateFragments(molecule).map(({ atoms, molecule: part }) => ({ atoms, next: embedder(part) }));
  const random = seededRandom(seed);
  return Array.from({ length: count }, () =>
    sideBySide(
      molecule,
      fragments.map(({ atoms, next }) => ({ atoms, x: next(random, attempts) })),
    ),
  );
}

/** Atoms from which on a random start is tried first. */
const LARGE = 50;

/** Times that the strain is lowered when flat bonds turn away from their side meanwhile. */
const PASSES = 3;

/** Makes structures of one connected molecule; what depends on the bonding alone is worked out once. */
function embedder(molecule: Molecule): (random: Random, attempts: number) => Coordinates {
  const shapes = atomShapes(molecule);
  const lengths = bondLengths(molecule, shapes);
  const turns = turning(molecule, shapes);
  const ideal: IdealGeometry = {
    shapes,
    lengths,
    angles: bondAngles(molecule, shapes),
    flat: turns.flat,
    crossed: turns.crossed,
    apart: bondDistances(molecule),
  };
  const bounds = distanceBounds(molecule, ideal);
  smoothTriangles(bounds);
  const volumes = signedVolumes(molecule, bounds);
  const loose = distanceError(bounds, volumes, { volume: 2, fourth: 0.02 });
  const flattening = distanceError(bounds, volumes, { volume: 1, fourth: 1 });
  const strained = strain(molecule, ideal, turns, volumes);
  const turnable = turns.flat.flatMap((entry) => {
    if (entry.cis === null || bondBetween(molecule, entry.a, entry.b) < 0) return [];
    const sides = sidesOfBond(molecule, entry.a, entry.b);
    return sides ? [{ ...entry, side: sides.b }] : [];
  });
  const { atomCount } = molecule;

  return (random, attempts) => {
    if (atomCount === 1) return new Float64Array(3);
    let reason = '';
    for (let attempt = 0; attempt < attempts; attempt++) {
      // drawn distances lead small molecules to a structure more often, a random box large ones: begin with that, then take turns
      const x4 = (attempt % 2 === 0) === atomCount < LARGE ? embedDistances(bounds, random) : randomCoordinates(atomCount, random);
      if (mirrored(x4)) for (let p = 0; p < x4.length; p += 4) x4[p] = -x4[p];
      descend(loose, x4, { iterations: 200, gradient: 1e-3, decrease: 0.03, stride: 1 });
      descend(flattening, x4, { iterations: 100, gradient: 1e-3, decrease: 0.03, stride: 1 });
      const x = new Float64Array(3 * atomCount);
      for (let i = 0; i < atomCount; i++) for (let c = 0; c < 3; c++) x[3 * i + c] = x4[4 * i + c];
      for (let pass = 0; pass < PASSES; pass++) {
        if (!turnRound(x) && pass > 0) break;
        descend(strained, x, { iterations: 600, gradient: 0.3, decrease: 0.3, stride: 0.3 });
      }
      const fault = structureFault(molecule, ideal, turns, volumes, x);
      if (fault === null) return centred(x);
      reason = fault;
    }
    throw new TordialError(
      'embed/failed',
      `no structure found in ${attempts} attempts: ${reason}; check the stated configuration, or try another seed or more attempts`,
    );
  };

  /** Flat bonds outside of rings that came out on the wrong side are turned round: what they then touch, the strain pushes apart. Says whether any was. */
  function turnRound(x: Coordinates): boolean {
    let turned = false;
    for (const { a, b, atA, atB, cis, side } of turnable) {
      const away = (cis ? 0 : Math.PI) - torsion(x, atA, a, b, atB);
      if (Math.cos(away) >= 0) continue;
      turnAbout(x, a, b, side, away);
      turned = true;
    }
    return turned;
  }

  /** More of the signed volumes have the wrong sign than the right one. */
  function mirrored(x: Float64Array): boolean {
    let balance = 0;
    for (let n = 0; n < volumes.count; n++) balance += Math.sign(signedVolume(volumes, n, x, 4) * volumes.least[n]);
    return balance < 0;
  }
}

/** Moves the centre of the atoms to the origin, in place. */
function centred(x: Coordinates): Coordinates {
  const count = x.length / 3;
  for (let c = 0; c < 3; c++) {
    let mean = 0;
    for (let p = c; p < x.length; p += 3) mean += x[p] / count;
    for (let p = c; p < x.length; p += 3) x[p] -= mean;
  }
  return x;
}

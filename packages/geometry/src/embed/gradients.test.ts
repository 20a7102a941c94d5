import { describe, expect, it } from 'vitest';
import { seededRandom } from '../random.js';
import { moleculeFromSmiles } from '../smiles.js';
import { bondAngles } from './bond-angles.js';
import { bondLengths } from './bond-lengths.js';
import { bondDistances, distanceBounds, type IdealGeometry } from './bounds.js';
import { distanceError } from './distance-error.js';
import { addVolumeError, signedVolumes } from './handedness.js';
import type { ErrorFunction } from './lbfgs.js';
import { randomCoordinates } from './metric-matrix.js';
import { atomShapes } from './shapes.js';
import { strain } from './strain.js';
import { smoothTriangles } from './triangle-smoothing.js';
import { turning } from './turning.js';

// every kind of term: flat and open double bonds, an allene, an ester, a stereocentre, a sulfone, a hypervalent centre, a straight angle
const molecule = moleculeFromSmiles('CC=C=C(C)C(=O)O[C@H](C#N)/C=C/c1cc(S(F)(F)(F)(F)F)ccc1S(=O)(=O)N');
const shapes = atomShapes(molecule);
const turns = turning(molecule, shapes);
const ideal: IdealGeometry = {
  shapes,
  lengths: bondLengths(molecule, shapes),
  angles: bondAngles(molecule, shapes),
  flat: turns.flat,
  crossed: turns.crossed,
  apart: bondDistances(molecule),
};
const bounds = distanceBounds(molecule, ideal);
smoothTriangles(bounds);
const volumes = signedVolumes(molecule, bounds);

/** Largest deviation of the gradient from central differences, relative to its own largest component. */
function worst(error: ErrorFunction, x: Float64Array): number {
  const gradient = new Float64Array(x.length);
  const spare = new Float64Array(x.length);
  error(x, gradient);
  const scale = Math.max(...gradient.map(Math.abs));
  let most = 0;
  for (let i = 0; i < x.length; i++) {
    const step = 1e-5;
    const at = x[i];
    x[i] = at + step;
    const above = error(x, spare);
    x[i] = at - step;
    const below = error(x, spare);
    x[i] = at;
    most = Math.max(most, Math.abs((above - below) / (2 * step) - gradient[i]));
  }
  return most / scale;
}

describe('gradients of the embedding against central differences', () => {
  it('distance error in four dimensions', () => {
    const x = randomCoordinates(molecule.atomCount, seededRandom(3));
    expect(worst(distanceError(bounds, volumes, { volume: 2, fourth: 0.3 }), x)).toBeLessThan(1e-6);
  });
  it('signed volumes', () => {
    // drawn together, so that every volume is too small
    const x = randomCoordinates(molecule.atomCount, seededRandom(4)).map((v) => 0.2 * v);
    const error: ErrorFunction = (at, gradient) => {
      gradient.fill(0);
      return addVolumeError(volumes, at, 4, 1, gradient);
    };
    expect(error(x, new Float64Array(x.length))).toBeGreaterThan(0);
    expect(worst(error, x)).toBeLessThan(1e-6);
  });
  it('strain in three dimensions', () => {
    for (const seed of [5, 6, 7]) {
      const random = seededRandom(seed);
      const x = Float64Array.from({ length: 3 * molecule.atomCount }, () => 8 * random.uniform());
      expect(worst(strain(molecule, ideal, turns, volumes), x)).toBeLessThan(1e-6);
    }
  });
});

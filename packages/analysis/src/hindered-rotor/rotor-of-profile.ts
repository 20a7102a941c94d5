/** A profile as a hindered rotor: its potential and its reduced moment along the turn. */
import { type Note, radians, TordialError } from '@tordial/geometry';
import { energyAt, type ProfileDocument } from '@tordial/scan';
import { WAVENUMBER_PER_KCAL } from '../constants.js';
import { massesOfDocument, moleculeOfDocument } from '../document-molecule.js';
import { soundCurve } from '../profile-checks.js';
import { rotamers } from '../rotamers.js';
import type { HinderedRotor } from './hindered-rotor.js';
import { type PeriodicSeries, seriesOfFunction, seriesOfSamples, withoutNoise } from './periodic-series.js';
import {
  eastRadomMoment,
  kineticMoment,
  type PathPoint,
  pathTangent,
  pitzerGwinnMoment,
  rigidTangent,
  rotationalConstant,
} from './reduced-moment.js';

/** Reduced moments (amu angstrom^2) at one angle by each way. */
export interface ReducedMoments {
  /** Degrees. */
  readonly angle: number;
  /** Of Pitzer and Gwinn, where one side is a symmetric top; null otherwise. */
  readonly pitzerGwinn: number | null;
  /** I(2,3) of East and Radom. */
  readonly eastRadom: number;
  /** Kinetic moment of turning rigidly: exact for that. */
  readonly rigid: number;
  /** Kinetic moment along the profile's own path; that of turning rigidly for a rigid scan. */
  readonly path: number;
}

/** Which of the moments the levels are calculated with. */
export type MomentKind = 'eastRadom' | 'rigid' | 'path';

/** A profile's rotor, ready for `hinderedRotor`. */
export interface ProfileRotor extends HinderedRotor {
  readonly moments: readonly ReducedMoments[];
  readonly momentKind: MomentKind;
  readonly notes: readonly Note[];
}

/**
 * The hindered rotor of a profile: the potential from its Hermite curve, B along the turn from the moments of its geometries, and the internal symmetry
 * number from the wells that are identical; both series are made as symmetric as that number says. That number and the external one of the same well
 * are complements: what turns the molecule as a whole is in the latter.
 *
 * `momentKind` is `rigid` when left out: exact for a bond that turns while all else stands still. I(2,3) turns the sides about the line through their
 * centres of mass instead, and about a bond far from that line it can be half as large. `path` counts what relaxes along, with its noise.
 *
 * Throws as `soundCurve` does, `rotor/angles` when the points are not evenly spaced, `rotor/moment` when a moment vanishes.
 */
export function rotorOfProfile(document: ProfileDocument, momentKind: MomentKind = 'rigid'): ProfileRotor {
  const curve = soundCurve(document);
  const { points } = document;
  const moments = momentsOfProfile(document);
  const { wells } = rotamers(document);
  const lowest = wells.reduce((best, well) => (well.energy < best.energy ? well : best));
  const step = 360 / moments.length;
  if (moments.some(({ angle }, n) => Math.abs(angle - moments[0].angle - n * step) > 1e-6))
    throw new TordialError('rotor/angles', 'the points are not evenly spaced round the turn: scan with one step');
  const notes: Note[] = [];
  if (points.some((point) => point.breakAfter))
    notes.push({
      code: 'rotor/branches',
      message:
        'the envelope passes between branches: other parts of the molecule rearrange there, and one rotor with one potential is a poor picture of it',
    });
  const symmetryNumber = lowest.identical.length + 1;
  const places = [lowest, ...lowest.identical.map((i) => wells[i])].map((well) => well.angle);
  const symmetric = (series: PeriodicSeries): PeriodicSeries => (evenlySpaced(places) ? everyNth(series, symmetryNumber) : series);
  return {
    // as many harmonics as points: what the curve has beyond comes from its kinks and from where its pieces meet, and means nothing
    potential: symmetric(
      withoutNoise(
        seriesOfFunction((phi) => energyAt(curve, (phi * 180) / Math.PI) * WAVENUMBER_PER_KCAL, 1024, points.length),
        ROUNDING,
      ),
    ),
    // a third of the harmonics that the points allow: the rest is noise of the relaxation
    constant: symmetric(
      withoutNoise(
        seriesOfSamples(
          moments.map((moment) => rotationalConstant(moment[momentKind])),
          radians(moments[0].angle),
          Math.floor(points.length / 6),
        ),
        ROUNDING,
      ),
    ),
    symmetryNumber,
    moments,
    momentKind,
    notes,
  };
}

/** Harmonics this small beside the largest come from the six decimals of a document, and would hide a symmetry. */
const ROUNDING = 3e-6;

/** Degrees within which identical wells count as evenly spaced: the atom that is driven leads its equals a little. */
const UNEVEN = 5;

function evenlySpaced(angles: readonly number[]): boolean {
  const count = angles.length;
  const steps = angles.map((angle) => ((angle - angles[0]) * count) / 360);
  const places = new Set(steps.map((step) => ((Math.round(step) % count) + count) % count));
  return places.size === count && steps.every((step) => (Math.abs(step - Math.round(step)) * 360) / count < UNEVEN);
}

/** The part of a series with period 2 pi / n: identical positions make a turn n-fold, however the driven atom was chosen. */
function everyNth({ cosine, sine }: PeriodicSeries, n: number): PeriodicSeries {
  const keep = (value: number, k: number): number => (k % n === 0 ? value : 0);
  return { cosine: cosine.map(keep), sine: sine.map(keep) };
}

/** The reduced moments at every point of a profile. */
export function momentsOfProfile({ molecule, rotor, points, settings }: ProfileDocument): ReducedMoments[] {
  const masses = massesOfDocument(molecule);
  const kinds = moleculeOfDocument(molecule).symmetryClasses;
  const { axis, sides } = rotor;
  const path: PathPoint[] = points.map(({ angle, coordinates, breakAfter }) => ({
    angle: radians(angle),
    coordinates: Float64Array.from(coordinates),
    breakAfter,
  }));
  return path.map(({ coordinates }, i) => {
    const rigid = kineticMoment(coordinates, masses, rigidTangent(coordinates, axis, sides[1]));
    return {
      angle: points[i].angle,
      pitzerGwinn: symmetricTop(coordinates, masses, axis, sides),
      eastRadom: eastRadomMoment(coordinates, masses, sides),
      rigid,
      path: settings.kind === 'rigid' ? rigid : kineticMoment(coordinates, masses, pathTangent(path, i, masses, axis, sides[1], kinds)),
    };
  });
}

function symmetricTop(
  x: Float64Array,
  masses: Float64Array,
  axis: readonly [number, number],
  sides: ProfileDocument['rotor']['sides'],
): number | null {
  for (const side of sides) {
    try {
      return pitzerGwinnMoment(x, masses, axis, side);
    } catch (error) {
      if (!(error instanceof TordialError && error.code === 'rotor/top')) throw error;
    }
  }
  return null;
}

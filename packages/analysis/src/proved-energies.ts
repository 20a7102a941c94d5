/** From stationary points that have been proved (wells relaxed without constraint, saddles refined, Hessians at both) to what an analysis takes. */
import { type Coordinates, degrees, type Note, radians, TordialError } from '@tordial/geometry';
import { energyAt, type ProfileDocument } from '@tordial/scan';
import { WAVENUMBER_PER_KCAL } from './constants.js';
import { massesOfDocument, moleculeOfDocument } from './document-molecule.js';
import { freeEnergiesOf, type RefinedPoint } from './free-energies.js';
import { seriesValue } from './hindered-rotor/periodic-series.js';
import { rigidTangent } from './hindered-rotor/reduced-moment.js';
import { rotorOfProfile } from './hindered-rotor/rotor-of-profile.js';
import { isometries } from './isometries.js';
import { soundCurve } from './profile-checks.js';
import { rotamers } from './rotamers.js';
import { modeAlong, vibrations } from './vibrations.js';

/** What a proof says of one stationary point of a profile; scan's `ProvedPoint` is one. */
export interface ProvedStationaryPoint {
  /** Index among the document's `stationaryPoints`. */
  readonly of: number;
  /** `minimum` and `saddle` are what a well and a barrier should be; anything else is not used. */
  readonly verdict: string;
  /** kcal/mol. */
  readonly energy: number;
  /** 3 values an atom, angstrom. */
  readonly coordinates: Coordinates;
  /** Row-major, kcal/mol/angstrom^2; or the frequencies that follow from it, cm-1, imaginary ones negative. */
  readonly hessian?: ArrayLike<number>;
  readonly frequencies?: ArrayLike<number>;
}

/** Energies of proved points in the order of `rotamers(document)`, to be handed to `analyseProfile`. */
export interface ProvedEnergies {
  /** Heights above the lowest well, kcal/mol; null where no saddle was proved. */
  readonly saddles: readonly (number | null)[];
  /** Saddles that each barrier stands for: 2 where the saddle and its mirror image join the same wells. */
  readonly saddleCounts: readonly number[];
  /** Null where a well was not proved to be a minimum. */
  readonly freeEnergies: ((temperature: number) => { wells: number[]; barriers: (number | null)[] }) | null;
  readonly transmission: ((temperature: number) => number[]) | null;
  /** Which points could not be used. */
  readonly notes: readonly Note[];
}

/** Degrees from 0 and 180 within which a passage is its own mirror image. */
const ON_MIRROR = 2;

/**
 * Saddle heights, free energies and transmission coefficients of a profile from its proved points. `masses` in amu, standard weights when left out. A
 * barrier whose saddle joins other wells, has more than one negative mode or was not found stays unknown, so that no rate is taken over it.
 * With `hinderedTorsion` the mode of each well that resembles the turn most is replaced by the well's basin of the hindered rotor (`basinThermodynamics`);
 * that needs the Hessian of every well. Throws `proof/points` for points that belong to another document or have neither a Hessian nor frequencies, and as `vibrations` and `freeEnergiesOf` do.
 */
export function provedEnergies(
  document: ProfileDocument,
  proved: readonly ProvedStationaryPoint[],
  masses: ArrayLike<number> = massesOfDocument(document.molecule),
  hinderedTorsion = false,
): ProvedEnergies {
  const byPlace = new Map(proved.map((point) => [point.of, point]));
  for (const place of byPlace.keys())
    if (!document.stationaryPoints[place])
      throw new TordialError(
        'proof/points',
        `there is no stationary point ${place} in the document: prove the points of this very profile`,
      );
  const { wells, barriers } = rotamers(document);
  const notes: Note[] = [];
  const refined = ({ of, energy, coordinates, hessian, frequencies }: ProvedStationaryPoint): RefinedPoint => {
    if (!frequencies && !hessian)
      throw new TordialError('proof/points', `the proved point ${of} has neither a Hessian nor frequencies: give one of them`);
    return { energy, coordinates, frequencies: frequencies ?? vibrations(hessian ?? [], coordinates, masses).frequencies };
  };
  const minima = wells.map(({ stationaryPoints, angle }) => {
    const found = stationaryPoints.flatMap((place) => byPlace.get(place) ?? []).filter((point) => point.verdict === 'minimum');
    if (found.length === 0)
      notes.push({ code: 'proof/well', message: `the well at ${angle.toFixed(1)} degrees was not proved to be a minimum` });
    return found.length > 0 ? found.reduce((low, point) => (point.energy < low.energy ? point : low)) : null;
  });
  const saddles = barriers.map(({ stationaryPoint, angle }) => {
    const found = stationaryPoint === null ? undefined : byPlace.get(stationaryPoint);
    if (found?.verdict === 'saddle') return found;
    const verdict = found ? `: ${found.verdict}` : '';
    notes.push({ code: 'proof/saddle', message: `no saddle between its two wells was proved at ${angle.toFixed(1)} degrees${verdict}` });
    return null;
  });
  const kinds = moleculeOfDocument(document.molecule).symmetryClasses;
  const saddleCounts = saddles.map((saddle, i) => {
    if (!saddle || Math.abs(Math.sin(radians(barriers[i].angle))) > Math.sin(radians(ON_MIRROR))) return 1;
    // the mirror image of a passage at 0 or 180 is the same passage; wells that both are their own image, or each other's, are joined twice
    const [before, after] = barriers[i].wells;
    const swapped =
      wells[before].mirrorImages.includes(after) ||
      (wells[before].mirrorImages.includes(before) && wells[after].mirrorImages.includes(after));
    const single = wells[before].stationaryPoints.length === 1 && wells[after].stationaryPoints.length === 1;
    const own = isometries(saddle.coordinates, saddle.coordinates, kinds, { tolerance: 0.05, limit: 64 }).some(
      (isometry) => isometry.improper,
    );
    return swapped && single && !own ? 2 : 1;
  });
  const lowest = Math.min(...minima.flatMap((point) => point?.energy ?? []));
  const known = minima.filter((point) => point !== null);
  const complete =
    known.length === minima.length
      ? freeEnergiesOf(
          hinderedTorsion ? withBasins(document, known, known.map(refined), masses, notes) : known.map(refined),
          saddles.map((point) => point && refined(point)),
          masses,
        )
      : null;
  return {
    saddles: saddles.map((point) => (point && Number.isFinite(lowest) ? point.energy - lowest : null)),
    saddleCounts,
    freeEnergies: complete?.freeEnergies ?? null,
    transmission: complete?.transmission ?? null,
    notes,
  };
}

/** Cosine between a mode and the turn below which the mode is hardly the rotor's. */
const RESEMBLES = 0.7;

/** The wells with their basins of the hindered rotor. */
function withBasins(
  document: ProfileDocument,
  minima: readonly ProvedStationaryPoint[],
  points: readonly RefinedPoint[],
  masses: ArrayLike<number>,
  notes: Note[],
): RefinedPoint[] {
  const { constant, notes: ofRotor } = rotorOfProfile(document);
  notes.push(...ofRotor);
  const curve = soundCurve(document);
  const { wells, barriers } = rotamers(document);
  const {
    axis,
    sides: [, side],
  } = document.rotor;
  return points.map((point, i) => {
    const { hessian } = minima[i];
    if (!hessian)
      throw new TordialError(
        'proof/points',
        `the well at ${wells[i].angle.toFixed(1)} degrees has no Hessian: a hindered torsion needs it`,
      );
    const modes = vibrations(hessian, point.coordinates, masses);
    const { mode, overlap } = modeAlong(modes, point.coordinates, masses, rigidTangent(point.coordinates, axis, side));
    if (overlap < RESEMBLES)
      notes.push({
        code: 'rotor/mode',
        message: `in the well at ${wells[i].angle.toFixed(1)} degrees no vibration is the rotor's own: the nearest, ${modes.frequencies[mode].toFixed(0)} cm-1, overlaps its turn by ${overlap.toFixed(2)}, and a hindered rotor in its place is a rough picture`,
      });
    const bottom = energyAt(curve, wells[i].angle);
    const [before, after] = [barriers[(i - 1 + wells.length) % wells.length].angle, barriers[i].angle];
    const from = before < wells[i].angle ? before : before - 360;
    const to = after > wells[i].angle ? after : after + 360;
    return {
      ...point,
      frequencies: modes.frequencies,
      torsion: {
        mode,
        basin: {
          potential: (phi: number) => (energyAt(curve, degrees(phi)) - bottom) * WAVENUMBER_PER_KCAL,
          constant: (phi: number) => seriesValue(constant, phi),
          from: radians(from),
          to: radians(to),
          frequency: modes.frequencies[mode],
        },
      },
    };
  });
}

/** The stationary points of a profile document, proved: wells, saddles, their frequencies and where they lead. */
import { massesOfDocument, moleculeOfDocument, vibrations } from '@tordial/analysis';
import { type Mmff94Options, mmff94, type TorsionSeries } from '@tordial/forcefield';
import { TordialError } from '@tordial/geometry';
import { type Abortable, drive, numericalHessian, type Potential, type ProfileDocument, proof, withProvedPoints } from '@tordial/scan';
import { driveInTurns } from './drive-in-turns.js';

export interface ProvedPointsOptions {
  /** The potential of the profile; made from the document's provenance and settings when left out. */
  readonly potential?: Potential;
  /** Largest gradient component of a proved point, kcal/mol/angstrom; 1e-4. */
  readonly tolerance?: number;
  readonly onProgress?: (done: number, total: number) => void;
  /** Stops the work with the signal's reason. */
  readonly signal?: Abortable;
}

/**
 * The document with `proved` added: each well relaxed without constraint, each barrier refined to a first-order saddle, its order counted on the Hessian,
 * both paths down followed; crossings refined from both sides. What is not what the profile took it for is told in the notes.
 *
 * Rejects with `proof/rigid` for a rigid profile, whose points are no stationary points of the molecule, and `proof/potential` where the potential is
 * not one that the document can name.
 */
export async function provedPoints(document: ProfileDocument, options: ProvedPointsOptions = {}): Promise<ProfileDocument> {
  if (document.settings.kind === 'rigid')
    throw new TordialError('proof/rigid', 'a rigid profile has no stationary points of the molecule: scan with relaxation');
  const molecule = moleculeOfDocument(document.molecule);
  const potential = options.potential ?? potentialOf(document);
  const geometry = ({ angle, coordinates }: { angle: number; coordinates: readonly number[] }) => ({
    angle,
    coordinates: Float64Array.from(coordinates),
  });
  const { points, notes } = await driveInTurns(
    proof(
      molecule,
      {
        torsion: document.rotor.torsion,
        stationaryPoints: document.stationaryPoints.map((point) => ({ kind: point.kind, ...geometry(point) })),
        points: document.points.map(geometry),
      },
      { tolerance: options.tolerance, onProgress: options.onProgress },
    ),
    potential,
    options.signal,
  );
  const masses = massesOfDocument(document.molecule);
  const frequencies = points.map(({ hessian, coordinates }) => vibrations(hessian, coordinates, masses).frequencies);
  return withProvedPoints(document, points, frequencies, notes);
}

/**
 * Hessians (row-major, kcal/mol/angstrom^2) of the proved minima of a document, by index among its stationary points, calculated again with the potential
 * that it names. Throws `proof/potential` where it names none.
 */
export function hessiansOfWells(document: ProfileDocument): Map<number, Float64Array> {
  const potential = potentialOf(document);
  const minima = (document.proved ?? []).filter(({ verdict }) => verdict === 'minimum');
  return new Map(minima.map(({ of, coordinates }) => [of, drive(numericalHessian(Float64Array.from(coordinates)), potential)]));
}

/** A document made with torsion series carries them in its provenance, and says so in the potential's name. */
function potentialOf({ provenance, settings, molecule }: ProfileDocument): Potential {
  const [, variant, series] = /^(MMFF94s?)( \+ series)?$/.exec(provenance.potential) ?? [];
  const carried = provenance.torsionSeries;
  if ((variant !== 'MMFF94' && variant !== 'MMFF94s') || (series && !Array.isArray(carried)))
    throw new TordialError(
      'proof/potential',
      `the profile was scanned with ${provenance.potential}, which its document cannot make again: give that potential to prove its points`,
    );
  const torsionOverrides: TorsionSeries[] | undefined = series && Array.isArray(carried) ? carried : undefined;
  return mmff94(moleculeOfDocument(molecule), { variant, dielectric: dielectricOf(settings.dielectric), torsionOverrides });
}

function dielectricOf(value: unknown): Mmff94Options['dielectric'] {
  if (typeof value !== 'object' || value === null || !('model' in value) || !('constant' in value)) return undefined;
  const { model, constant } = value;
  return (model === 'constant' || model === 'distance') && typeof constant === 'number' ? { model, constant } : undefined;
}

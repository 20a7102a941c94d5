/** Everything that follows from one profile at the temperatures asked for, as plain data: what the table under the figure prints. */
import { degrees, type Molecule, type Note, radians, TordialError } from '@tordial/geometry';
import { atomShape, energyAt, type ProfileCurve, type ProfileDocument } from '@tordial/scan';
import { type AnalysedProcess, analysedProcess, type CoalescingSignals } from './analysed-process.js';
import {
  ANILIDE_CAUTION,
  barrierErrorCaution,
  CLASS_CAUTION,
  crossingCaution,
  DOUBLE_BOND_CAUTION,
  ELECTRONIC_CAUTION,
  ESTIMATE_CAUTION,
  FRAGMENTS_CAUTION,
  hydrogenBondCaution,
  inversionCaution,
  RIGID_CAUTION,
  refutedCaution,
  UNPROVED_CAUTION,
} from './cautions.js';
import { averagedCouplings, hasVicinalProtons, type VicinalCoupling, vicinalCouplings } from './couplings/vicinal-couplings.js';
import { moleculeOfDocument } from './document-molecule.js';
import { barrierRates, type WellNetwork } from './network.js';
import { invertingNitrogens } from './nitrogen-pyramids.js';
import { basinPopulations, boltzmannPopulations } from './populations.js';
import { observableProcesses } from './processes.js';
import { soundCurve } from './profile-checks.js';
import { type BarrierBetween, type Rotamer, rotamerLabel, rotamers } from './rotamers.js';
import { requireTemperature } from './temperature.js';
import { assumedBarrierError, type BarrierError } from './uncertainty.js';

/** Free energies of the wells and barriers of a profile at one temperature, in the order of `rotamers(document)`, kcal/mol on one scale. */
export type FreeEnergies = (temperature: number) => { readonly wells: readonly number[]; readonly barriers: readonly (number | null)[] };

export interface AnalysisOptions {
  /** K; 298.15 when left out. */
  readonly temperatures?: readonly number[];
  /** Assumed error of a barrier, kcal/mol; by the source of the torsion terms when left out. */
  readonly barrierError?: number;
  /**
   * Heights of refined saddles above the lowest well, kcal/mol, in the order of `rotamers(document).barriers`; null where none was proved, and
   * no rate is given over such a barrier. When left out, the profile's own barriers stand, but for crossings.
   */
  readonly saddles?: readonly (number | null)[];
  /** How many saddles stand for each barrier, in the same order: 2 where a saddle and its mirror image join the same wells; 1 when left out. */
  readonly saddleCounts?: readonly number[];
  /** Where free energies are known, populations by them are added and rates are taken from them instead of electronic energies. */
  readonly freeEnergies?: FreeEnergies | null;
  /** Transmission coefficient of each barrier at a temperature (Wigner), in the same order; 1 when left out. */
  readonly transmission?: ((temperature: number) => readonly number[]) | null;
  /** Shift difference (ppm) of two signals and spectrometer frequency (MHz): the coalescence temperature of each process is added. */
  readonly coalescence?: CoalescingSignals;
  /** Vicinal H-C-C-H couplings over the axis: added where it has them when left out; an error where it has none when true. */
  readonly couplings?: boolean;
}

/** A rotamer in a result: its index is its place. */
export interface AnalysedRotamer extends Rotamer {
  /** Name for people: 'ap (anti)', '+sc (gauche)'. */
  readonly label: string;
}

/** A barrier in a result, with its height seen from either side, kcal/mol: that of the refined saddle where one is given. */
export interface AnalysedBarrier extends BarrierBetween {
  /** Height of the refined saddle above the lowest well, kcal/mol; null where none is given. */
  readonly saddle: number | null;
  readonly forward: number;
  readonly backward: number;
}

/** Populations of the rotamers at one temperature, each array in their order, sum 1. */
export interface Populations {
  /** By energies of the wells alone. */
  readonly byEnergy: readonly number[];
  /** By integrating the profile classically from barrier to barrier. */
  readonly byProfile: readonly number[];
  readonly byFreeEnergy: readonly number[] | null;
}

/** Everything at one temperature. */
export interface AnalysisRow {
  readonly temperature: number;
  readonly populations: Populations;
  readonly processes: readonly AnalysedProcess[];
  /** Rate constants (1/s) over each barrier in the order of `barriers`, from the well before it to that after it and back; null where none is justified. */
  readonly barrierRates: readonly ({ readonly forward: number; readonly backward: number } | null)[];
  /** Averaged over the profile; null where the axis has none. */
  readonly couplings: readonly VicinalCoupling[] | null;
}

/** What follows from one profile. Energies in kcal/mol, angles in degrees. */
export interface ProfileAnalysis {
  readonly rotamers: readonly AnalysedRotamer[];
  readonly barriers: readonly AnalysedBarrier[];
  readonly barrierError: BarrierError;
  /** Couplings in each rotamer, in their order; null where the axis has none. */
  readonly rotamerCouplings: readonly (readonly VicinalCoupling[])[] | null;
  readonly rows: readonly AnalysisRow[];
  readonly cautions: readonly Note[];
}

/**
 * Rotamers, populations, barriers, rates and half-lives of a profile document.
 *
 * Throws `analysis/temperature` for a temperature of zero or below, and as `soundCurve`, `rotamers` and `pairCouplings` do for a profile that does not
 * close, does not cover its turn or did not converge, or for couplings that the axis has not. No rate is given over a crossing of branches, nor over
 * a barrier whose proof failed.
 */
export function analyseProfile(document: ProfileDocument, options: AnalysisOptions = {}): ProfileAnalysis {
  const { temperatures = [298.15], barrierError, freeEnergies } = options;
  if (temperatures.length === 0) throw new TordialError('analysis/temperature', 'no temperature: give at least one, in kelvin');
  temperatures.forEach(requireTemperature);
  const curve = soundCurve(document);
  const turn = rotamers(document);
  const { wells, barriers } = turn;
  const molecule = moleculeOfDocument(document.molecule);
  const error = assumedBarrierError(document.rotor.parameters, barrierError);
  // '@' in a canonical SMILES is a stereocentre or an axis that the molecule keeps
  const handedAxis = document.molecule.smiles.includes('@') && document.rotor.axis.every((i) => atomShape(molecule, i) === 'planar');
  const networkAt = networkOf(turn, options);
  const coupled = options.couplings ?? hasVicinalProtons(molecule, document.rotor.axis);
  const couplingsAt = coupled ? profileCouplings(document, molecule, curve) : null;
  const reference = Float64Array.from(document.points[0].coordinates);

  return {
    rotamers: wells.map((well) => ({ ...well, label: rotamerLabel(well) })),
    barriers: barriers.map((barrier, i) => {
      const saddle = options.saddles?.[i] ?? null;
      const [forward, backward] = barrier.wells.map((well) => (saddle ?? barrier.energy) - wells[well].energy);
      return { ...barrier, saddle, forward, backward };
    }),
    barrierError: error,
    rotamerCouplings: coupled
      ? wells.map(({ stationaryPoints: [lowest] }) =>
          vicinalCouplings(molecule, document.rotor.axis, Float64Array.from(document.stationaryPoints[lowest].coordinates), reference),
        )
      : null,
    rows: temperatures.map((temperature) => {
      const network = networkAt(temperature);
      const energies = wells.map((well) => well.energy);
      return {
        temperature,
        populations: {
          byEnergy: [...boltzmannPopulations(energies, temperature)],
          byProfile: populationsOfBasins(turn, curve, temperature),
          byFreeEnergy: freeEnergies ? [...boltzmannPopulations(network.wells, temperature)] : null,
        },
        processes: observableProcesses(network, wells, temperature, handedAxis).map((process) =>
          analysedProcess(process, networkAt, wells, temperature, error.error, options.coalescence),
        ),
        barrierRates: barrierRates(network, temperature),
        couplings: couplingsAt?.(temperature) ?? null,
      };
    }),
    cautions: cautionsOf(document, molecule, turn, error, options),
  };
}

type Turn = ReturnType<typeof rotamers>;

/** The network of wells and barriers at a temperature: refined saddles before the envelope's barriers, free energies before electronic ones. */
function networkOf(
  { wells, barriers }: Turn,
  { saddles, saddleCounts, freeEnergies, transmission }: AnalysisOptions,
): (temperature: number) => WellNetwork {
  const factorsAt = (temperature: number): number[] | undefined => {
    const kappa = transmission?.(temperature);
    return kappa || saddleCounts ? barriers.map((_, i) => (kappa?.[i] ?? 1) * (saddleCounts?.[i] ?? 1)) : undefined;
  };
  return (temperature) => {
    const free = freeEnergies?.(temperature);
    const heights = free ? free.wells : wells.map((well) => well.energy);
    return {
      wells: heights,
      barriers: barriers.map((barrier, i) => {
        const known = saddles ? saddles[i] : barrier.kind === 'crossing' ? null : barrier.energy;
        const height = free ? free.barriers[i] : known;
        // a low barrier can vanish in free energy: there is no rate over it then
        return height !== null && height >= Math.max(heights[i], heights[(i + 1) % heights.length]) ? height : null;
      }),
      transmission: factorsAt(temperature),
    };
  };
}

function populationsOfBasins({ wells, barriers }: Turn, curve: ProfileCurve, temperature: number): number[] {
  const ordered = [...barriers].sort((a, b) => a.angle - b.angle);
  const basins = basinPopulations(
    (phi) => energyAt(curve, degrees(phi)),
    ordered.map((barrier) => radians(barrier.angle)),
    temperature,
  );
  const populations = wells.map(() => 0);
  // a basin reaches from one barrier to the next and holds the well between
  ordered.forEach((barrier, n) => {
    populations[barrier.wells[1]] = basins[n];
  });
  return populations;
}

/** Couplings averaged over the points of the profile, each standing for half of the intervals beside it. */
function profileCouplings(
  document: ProfileDocument,
  molecule: Molecule,
  { points }: ProfileCurve,
): (temperature: number) => VicinalCoupling[] {
  const geometries = document.points.map((point) => Float64Array.from(point.coordinates));
  const energies = points.map((point) => point.energy);
  const last = points.length - 1;
  const widths = points.map((_, n) => {
    const previous = n > 0 ? points[n - 1].angle : points[last].angle - 360;
    const next = n < last ? points[n + 1].angle : points[0].angle + 360;
    return (next - previous) / 2;
  });
  return (temperature) => averagedCouplings(molecule, document.rotor.axis, geometries, energies, temperature, widths);
}

function cautionsOf(
  document: ProfileDocument,
  molecule: Molecule,
  { barriers }: Turn,
  error: BarrierError,
  { saddles, freeEnergies }: AnalysisOptions,
): Note[] {
  const { rotor, settings, points } = document;
  const geometries = points.map((point) => Float64Array.from(point.coordinates));
  const unknown = barriers.filter((_, i) => (saddles?.[i] ?? null) === null);
  const crossings = unknown.filter(({ kind }) => kind === 'crossing').map(({ angle }) => angle);
  const smooth = unknown.filter(({ kind }) => kind === 'barrier').map(({ angle }) => angle);
  const inverting = invertingNitrogens(molecule, rotor.axis, geometries);
  const wildcard = rotor.parameters.some((term) => term.source === 'wildcard');
  const cautions: (Note | null)[] = [
    ESTIMATE_CAUTION,
    CLASS_CAUTION,
    barrierErrorCaution(error),
    freeEnergies ? null : ELECTRONIC_CAUTION,
    settings.kind === 'rigid' ? RIGID_CAUTION : null,
    document.molecule.fragments > 1 ? FRAGMENTS_CAUTION : null,
    rotor.kind === 'anilide' && wildcard ? ANILIDE_CAUTION : null,
    rotor.kind === 'double bond' ? DOUBLE_BOND_CAUTION : null,
    crossings.length > 0 ? crossingCaution(crossings) : null,
    smooth.length > 0 && saddles ? refutedCaution(smooth) : null,
    smooth.length > 0 && !saddles && settings.kind !== 'rigid' ? UNPROVED_CAUTION : null,
    inverting.length > 0 ? inversionCaution(inverting) : null,
    hydrogenBondCaution(molecule, geometries, settings['dielectric']),
  ];
  return cautions.filter((caution) => caution !== null);
}

/** Everything that follows from one profile at the temperatures asked for, as plain data: what the table under the figure prints. */
import { type Note, radians, TordialError } from '@tordial/geometry';
import { atomShape, energyAt, type ProfileDocument } from '@tordial/scan';
import { type AnalysedProcess, analysedProcess, type CoalescingSignals } from './analysed-process.js';
import {
  ANILIDE_CAUTION,
  barrierErrorCaution,
  CLASS_CAUTION,
  crossingCaution,
  ELECTRONIC_CAUTION,
  ESTIMATE_CAUTION,
  FRAGMENTS_CAUTION,
  hydrogenBondCaution,
  inversionCaution,
  RIGID_CAUTION,
} from './cautions.js';
import { averagedCouplings, type VicinalCoupling, vicinalCouplings } from './couplings/vicinal-couplings.js';
import { moleculeOfDocument } from './document-molecule.js';
import type { WellNetwork } from './network.js';
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
  /** Heights of refined saddles above the lowest well, kcal/mol, in the order of `rotamers(document).barriers`; null keeps the envelope's. */
  readonly saddles?: readonly (number | null)[];
  /** Where free energies are known, populations by them are added and rates are taken from them instead of electronic energies. */
  readonly freeEnergies?: FreeEnergies;
  /** Transmission coefficient of each barrier at a temperature (Wigner), in the same order; 1 when left out. */
  readonly transmission?: (temperature: number) => readonly number[];
  /** Shift difference (ppm) of two signals and spectrometer frequency (MHz): the coalescence temperature of each process is added. */
  readonly coalescence?: CoalescingSignals;
  /** Add vicinal H-C-C-H couplings over the axis; an error where the axis has none. */
  readonly couplings?: boolean;
}

/** A rotamer in a result: its index is its place. */
export interface AnalysedRotamer extends Rotamer {
  /** Name for people: 'ap (anti)', '+sc (gauche)'. */
  readonly label: string;
}

/** A barrier in a result, with its height seen from either side, kcal/mol. */
export interface AnalysedBarrier extends BarrierBetween {
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
  /** Averaged over the profile; null where not asked for. */
  readonly couplings: readonly VicinalCoupling[] | null;
}

/** What follows from one profile. Energies in kcal/mol, angles in degrees. */
export interface ProfileAnalysis {
  readonly rotamers: readonly AnalysedRotamer[];
  readonly barriers: readonly AnalysedBarrier[];
  readonly barrierError: BarrierError;
  /** Couplings in each rotamer, in their order; null where not asked for. */
  readonly rotamerCouplings: readonly (readonly VicinalCoupling[])[] | null;
  readonly rows: readonly AnalysisRow[];
  readonly cautions: readonly Note[];
}

/**
 * Rotamers, populations, barriers, rates and half-lives of a profile document.
 *
 * Throws `analysis/temperature` for a temperature of zero or below, and as `soundCurve`, `rotamers` and `pairCouplings` do for a profile that does not
 * close, does not cover its turn or did not converge, or for couplings that the axis has not. Over a crossing of branches no rate is given.
 */
export function analyseProfile(document: ProfileDocument, options: AnalysisOptions = {}): ProfileAnalysis {
  const { temperatures = [298.15], barrierError, saddles, freeEnergies, transmission } = options;
  if (temperatures.length === 0) throw new TordialError('analysis/temperature', 'no temperature: give at least one, in kelvin');
  temperatures.forEach(requireTemperature);
  const curve = soundCurve(document);
  const { wells, barriers } = rotamers(document);
  const molecule = moleculeOfDocument(document.molecule);
  // '@' in a canonical SMILES is a stereocentre or an axis that the molecule keeps
  const handedAxis = document.molecule.smiles.includes('@') && document.rotor.axis.every((i) => atomShape(molecule, i) === 'planar');
  const error = assumedBarrierError(document.rotor.parameters, barrierError);
  const order = barriers.map((_, i) => i).sort((a, b) => barriers[a].angle - barriers[b].angle);

  const networkAt = (temperature: number): WellNetwork => {
    const free = freeEnergies?.(temperature);
    const heights = free ? free.wells : wells.map((well) => well.energy);
    return {
      wells: heights,
      barriers: barriers.map((barrier, i) => {
        const known = saddles?.[i] ?? (barrier.kind === 'crossing' ? null : barrier.energy);
        const height = free ? free.barriers[i] : known;
        // a low barrier can vanish in free energy: there is no rate over it then
        return height !== null && height >= Math.max(heights[i], heights[(i + 1) % heights.length]) ? height : null;
      }),
      transmission: transmission?.(temperature),
    };
  };

  const geometries = document.points.map((point) => Float64Array.from(point.coordinates));
  const wellGeometries = wells.map((well) => Float64Array.from(document.stationaryPoints[well.stationaryPoints[0]].coordinates));
  const widths = curve.points.map(({ angle }, n) => {
    const previous = curve.points[n > 0 ? n - 1 : curve.points.length - 1].angle - (n > 0 ? 0 : 360);
    const next = n + 1 < curve.points.length ? curve.points[n + 1].angle : curve.points[0].angle + 360;
    return angle - previous + (next - angle);
  });

  const rows = temperatures.map((temperature): AnalysisRow => {
    const network = networkAt(temperature);
    const basins = basinPopulations(
      (phi) => energyAt(curve, (phi * 180) / Math.PI),
      order.map((i) => radians(barriers[i].angle)),
      temperature,
    );
    // basin n begins at the n-th barrier by angle and holds the well after that barrier
    const byProfile = wells.map(() => 0);
    order.forEach((barrier, n) => {
      byProfile[barriers[barrier].wells[1]] += basins[n];
    });
    return {
      temperature,
      populations: {
        byEnergy: [
          ...boltzmannPopulations(
            wells.map((well) => well.energy),
            temperature,
          ),
        ],
        byProfile,
        byFreeEnergy: freeEnergies ? [...boltzmannPopulations(network.wells, temperature)] : null,
      },
      processes: observableProcesses(network, wells, temperature, handedAxis).map((process) =>
        analysedProcess(process, networkAt, wells, temperature, error.error, options.coalescence),
      ),
      couplings: options.couplings
        ? averagedCouplings(
            molecule,
            document.rotor.axis,
            geometries,
            curve.points.map((point) => point.energy),
            temperature,
            widths,
          )
        : null,
    };
  });

  const crossings = barriers.flatMap((barrier, i) =>
    barrier.kind === 'crossing' && (saddles?.[i] ?? null) === null ? [barrier.angle] : [],
  );
  const inverting = invertingNitrogens(molecule, document.rotor.axis, geometries);
  const hydrogenBond = hydrogenBondCaution(molecule, geometries);
  return {
    rotamers: wells.map((well) => ({ ...well, label: rotamerLabel(well) })),
    barriers: barriers.map((barrier) => ({
      ...barrier,
      forward: barrier.energy - wells[barrier.wells[0]].energy,
      backward: barrier.energy - wells[barrier.wells[1]].energy,
    })),
    barrierError: error,
    rotamerCouplings: options.couplings ? wellGeometries.map((x) => vicinalCouplings(molecule, document.rotor.axis, x)) : null,
    rows,
    cautions: [
      ESTIMATE_CAUTION,
      CLASS_CAUTION,
      barrierErrorCaution(error),
      ...(freeEnergies ? [] : [ELECTRONIC_CAUTION]),
      ...(document.settings.kind === 'rigid' ? [RIGID_CAUTION] : []),
      ...(document.molecule.fragments > 1 ? [FRAGMENTS_CAUTION] : []),
      ...(document.rotor.kind === 'anilide' && document.rotor.parameters.some((term) => term.source === 'wildcard')
        ? [ANILIDE_CAUTION]
        : []),
      ...(crossings.length > 0 ? [crossingCaution(crossings)] : []),
      ...(inverting.length > 0 ? [inversionCaution(inverting)] : []),
      ...(hydrogenBond ? [hydrogenBond] : []),
    ],
  };
}

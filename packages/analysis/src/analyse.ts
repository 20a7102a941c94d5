/** Everything that follows from one profile at the temperatures asked for, as plain data: what the table under the figure prints. */
import { type Note, radians, TordialError } from '@tordial/geometry';
import { energyAt, type ProfileDocument } from '@tordial/scan';
import {
  barrierErrorCaution,
  CLASS_CAUTION,
  crossingCaution,
  ELECTRONIC_CAUTION,
  ESTIMATE_CAUTION,
  hydrogenBondCaution,
  inversionCaution,
} from './cautions.js';
import { coalescenceRate, frequencyDifference } from './coalescence.js';
import { averagedCouplings, type VicinalCoupling, vicinalCouplings } from './couplings/vicinal-couplings.js';
import { moleculeOfDocument } from './document-molecule.js';
import { barrierOfRate, temperatureOfRate } from './eyring.js';
import { exchangeHalfLife, racemisationHalfLife, timeToExcess } from './half-life.js';
import type { WellNetwork } from './network.js';
import { invertingNitrogens } from './nitrogen-pyramids.js';
import { OKI_HALF_LIFE } from './oki.js';
import { basinPopulations, boltzmannPopulations } from './populations.js';
import { lowestBarrier, observableProcesses, type Process, type ProcessRates, processRates } from './processes.js';
import { soundCurve } from './profile-checks.js';
import { type BarrierBetween, type Rotamer, rotamerLabel, rotamers } from './rotamers.js';
import { type StabilityClass, stabilityClass } from './stability-class.js';
import { requireTemperature } from './temperature.js';
import { assumedBarrierError, type BarrierError, type Range, rateRange, timeRange } from './uncertainty.js';

/** Free energies of the wells and barriers of a profile at one temperature, in their order round the turn, kcal/mol on one scale. */
export type FreeEnergies = (temperature: number) => { readonly wells: readonly number[]; readonly barriers: readonly (number | null)[] };

export interface AnalysisOptions {
  /** K; 298.15 when left out. */
  readonly temperatures?: readonly number[];
  /** Assumed error of a barrier, kcal/mol; by the source of the torsion terms when left out. */
  readonly barrierError?: number;
  /** Where free energies are known, populations by them are added and rates are taken from them instead of electronic energies. */
  readonly freeEnergies?: FreeEnergies;
  /** Transmission coefficient of each barrier at a temperature (Wigner); 1 when left out. */
  readonly transmission?: (temperature: number) => readonly number[];
  /** Shift difference (ppm) of two signals and spectrometer frequency (MHz): the coalescence temperature of each process is added. */
  readonly coalescence?: { readonly shiftDifference: number; readonly spectrometerFrequency: number };
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

/** A process at one temperature; everything that needs a rate is null where none is justified, with the reason in `refused`. */
export interface AnalysedProcess {
  readonly kind: Process['kind'];
  readonly from: readonly number[];
  readonly to: readonly number[];
  /** 'ap (anti) -> ±sc (gauche)'. */
  readonly label: string;
  /** Height of the lowest route above the lowest well on either side, kcal/mol. */
  readonly barrier: number | null;
  readonly barrierBack: number | null;
  /** Number of routes, and the barriers on the lowest one by index. */
  readonly routes: number;
  readonly lowestRoute: readonly number[];
  /** Rate constants with their ranges, 1/s; of a racemisation k as in ln 2 / (2k). */
  readonly forward: Range | null;
  readonly backward: Range | null;
  /** Half-life of exchange, ln 2 / k, s; null for a racemisation. */
  readonly exchangeHalfLife: Range | null;
  /** Half-life of racemisation, ln 2 / (2k), s; of a racemisation only. */
  readonly racemisationHalfLife: Range | null;
  /** Time for the enantiomeric excess to fall from 100 to 99 %, s; of a racemisation only. */
  readonly timeTo99Percent: Range | null;
  /** Of racemisations and exchanges: class of the barrier, and the classes at the ends of its error. */
  readonly stabilityClass: (StabilityClass & { readonly low: 1 | 2 | 3; readonly high: 1 | 2 | 3 }) | null;
  /** Oki's criterion for a racemisation; 'open' where the range of the half-life reaches over the limit. */
  readonly oki: 'separable' | 'not separable' | 'open' | null;
  /** Of the excess a racemisation starts from, the part that decays at this rate. */
  readonly share: number | null;
  /** Coalescence temperature, K, with its range; null where not asked for or not justified. */
  readonly coalescenceTemperature: Range | null;
  readonly refused: readonly Note[];
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
  const { temperatures = [298.15], barrierError, freeEnergies, transmission } = options;
  if (temperatures.length === 0) throw new TordialError('analysis/temperature', 'no temperature: give at least one, in kelvin');
  temperatures.forEach(requireTemperature);
  const curve = soundCurve(document);
  const { wells, barriers } = rotamers(document);
  const molecule = moleculeOfDocument(document.molecule);
  const error = assumedBarrierError(document.rotor.parameters, barrierError);
  const order = barriers.map((_, i) => i).sort((a, b) => barriers[a].angle - barriers[b].angle);

  const networkAt = (temperature: number): WellNetwork => {
    const free = freeEnergies?.(temperature);
    return {
      wells: free ? free.wells : wells.map((well) => well.energy),
      barriers: barriers.map((barrier, i) => (barrier.kind === 'crossing' ? null : free ? free.barriers[i] : barrier.energy)),
      transmission: transmission?.(temperature),
    };
  };

  const geometries = document.points.map((point) => Float64Array.from(point.coordinates));
  const wellGeometries = document.stationaryPoints
    .filter((point) => point.kind === 'well')
    .sort((a, b) => a.angle - b.angle)
    .map((point) => Float64Array.from(point.coordinates));
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
      processes: observableProcesses(network, wells, temperature).map((process) =>
        analysedProcess(process, networkAt, wells, temperature, error.error, options),
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

  const crossings = barriers.filter((barrier) => barrier.kind === 'crossing').map((barrier) => barrier.angle);
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
      ...(crossings.length > 0 ? [crossingCaution(crossings)] : []),
      ...(inverting.length > 0 ? [inversionCaution(inverting)] : []),
      ...(hydrogenBond ? [hydrogenBond] : []),
    ],
  };
}

function analysedProcess(
  process: Process,
  networkAt: (temperature: number) => WellNetwork,
  wells: readonly Rotamer[],
  temperature: number,
  error: number,
  { coalescence }: AnalysisOptions,
): AnalysedProcess {
  const network = networkAt(temperature);
  const { kind, from, to, routes } = process;
  const barrier = lowestBarrier(process, network);
  const barrierBack = lowestBarrier({ ...process, from: to }, network);
  const rates = processRates(process, network, temperature);
  const lowestRoute = routes.reduce((best, route) => ((route.highest ?? Infinity) < (best.highest ?? Infinity) ? route : best));
  const range = (rate: number | undefined): Range | null => (rate === undefined ? null : rateRange(rate, temperature, error));
  const forward = range(rates?.forward);
  const racemisation = kind === 'racemisation';
  const halfLife = forward && racemisation ? timeRange(forward, racemisationHalfLife) : null;
  const refused: Note[] = [];
  if (!rates)
    refused.push({
      code: 'analysis/no-rate',
      message: 'no rate: a route passes a crossing of branches where no saddle is known; refine it first',
    });
  const coalesced = coalescence && rates ? coalescenceOf(process, networkAt, rates, temperature, error, coalescence) : null;
  if (coalesced && 'code' in coalesced) refused.push(coalesced);
  return {
    kind,
    from,
    to,
    label: `${nameOf(from, wells, racemisation)} ${racemisation ? '<->' : '->'} ${nameOf(to, wells, racemisation)}`,
    barrier,
    barrierBack,
    routes: routes.length,
    lowestRoute: lowestRoute.barriers,
    forward,
    backward: range(rates?.backward),
    exchangeHalfLife: forward && !racemisation ? timeRange(forward, exchangeHalfLife) : null,
    racemisationHalfLife: halfLife,
    timeTo99Percent: forward && racemisation ? timeRange(forward, (rate) => timeToExcess(rate)) : null,
    stabilityClass: barrier === null || !rates || kind === 'topomerisation' ? null : classWithError(barrier, error),
    oki: halfLife && (halfLife.low >= OKI_HALF_LIFE ? 'separable' : halfLife.high < OKI_HALF_LIFE ? 'not separable' : 'open'),
    share: rates && racemisation ? rates.share : null,
    coalescenceTemperature: coalesced && !('code' in coalesced) ? coalesced : null,
    refused,
  };
}

function classWithError(barrier: number, error: number): AnalysedProcess['stabilityClass'] {
  return {
    ...stabilityClass(Math.max(0, barrier)),
    low: stabilityClass(Math.max(0, barrier - error)).class,
    high: stabilityClass(Math.max(0, barrier + error)).class,
  };
}

/** Wells of one side of a process in words, each name once; an exchange means both hands of a mirror pair. */
function nameOf(set: readonly number[], wells: readonly Rotamer[], handed: boolean): string {
  const labels = set.map((i) => rotamerLabel(wells[i], !handed && set.some((j) => j !== i && wells[i].mirrorImages.includes(j))));
  return [...new Set(labels)].join(', ');
}

/** The coalescence temperature: where the process, its rates taken from the whole network at that temperature, reaches pi dnu / sqrt 2. */
function coalescenceOf(
  process: Process,
  networkAt: (temperature: number) => WellNetwork,
  rates: ProcessRates,
  temperature: number,
  error: number,
  { shiftDifference, spectrometerFrequency }: NonNullable<AnalysisOptions['coalescence']>,
): Range | Note {
  const difference = frequencyDifference(shiftDifference, spectrometerFrequency);
  try {
    const find = (shift: number): number => {
      let T = temperature;
      let k = rates.forward;
      let share = rates;
      // the apparent barrier hardly changes with temperature, so a few rounds settle it
      for (let round = 0; round < 50; round++) {
        const target = coalescenceRate(difference, { populations: [share.backward, share.forward], coupling: 0 });
        const next = temperatureOfRate(target, barrierOfRate(k, T) + (round === 0 ? shift : 0));
        if (Math.abs(next - T) < 1e-9 * T) return next;
        T = next;
        const again = processRates(process, shifted(networkAt(T), shift), T);
        if (!again) break;
        share = again;
        k = again.forward;
      }
      return T;
    };
    return { value: find(0), low: find(-error), high: find(error) };
  } catch (problem) {
    if (problem instanceof TordialError) return { code: problem.code, message: problem.message };
    throw problem;
  }
}

function shifted(network: WellNetwork, shift: number): WellNetwork {
  return { ...network, barriers: network.barriers.map((barrier) => (barrier === null ? null : barrier + shift)) };
}

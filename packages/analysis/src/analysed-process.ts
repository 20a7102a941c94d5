/** One process at one temperature with everything that is said of it: rates, half-lives, classes, coalescence, each with its range. */
import { type Note, TordialError } from '@tordial/geometry';
import { coalescenceRate, frequencyDifference } from './coalescence.js';
import { barrierOfRate, temperatureOfRate } from './eyring.js';
import { exchangeHalfLife, racemisationHalfLife, timeToExcess } from './half-life.js';
import type { WellNetwork } from './network.js';
import { OKI_HALF_LIFE } from './oki.js';
import { lowestBarrier, type Process, type ProcessRates, processRates } from './processes.js';
import { type Rotamer, rotamerLabel } from './rotamers.js';
import { type StabilityClass, stabilityClass } from './stability-class.js';
import { type Range, rateRange, timeRange } from './uncertainty.js';

/** Two signals that a process may merge: their distance (ppm) and the spectrometer frequency of the nucleus (MHz). */
export interface CoalescingSignals {
  readonly shiftDifference: number;
  readonly spectrometerFrequency: number;
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
  /** Half-life of the way forward, ln 2 / k, s; null for a racemisation. */
  readonly exchangeHalfLife: Range | null;
  /** Half-life of racemisation, ln 2 / (2k), s; of a racemisation only. */
  readonly racemisationHalfLife: Range | null;
  /** Time for the enantiomeric excess to fall from 100 to 99 %, s; of a racemisation only. */
  readonly timeTo99Percent: Range | null;
  /** Class of the barrier, and the classes at the ends of its error; null for a topomerisation. */
  readonly stabilityClass: (StabilityClass & { readonly low: 1 | 2 | 3; readonly high: 1 | 2 | 3 }) | null;
  /** Oki's criterion for a racemisation; 'open' where the range of the half-life reaches over the limit. */
  readonly oki: 'separable' | 'not separable' | 'open' | null;
  /** Of the excess of one hand, the part that decays at these rates; null where no hand changes. */
  readonly share: number | null;
  /** Coalescence temperature, K, with its range; null where not asked for or not justified. */
  readonly coalescenceTemperature: Range | null;
  readonly refused: readonly Note[];
}

/**
 * What follows from a process at T. `networkAt` gives the network at any temperature (free energies depend on it), `error` the assumed error of a
 * barrier in kcal/mol; with `signals`, where they coalesce.
 */
export function analysedProcess(
  process: Process,
  networkAt: (temperature: number) => WellNetwork,
  wells: readonly Rotamer[],
  temperature: number,
  error: number,
  signals?: CoalescingSignals,
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
  const changesHand = racemisation || kind === 'diastereomerisation';
  const halfLife = forward && racemisation ? timeRange(forward, racemisationHalfLife) : null;
  const refused: Note[] = [];
  if (!rates)
    refused.push({
      code: 'analysis/no-rate',
      message:
        'no rate: a route passes a crossing of branches or a barrier where no saddle was proved, or one that vanishes in free energy; refine it first',
    });
  const coalesced = signals && rates ? coalescenceOf(process, networkAt, rates, temperature, error, signals) : null;
  if (coalesced && 'code' in coalesced) refused.push(coalesced);
  return {
    kind,
    from,
    to,
    label:
      kind === 'topomerisation'
        ? topomerisationLabel(from, to, wells)
        : `${nameOf(from, wells, changesHand)} ${racemisation ? '<->' : '->'} ${nameOf(to, wells, changesHand)}`,
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
    share: rates && changesHand ? rates.share : null,
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

function topomerisationLabel(from: readonly number[], to: readonly number[], wells: readonly Rotamer[]): string {
  return `${rotamerLabel(wells[from[0]])} between ${from.length + to.length} equal positions`;
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
  { shiftDifference, spectrometerFrequency }: CoalescingSignals,
): Range | Note {
  const difference = frequencyDifference(shiftDifference, spectrometerFrequency);
  try {
    const find = (shift: number): number => {
      let T = temperature;
      let found: ProcessRates | null = rates;
      // the apparent barrier hardly changes with temperature, so a few rounds settle it; a common shift of all barriers simply adds to it
      for (let round = 0; round < 50 && found; round++) {
        const target = coalescenceRate(difference, { populations: equilibrium(found), coupling: 0 });
        const next = temperatureOfRate(target, barrierOfRate(found.forward, T) + shift);
        if (Math.abs(next - T) < 1e-9 * T) return next;
        T = next;
        found = processRates(process, networkAt(T), T);
      }
      return T;
    };
    // a barrier that the error swallows whole coalesces at no temperature
    const low = barrierOfRate(rates.forward, temperature) > error ? find(-error) : 0;
    return { value: find(0), low, high: find(error) };
  } catch (problem) {
    if (!(problem instanceof TordialError)) throw problem;
    return problem.code === 'analysis/barrier'
      ? { code: 'coalescence/none', message: 'no coalescence: the barrier is too low to slow the exchange to this rate' }
      : { code: problem.code, message: problem.message };
  }
}

/** Populations of the two sides of a process at equilibrium. */
function equilibrium({ forward, backward }: ProcessRates): [number, number] {
  return [backward / (forward + backward), forward / (forward + backward)];
}

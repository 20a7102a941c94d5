/** What can be observed of a turn: which rotamers turn into which, over which routes, how fast. */
import { radians } from '@tordial/geometry';
import { barrierRates, type RelaxationMode, type Route, relaxationModes, routesBetween, type WellNetwork } from './network.js';
import { boltzmannPopulations } from './populations.js';

/** The part of a rotamer that processes depend on. */
export interface RelatedWell {
  /** Degrees. */
  readonly angle: number;
  readonly identical: readonly number[];
  readonly mirrorImages: readonly number[];
  readonly species: number;
}

/**
 * One observable process.
 *
 * `exchange`: between two different rotamers that are neighbours on the turn. `racemisation`: between mirror images; `from` and `to` are the
 * wells of either hand. `diastereomerisation`: the same of an axis in a molecule that a stereocentre makes handed anyway.
 * `topomerisation`: of a rotamer into itself with equal atoms exchanged, as a methyl turns.
 */
export interface Process {
  readonly kind: 'exchange' | 'racemisation' | 'diastereomerisation' | 'topomerisation';
  /** Wells by index. */
  readonly from: readonly number[];
  readonly to: readonly number[];
  /** Ways from one to the other, either way round the turn; mirror images of each other are two. */
  readonly routes: readonly Route[];
}

/** Rates of a process at one temperature. */
export interface ProcessRates {
  /** 1/s, from and back. For a racemisation both are the k of ln 2 / (2k). */
  readonly forward: number;
  readonly backward: number;
  /** Of the excess of one hand that it starts from, the part that decays with the sum of both rates; 1 elsewhere. */
  readonly share: number;
}

/** Part of a mode's weight that must change sign under the mirror for the mode to be a racemisation. */
const ODD = 0.05;
/** Degrees from 0 and 180 within which an axis has no hand. */
const IN_PLANE = 5;

/**
 * The observable processes of a network. `temperature` decides only, where each hand has several wells, which of them belong together:
 * those that the slowest racemising mode keeps together. `handedAxis`: the bond joins two planar atoms of a molecule with a fixed stereocentre,
 * so that the wells on either side of the plane are diastereomers.
 */
export function observableProcesses(
  network: WellNetwork,
  wells: readonly RelatedWell[],
  temperature: number,
  handedAxis = false,
): Process[] {
  const processes: Process[] = [];
  const mirrored = handsOf(network, wells, temperature);
  const hands = mirrored ?? (handedAxis ? sidesOfPlane(wells) : null);
  if (hands) {
    const [from, to] = [1, -1].map((hand) => hands.flatMap((value, i) => (value === hand ? [i] : [])));
    processes.push({ kind: mirrored ? 'racemisation' : 'diastereomerisation', from, to, routes: routesBetween(network, from, to) });
  }
  const species = [...new Set(wells.map((well) => well.species))].sort((a, b) => a - b);
  const members = (s: number): number[] => wells.flatMap((well, i) => (well.species === s ? [i] : []));
  for (const s of species)
    for (const t of species) {
      if (t <= s) continue;
      // where each side of an axis is one rotamer, their exchange is the change of hand and stands there already
      if (!mirrored && hands && members(s).length + members(t).length === 2 && hands[members(s)[0]] * hands[members(t)[0]] < 0) continue;
      const routes = routesBetween(network, members(s), members(t)).filter((route) => route.wells.length === 2);
      if (routes.length > 0) processes.push({ kind: 'exchange', from: members(s), to: members(t), routes });
    }
  for (const s of species) {
    const first = members(s)[0];
    const copies = wells[first].identical;
    const routes = routesBetween(network, [first], copies).filter((route) => route.wells.length === 2);
    if (routes.length > 0) processes.push({ kind: 'topomerisation', from: [first], to: copies, routes });
  }
  return processes;
}

/** Height of the process's lowest route above the lowest well it starts from, kcal/mol; null where a route holds an unknown barrier. */
export function lowestBarrier({ routes, from }: Process, { wells }: WellNetwork): number | null {
  let lowest = Number.POSITIVE_INFINITY;
  for (const { highest } of routes) {
    if (highest === null) return null;
    lowest = Math.min(lowest, highest);
  }
  return lowest - Math.min(...from.map((i) => wells[i]));
}

/**
 * Rates of a process at T; null where a route leads over an unknown barrier.
 *
 * An exchange adds the rates over all barriers between the two rotamers, weighted by the populations within each. A change of hand comes from the
 * relaxation modes of the whole turn, as routes may pass other wells: the slowest mode that the excess decays with is the sum of both rates, which
 * share it in the ratio of the populations; for mirror images each is half of it.
 */
export function processRates(process: Process, network: WellNetwork, temperature: number): ProcessRates | null {
  if (process.routes.some((route) => route.highest === null)) return null;
  const changesHand = process.kind === 'racemisation' || process.kind === 'diastereomerisation';
  return changesHand ? handRates(process, network, temperature) : directRates(process, network, temperature);
}

function directRates({ kind, from, to, routes }: Process, network: WellNetwork, temperature: number): ProcessRates {
  const rates = barrierRates(network, temperature);
  const p = boltzmannPopulations(network.wells, temperature);
  const total = (set: readonly number[]): number => set.reduce((sum, i) => sum + p[i], 0);
  let flux = 0;
  for (const { wells, barriers } of routes) {
    const rate = rates[barriers[0]];
    if (!rate) continue;
    // a route walked against the numbering takes the barrier backwards
    flux += p[wells[0]] * (barriers[0] === wells[0] && wells[1] === (wells[0] + 1) % p.length ? rate.forward : rate.backward);
  }
  const forward = flux / total(from);
  return { forward, backward: kind === 'topomerisation' ? forward : flux / total(to), share: 1 };
}

function handRates({ from, to }: Process, network: WellNetwork, temperature: number): ProcessRates | null {
  const p = boltzmannPopulations(network.wells, temperature);
  const total = (set: readonly number[]): number => set.reduce((sum, i) => sum + p[i], 0);
  const [ofFrom, ofTo] = [total(from), total(to)];
  const hand = Float64Array.from(p, (_, i) => (from.includes(i) ? 1 : to.includes(i) ? -1 : 0));
  // started from one hand in equilibrium with itself: excess(t) = its final value + sum over modes of (h . p phi)(phi . q) exp(-rate t)
  const modes = relaxationModes(network, temperature).map(({ rate, shape }) => {
    let observed = 0;
    let prepared = 0;
    for (let i = 0; i < p.length; i++) {
      observed += hand[i] * p[i] * shape[i];
      if (hand[i] === 1) prepared += (p[i] / ofFrom) * shape[i];
    }
    return { rate, share: (observed * prepared) / (1 - (ofFrom - ofTo)) };
  });
  for (const { rate } of modes) {
    // modes of equal rate mix at will: only together do they say how much of the excess decays with it
    const share = modes.reduce((sum, mode) => sum + (Math.abs(mode.rate - rate) <= 1e-6 * rate ? mode.share : 0), 0);
    if (share > ODD) return { forward: (rate * ofTo) / (ofFrom + ofTo), backward: (rate * ofFrom) / (ofFrom + ofTo), share };
  }
  return null;
}

/** +1 and -1 for wells on either side of the plane, 0 for those in it; null unless both sides hold wells that are not the same molecule. */
function sidesOfPlane(wells: readonly RelatedWell[]): number[] | null {
  const sides = wells.map(({ angle }) => (Math.abs(Math.sin(radians(angle))) < Math.sin(radians(IN_PLANE)) ? 0 : Math.sign(angle)));
  const same = wells.some(({ identical }, i) => identical.some((j) => sides[i] * sides[j] < 0));
  return sides.includes(1) && sides.includes(-1) && !same ? sides : null;
}

/**
 * +1 and -1 for the wells of either hand, 0 for wells without; null where the turn has no hands. A well whose mirror image is also the same
 * molecule relabelled has none: what is handed there is another part of the molecule, which this rotor does not turn over.
 */
function handsOf(network: WellNetwork, wells: readonly RelatedWell[], temperature: number): number[] | null {
  const handed = (i: number): boolean => {
    const same = [i, ...wells[i].identical];
    return wells[i].mirrorImages.length > 0 && !same.some((j) => wells[j].mirrorImages.some((k) => same.includes(k)));
  };
  if (!wells.some((_, i) => handed(i))) return null;
  const slow = network.barriers.includes(null) ? null : slowestOddMode(network, wells, temperature);
  const hands = wells.map(() => 0);
  wells.forEach((well, i) => {
    if (!handed(i) || hands[i] !== 0) return;
    const j = well.mirrorImages[0];
    const hand = slow ? Math.sign(slow.shape[i] - slow.shape[j]) || 1 : Math.sign(well.angle) || 1;
    for (const k of [i, ...well.identical]) hands[k] = hand;
    for (const k of well.mirrorImages) hands[k] = -hand;
  });
  // the hand of the first well with a positive angle is written first
  const first = hands.findIndex((hand, i) => hand !== 0 && wells[i].angle > 0);
  return first >= 0 && hands[first] < 0 ? hands.map((hand) => -hand || 0) : hands;
}

function slowestOddMode(network: WellNetwork, wells: readonly RelatedWell[], temperature: number): RelaxationMode | null {
  const p = boltzmannPopulations(network.wells, temperature);
  for (const mode of relaxationModes(network, temperature)) {
    let odd = 0;
    wells.forEach(({ mirrorImages }, i) => {
      if (mirrorImages.length > 0) odd += p[i] * ((mode.shape[i] - mode.shape[mirrorImages[0]]) / 2) ** 2;
    });
    if (odd > ODD) return mode;
  }
  return null;
}

/** Barriers refined to first-order saddles, and the saddles behind crossings of branches. */

import type { Calculation } from '../potential.js';
import { halfway, over, pointsBeside } from './climb.js';
import { invertedBetween, type Motion, turningMotion } from './motion.js';
import { dot } from './projected-modes.js';
import {
  angleOf,
  type Candidate,
  type Candidates,
  displaced,
  MOST_EVALUATIONS,
  MOST_TRIES,
  type PathEnd,
  type Proof,
  type ProvedPoint,
  PUSH,
  plain,
  refined,
  say,
  TAKES_PART,
} from './proof-task.js';
import type { StationaryStructure } from './saddle.js';
import { type Bottom, crossesOver, isAt, type Link, linkAt, motionAt, softest } from './saddle-link.js';
import { wayBetween, wayOver } from './way-between.js';

export function* provedBarrier(
  work: Proof,
  candidate: Candidate,
  of: number,
  wells: readonly ProvedPoint[],
  beside: readonly ProvedPoint[],
): Calculation<ProvedPoint> {
  const {
    sides,
    torsion: [, a, b],
  } = work.rotor;
  let found = yield* refined(work, candidate.coordinates, 1, [turningMotion(candidate.coordinates, a, b, sides.b)]);
  const first = found.order;
  // off a ridge there are saddles lower down; where the profile's own point lies on one, that is said
  for (let n = 0; n < 3 && found.converged && found.order > 1; n++) {
    const turn = turningMotion(found.coordinates, a, b, sides.b);
    const other = found.modes.vectors.slice(0, found.order).reduce((p, q) => (Math.abs(dot(q, turn)) < Math.abs(dot(p, turn)) ? q : p));
    found = yield* refined(work, displaced(found.coordinates, other, PUSH), 1, [turn]);
  }
  if (first > 1)
    say(
      work,
      'stationary/higher-order',
      `the barrier at ${candidate.angle.toFixed(1)} degrees is a stationary point of order ${first}${found.order === 1 ? `; the saddle beside it was taken, at ${angleOf(work, found.coordinates).toFixed(1)} degrees` : ''}`,
    );
  const link = yield* linkAt(work, found);
  const way: Link[] | null = link && beside.length > 0 ? yield* wayOver(work, link, beside, wells) : null;
  const assumed = link !== null && way === null && crossesOver(link, beside);
  const point = link ? ofWay(work, of, candidate, way ?? [link], way !== null || assumed, wells) : unproved(work, of, candidate, found);
  if (assumed) sayAssumed(work, candidate, point);
  else if (!way) say(work, 'stationary/barrier', `the barrier at ${candidate.angle.toFixed(1)} degrees ${inWords(point)}`);
  return point;
}

function sayAssumed(work: Proof, { angle }: Candidate, point: ProvedPoint): void {
  const ends = (point.ends ?? []).map((end) => end.angle.toFixed(1)).join(' and ');
  say(
    work,
    'stationary/other-conformers',
    `the saddle taken for the maximum at ${angle.toFixed(1)} degrees joins other conformers of the wells beside it, at ${ends} degrees; that these interconvert with the wells faster than the rotor turns is assumed, not proved`,
  );
}

/** The highest saddle of a way, as the point that stands for it. */
function ofWay(
  work: Proof,
  of: number,
  candidate: Candidate,
  way: readonly Link[],
  joined: boolean,
  wells: readonly ProvedPoint[],
): ProvedPoint {
  const top = way.reduce((p, q) => (q.structure.energy > p.structure.energy ? q : p));
  const end = (bottom: Bottom): PathEnd => {
    const well = wells.find((other) => isAt(work, other, bottom));
    return { well: well ? well.of : null, angle: bottom.angle, energy: bottom.energy };
  };
  const [p, q] = top.bottoms;
  // wells that only another bond's turn joins are not parted by this rotor
  const own = top.overlap >= TAKES_PART || top.motion.kind === 'inversion';
  return {
    ...plain(work, top.structure, of, candidate.kind, candidate.coordinates),
    verdict: joined && own ? 'saddle' : 'other saddle',
    overlap: top.overlap,
    motion: top.motion,
    ends: [end(p), end(q)],
    inverts: invertedBetween(work.molecule, p.coordinates, q.coordinates),
    links: joined && own ? way.length : 0,
    sameAs: null,
  };
}

/** A structure that is no first-order saddle. */
function unproved(work: Proof, of: number, candidate: Candidate, found: StationaryStructure): ProvedPoint {
  const higher = found.converged && found.order > 1;
  const seen = higher ? motionAt(work, found, softest(work, found)) : null;
  return {
    ...plain(work, found, of, candidate.kind, candidate.coordinates),
    verdict: higher ? 'higher order' : 'not found',
    overlap: seen?.overlap ?? null,
    motion: seen?.motion ?? null,
    ends: null,
    inverts: [],
    links: 0,
    sameAs: null,
  };
}

function inWords({ verdict, order, ends, motion, converged }: ProvedPoint): string {
  if (!converged) return 'could not be refined to a stationary point';
  if (verdict === 'higher order') return `is a stationary point of order ${order}, no saddle`;
  if (verdict === 'not found') return 'has no negative eigenvalue when it is refined: it is no saddle';
  const where = (ends ?? []).map((end) => `${end.angle.toFixed(1)} degrees${end.well === null ? ' (no well of this profile)' : ''}`);
  return `is a saddle${motion ? motionInWords(motion) : ''} whose paths down end at ${where.join(' and ')}, not joined to the wells beside it`;
}

function motionInWords({ kind, atoms }: Motion): string {
  switch (kind) {
    case 'rotor':
      return ' of this rotor';
    case 'other rotor':
      return ` of turning about ${atoms.join('-')}`;
    case 'inversion':
      return ` of inversion at atom ${atoms.join()}`;
    case 'other':
      return '';
  }
}

/** Degrees between the geometries of a branch that is followed past a crossing, and how far. */
const PAST = 5;

const FARTHEST_PAST = 90;

/**
 * The saddle behind a crossing of branches. Each branch is followed past the crossing until it tops out or is left, which gives a start on either side;
 * a third one stands halfway between the branches, and the wells may be joined without turning this rotor at all. Of the ways that join the wells that with
 * the lowest highest saddle is taken.
 */
export function* provedCrossing(
  work: Proof,
  profile: Candidates,
  of: number,
  wells: readonly ProvedPoint[],
  beside: readonly ProvedPoint[],
): Calculation<ProvedPoint> {
  const candidate = profile.stationaryPoints[of];
  const [left, right] = pointsBeside(profile, candidate.angle);
  const starts = [
    yield* over(work, work.rotor, left.coordinates, 1, PAST, FARTHEST_PAST),
    yield* over(work, work.rotor, right.coordinates, -1, PAST, FARTHEST_PAST),
    yield* halfway(work, left, right, candidate.angle),
  ].flatMap((start) => (start ? [start] : []));

  const joined: Link[][] = [];
  const crossing: Link[] = [];
  const others: ProvedPoint[] = [];
  if (beside.length > 0 && beside[0] !== beside[1]) {
    // the way there and the way back climb from different sides
    const way = (yield* wayBetween(work, beside[0], beside[1], wells)) ?? (yield* wayBetween(work, beside[1], beside[0], wells));
    if (way && way.length > 0) joined.push(way);
    work.tries = MOST_TRIES;
    work.limit = work.evaluations + MOST_EVALUATIONS;
  }
  for (const { x, follow } of starts) {
    if (others.length + crossing.length > 0 && work.evaluations > work.limit) break;
    const structure = yield* refined(work, x, 1, follow ? [follow] : []);
    const link = yield* linkAt(work, structure);
    const way: Link[] | null = link && beside.length > 0 ? yield* wayOver(work, link, beside, wells) : null;
    if (way) joined.push(way);
    else if (link && crossesOver(link, beside)) crossing.push(link);
    else others.push(link ? ofWay(work, of, candidate, [link], false, wells) : unproved(work, of, candidate, structure));
  }
  if (joined.length > 0) {
    const height = (way: readonly Link[]): number => Math.max(...way.map(({ structure }) => structure.energy));
    return ofWay(
      work,
      of,
      candidate,
      joined.reduce((p, q) => (height(q) < height(p) ? q : p)),
      true,
      wells,
    );
  }
  if (crossing.length > 0) {
    const lowest = crossing.reduce((p, q) => (q.structure.energy < p.structure.energy ? q : p));
    const point = ofWay(work, of, candidate, [lowest], true, wells);
    sayAssumed(work, candidate, point);
    return point;
  }
  const best =
    others.find(({ verdict }) => verdict === 'other saddle') ??
    others[0] ??
    unproved(work, of, candidate, yield* refined(work, candidate.coordinates, 1, []));
  say(
    work,
    'stationary/crossing',
    `no saddle that joins the wells on both sides was found behind the crossing at ${candidate.angle.toFixed(1)} degrees: the best candidate ${inWords(best)}`,
  );
  return best;
}

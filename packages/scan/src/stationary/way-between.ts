/** The way from one minimum to another over a chain of proved saddles. */

import { wrapDegrees } from '@tordial/geometry';
import type { Calculation } from '../potential.js';
import { startsTowards } from './climb.js';
import { angleOf, type Proof, type ProvedPoint, refined } from './proof-task.js';
import { type Bottom, isAt, type Link, linkAt } from './saddle-link.js';

/** Saddles that a way between two minima may pass. */
const MOST_LINKS = 4;

/** Degrees by which a saddle on the way may stand outside of the arc between the wells. */
const BESIDE = 30;

/** Whether the rotor of a structure stands between the two wells, and not on the other way round. */
function isOnArc({ arc }: Proof, angle: number): boolean {
  const past = (((angle - arc.from) % 360) + 360) % 360;
  return past <= arc.width + BESIDE || past >= 360 - BESIDE;
}

/**
 * The way from one minimum to another whose rotors or nitrogens differ: one saddle after another, each of which is proved to start where the one before
 * ended. Null where none is found.
 */
export function* wayBetween(work: Proof, from: Bottom, to: Bottom, wells: readonly ProvedPoint[]): Calculation<Link[] | null> {
  const links: Link[] = [];
  let at = from;
  while (!isAt(work, at, to)) {
    if (links.length === MOST_LINKS) return null;
    let onward: Bottom | null = null;
    for (const start of yield* startsTowards(work, at, to)) {
      if (--work.tries < 0 || work.evaluations > work.limit) return null;
      const link: Link | null = yield* linkAt(work, yield* refined(work, start.x, 1, start.follow ? [start.follow] : []));
      if (!link) continue;
      const here = link.bottoms.findIndex((bottom) => isAt(work, bottom, at));
      if (here < 0 || !isOnArc(work, angleOf(work, link.structure.coordinates))) continue;
      const there = link.bottoms[1 - here];
      // nothing is gained by coming back, and a way over a third well belongs to other barriers
      if (isAt(work, there, at) || wells.some((well) => isAt(work, there, well) && !isAt(work, there, to))) continue;
      links.push(link);
      onward = there;
      break;
    }
    if (!onward) return null;
    at = onward;
  }
  return links;
}

/** All saddles on the way from the well before to the well after over `first`; null where they are not joined. */
export function* wayOver(
  work: Proof,
  first: Link,
  [before, after]: readonly ProvedPoint[],
  wells: readonly ProvedPoint[],
): Calculation<Link[] | null> {
  const [p, q] = first.bottoms;
  if (before === after) {
    const angle = angleOf(work, first.structure.coordinates);
    const opposite = wrapDegrees(p.angle - angle) * wrapDegrees(q.angle - angle) < 0;
    return opposite && isAt(work, p, before) && isAt(work, q, before) ? [first] : null;
  }
  const crossed = isAt(work, p, after) || isAt(work, q, before);
  const [near, far] = crossed ? [q, p] : [p, q];
  const head = yield* wayBetween(work, near, before, wells);
  if (!head) return null;
  const tail = yield* wayBetween(work, far, after, wells);
  return tail && [...head, first, ...tail];
}

/**
 * Scans of a torsion inside a ring. The ring is driven from each start, step by step, up and down as far as it holds; the search for the lower
 * envelope then works on what was reached, as it does for a rotor.
 */
import { type Coordinates, degrees, radians, TordialError, wrapDegrees } from '@tordial/geometry';
import { type HeldMinimum, lowest } from './branches.js';
import { rotorAngle } from './driven-rotor.js';
import { hold, nearestPlace, newSearch, type Search, startAt, sweep } from './envelope-search.js';
import { minimise } from './minimise.js';
import { modelHessian } from './model-hessian.js';
import type { Calculation } from './potential.js';
import { ringGuard } from './ring-torsion.js';
import type { ScanTask } from './scan-task.js';

/**
 * A search over the angles that the ring reaches, its starts held at one of them; a note says what was left out and why.
 * Throws `scan/ring-broken` when fewer than three angles are reached.
 */
export function* searchInRing(scan: ScanTask, image: Search['mirror']): Calculation<Search> {
  const free = yield* minimise(scan.starts[0], modelHessian(scan.molecule));
  scan.evaluations += free.evaluations;
  const guard = ringGuard(scan.molecule, scan.rotor, free.coordinates, free.energy);
  const search = newSearch(scan, image, guard);
  const starts: Coordinates[] = [];
  let reason = '';
  for (const start of scan.starts.flatMap((one) => nearestForms(search, one))) {
    try {
      const first = yield* startAt(search, yield* approached(search, start));
      starts.push(first.coordinates);
      yield* sweep(search, first, 1);
      yield* sweep(search, first, -1);
    } catch (error) {
      if (!(error instanceof TordialError) || error.code !== 'scan/ring-broken') throw error;
      reason = error.message;
    }
  }
  const [from, to] = reachedPlaces(search);
  if (to - from < 2)
    throw new TordialError(
      'scan/ring-broken',
      `fewer than 3 angles of the range can be reached: ${reason || (yield* whyNot(search, from, to))}; choose a range about the angle that the ring has`,
    );
  if (to - from + 1 === scan.angles.length) return { ...search, scan: { ...scan, starts } };

  scan.notes.push({
    code: 'scan/ring-broken',
    message: `the profile covers ${scan.angles[from]} to ${scan.angles[to]} degrees of the range: ${yield* whyNot(search, from, to)}`,
  });
  const minima = search.map.at.slice(from, to + 1).flatMap((_, n) => lowest(search.map, from + n) ?? []);
  const trimmed = { ...search.scan, angles: scan.angles.slice(from, to + 1), starts: minima.map(({ coordinates }) => coordinates) };
  return newSearch(trimmed, image, guard);
}

/** Of a start and its mirror image those within the range; the start itself where neither is. */
function nearestForms(search: Search, start: Coordinates): Coordinates[] {
  const forms = search.mirror ? [start, search.mirror(start)] : [start];
  const within = forms.filter((x) => Math.abs(restToGrid(search, x)) <= search.scan.step);
  return within.length > 0 ? within : [start];
}

/** Degrees from a geometry's angle to the nearest grid angle. */
function restToGrid(search: Search, x: Coordinates): number {
  const { rotor, angles } = search.scan;
  return wrapDegrees(angles[nearestPlace(search, x)] - degrees(rotorAngle(rotor, x)));
}

/** A start driven to the nearest grid angle, no farther than a step at a time. */
function* approached(search: Search, start: Coordinates): Calculation<Coordinates> {
  const { rotor, step } = search.scan;
  let x = start;
  for (;;) {
    const rest = restToGrid(search, x);
    if (Math.abs(rest) <= step) return x;
    ({ coordinates: x } = yield* hold(search, rotorAngle(rotor, x) + radians(Math.sign(rest) * step), x));
  }
}

/** First and last place of the unbroken stretch about the lowest minimum. */
function reachedPlaces({ map }: Search): [number, number] {
  const best = map.at.map((_, place) => lowest(map, place));
  const known = best.flatMap((minimum) => minimum ?? []);
  if (known.length === 0) return [0, -1];
  const { place } = known.reduce((low: HeldMinimum, one) => (one.energy < low.energy ? one : low));
  let [from, to] = [place, place];
  while (best[from - 1]) from--;
  while (best[to + 1]) to++;
  return [from, to];
}

/** What happens one step beyond either end of what was reached. */
function* whyNot(search: Search, from: number, to: number): Calculation<string> {
  const { angles } = search.scan;
  const reasons: string[] = [];
  for (const [last, beyond] of [
    [from, from - 1],
    [to, to + 1],
  ]) {
    const edge = search.map.at[last] ? lowest(search.map, last) : undefined;
    if (!edge || beyond < 0 || beyond >= angles.length) continue;
    try {
      yield* hold(search, radians(angles[beyond]), edge.coordinates);
      reasons.push(`no geometry found leads on to ${angles[beyond]} degrees`);
    } catch (error) {
      if (!(error instanceof TordialError)) throw error;
      reasons.push(error.message);
    }
  }
  return reasons.join('; ');
}

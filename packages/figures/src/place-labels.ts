import { type Box, boxesOverlap, segmentMeetsBox } from './boxes.js';

/** A label that wants to stand near the point (x, y), px. */
export interface LabelRequest {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
  /** The side that is tried first. */
  readonly side: 'above' | 'below';
}

export type Segment = readonly [x0: number, y0: number, x1: number, y1: number];

/** What labels must not touch, and what they should rather not cover. */
export interface Obstacles {
  readonly boxes: readonly Box[];
  readonly segments: readonly Segment[];
  readonly avoided: readonly Segment[];
}

export interface PlacedLabel {
  readonly box: Box;
  /** A line from the point to a label that stands apart from it. */
  readonly tie: Segment | undefined;
}

/** Distances between the point and its label that are tried, px. */
const DISTANCES = [8, 11, 15, 20, 27, 36, 48, 64, 84];
/** Directions as turns away from the preferred side, degrees, with the extra cost of each. */
const DIRECTIONS: readonly (readonly [number, number])[] = [0, 20, -20, 40, -40, 65, -65, 90, -90, 115, -115, 140, -140, 180].map(
  (turn) => [turn, Math.abs(turn) / 9],
);
const MARGIN = 3;
const TIED_FROM = 14;
/** Cost of covering a line that should rather stay visible, and of standing nearer to another label's point than to its own. */
const COVERING_COST = 14;
const AMBIGUITY_COST = 25;
const PASSES = 4;

interface Candidate extends PlacedLabel {
  readonly cost: number;
}

/**
 * Finds a place for every label such that none touches another one, an obstacle or the frame, near its point and on its preferred side where possible.
 * The labels with the fewest free places choose first; then each in turn takes the best place that the others leave, until nothing changes.
 * A label for which nothing is free stays undefined.
 */
export function placeLabels(requests: readonly LabelRequest[], obstacles: Obstacles, frame: Box): (PlacedLabel | undefined)[] {
  const candidates = requests.map((request, n) => freePlaces(request, requests.toSpliced(n, 1), obstacles, frame));
  const chosen = new Array<Candidate | undefined>(requests.length).fill(undefined);
  const best = (n: number): Candidate | undefined =>
    candidates[n].find((candidate) => chosen.every((other, m) => m === n || !other || !inConflict(candidate, other)));
  // a label without a free place takes one from others that find another place
  const makeRoom = (n: number): Candidate | undefined => {
    for (const candidate of candidates[n]) {
      const before = [...chosen];
      chosen[n] = candidate;
      const evicted = before.flatMap((other, m) => (m !== n && other && inConflict(candidate, other) ? [m] : []));
      for (const m of evicted) chosen[m] = undefined;
      for (const m of evicted) chosen[m] = best(m);
      if (evicted.every((m) => chosen[m])) return candidate;
      before.forEach((other, m) => {
        chosen[m] = other;
      });
    }
    return undefined;
  };
  const order = requests.map((_, n) => n).sort((p, q) => candidates[p].length - candidates[q].length || p - q);
  for (let pass = 0; pass < PASSES; pass++) {
    let changed = false;
    for (const n of order) {
      const place = best(n) ?? makeRoom(n);
      if (place !== chosen[n]) changed = true;
      chosen[n] = place;
    }
    if (!changed) break;
  }
  return chosen.map((place) => place && { box: place.box, tie: place.tie });
}

function inConflict(p: PlacedLabel, q: PlacedLabel): boolean {
  return (
    boxesOverlap(p.box, q.box, MARGIN) || (p.tie !== undefined && meets(p.tie, q.box, 1)) || (q.tie !== undefined && meets(q.tie, p.box, 1))
  );
}

/** All places that touch no obstacle, the best first. */
function freePlaces(request: LabelRequest, others: readonly LabelRequest[], everything: Obstacles, frame: Box): Candidate[] {
  const obstacles = withinReach(request, everything);
  const places: Candidate[] = [];
  for (const distance of DISTANCES)
    for (const [turn, cost] of DIRECTIONS) {
      const box = boxAt(request, distance, turn);
      if (
        box.left < frame.left + MARGIN ||
        box.right > frame.right - MARGIN ||
        box.top < frame.top + MARGIN ||
        box.bottom > frame.bottom - MARGIN
      )
        continue;
      if (obstacles.boxes.some((other) => boxesOverlap(box, other, 2))) continue;
      if (obstacles.segments.some((segment) => meets(segment, box, MARGIN))) continue;
      const [nearX, nearY] = nearestTo(request, box);
      const gap = Math.hypot(nearX - request.x, nearY - request.y);
      const ambiguous = others.some((other) => {
        const [x, y] = nearestTo(other, box);
        return Math.hypot(x - other.x, y - other.y) < gap + 1;
      });
      const tie: Segment | undefined = ambiguous || gap > TIED_FROM ? [request.x, request.y, nearX, nearY] : undefined;
      if (tie && runsInto(tie, obstacles)) continue;
      const covered = obstacles.avoided.filter((segment) => meets(segment, box, 1)).length;
      places.push({ box, tie, cost: distance + cost + COVERING_COST * covered + (ambiguous ? AMBIGUITY_COST : 0) });
    }
  return places.sort((p, q) => p.cost - q.cost);
}

/** The obstacles that a label of this point could come near to, wherever it stands. */
function withinReach({ x, y, width, height }: LabelRequest, { boxes, segments, avoided }: Obstacles): Obstacles {
  const reach = DISTANCES[DISTANCES.length - 1] + 2 * MARGIN;
  const around = { left: x - width - reach, right: x + width + reach, top: y - height - reach, bottom: y + height + reach };
  return {
    boxes: boxes.filter((box) => boxesOverlap(box, around)),
    segments: segments.filter((segment) => meets(segment, around, 0)),
    avoided: avoided.filter((segment) => meets(segment, around, 0)),
  };
}

function meets(segment: Segment, box: Box, margin: number): boolean {
  return segmentMeetsBox(segment[0], segment[1], segment[2], segment[3], box, margin);
}

/** Whether a tie meets an obstacle other than the point's own marker, where it begins. */
function runsInto([x0, y0, x1, y1]: Segment, { boxes, segments }: Obstacles): boolean {
  const t = Math.min(1, TIED_FROM / 2 / Math.hypot(x1 - x0, y1 - y0));
  const startX = x0 + t * (x1 - x0);
  const startY = y0 + t * (y1 - y0);
  return (
    boxes.some(
      (box) => !(box.left <= x0 && box.right >= x0 && box.top <= y0 && box.bottom >= y0) && segmentMeetsBox(startX, startY, x1, y1, box),
    ) || segments.some((segment) => cross(startX, startY, x1, y1, segment))
  );
}

/** Whether the segment (ax, ay)-(bx, by) crosses another one. */
function cross(ax: number, ay: number, bx: number, by: number, segment: Segment): boolean {
  const [cx, cy, dx, dy] = segment;
  return side(ax, ay, bx, by, cx, cy) * side(ax, ay, bx, by, dx, dy) < 0 && side(cx, cy, dx, dy, ax, ay) * side(cx, cy, dx, dy, bx, by) < 0;
}

/** Sign tells on which side of the line p-q the point r lies. */
function side(px: number, py: number, qx: number, qy: number, rx: number, ry: number): number {
  return (qx - px) * (ry - py) - (qy - py) * (rx - px);
}

function boxAt({ x, y, width, height, side }: LabelRequest, distance: number, turn: number): Box {
  const angle = (turn * Math.PI) / 180;
  const across = Math.sin(angle);
  const down = (side === 'above' ? -1 : 1) * Math.cos(angle);
  const centreX = x + across * (distance + width / 2);
  const centreY = y + down * (distance + height / 2);
  return { left: centreX - width / 2, right: centreX + width / 2, top: centreY - height / 2, bottom: centreY + height / 2 };
}

/** The point of a box that lies nearest to a label's point. */
function nearestTo({ x, y }: LabelRequest, box: Box): [number, number] {
  return [Math.min(box.right, Math.max(box.left, x)), Math.min(box.bottom, Math.max(box.top, y))];
}

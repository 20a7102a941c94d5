/**
 * Usual bond angles: by element and shape of the centre, the inner angles of small and flat rings, and what these leave for the
 * other angles at the same centre.
 *
 * The defaults are common-practice values (valence-shell electron-pair repulsion with the usual narrowing at P, S and their kind).
 */
import type { Molecule } from '../molecule.js';
import type { Shapes } from './shapes.js';

/** One row an angle i-j-k, j the centre, i < k. */
export interface AngleTable {
  readonly count: number;
  readonly i: Int32Array;
  readonly j: Int32Array;
  readonly k: Int32Array;
  /** Radians. */
  readonly angle: Float64Array;
  /** How far the angle may lie from the usual one, radians. */
  readonly tolerance: Float64Array;
  /** Size of the smallest ring through i, j and k; 0 for none. */
  readonly ring: Int32Array;
}

const RADIANS = Math.PI / 180;
/** Weight of the inner angle of a small ring against the others at a centre. */
const KEPT = 8;
const STRAIGHT_IN_RING: Readonly<Record<number, number>> = { 8: 157, 9: 163, 10: 168, 11: 171 };

/** The usual angle of every pair of bonds at an atom. */
export function bondAngles(molecule: Molecule, shapes: Shapes): AngleTable {
  const { atomCount, atomicNumbers, neighbours, rings } = molecule;
  const ringOf = new Map<number, number>();
  const key = (i: number, j: number, k: number) => (Math.min(i, k) * atomCount + j) * atomCount + Math.max(i, k);
  rings.forEach((ring, n) => {
    for (let m = 0; m < ring.length; m++) {
      const at = key(ring[m], ring[(m + 1) % ring.length], ring[(m + 2) % ring.length]);
      if (!ringOf.has(at)) ringOf.set(at, n);
    }
  });

  const rows: { i: number; j: number; k: number; angle: number; tolerance: number; ring: number }[] = [];
  for (let j = 0; j < atomCount; j++) {
    const around = neighbours.atom.subarray(neighbours.start[j], neighbours.start[j + 1]);
    if (around.length < 2) continue;
    const local: typeof rows = [];
    for (let p = 0; p < around.length; p++)
      for (let q = p + 1; q < around.length; q++) {
        const n = ringOf.get(key(around[p], j, around[q])) ?? -1;
        const size = n < 0 ? 0 : rings[n].length;
        const inner = n < 0 ? null : ringAngle(n, j);
        local.push({
          i: around[p],
          j,
          k: around[q],
          angle: inner ?? openAngle(around[p], j, around[q]),
          tolerance: inner === null ? 5 : shapes.flatRing[n] ? 2.5 : size <= 4 ? 4 : 5,
          ring: size,
        });
      }
    if (shapes.steric[j] === 3) sharePlane(local, around);
    else if (shapes.steric[j] === 4 && local.some(({ ring }) => ring > 0 && ring < 6)) shareSphere(local, around);
    if (shapes.steric[j] > 4) for (const row of local) row.tolerance = 90;
    rows.push(...local);
  }
  return {
    count: rows.length,
    i: Int32Array.from(rows, ({ i }) => i),
    j: Int32Array.from(rows, ({ j }) => j),
    k: Int32Array.from(rows, ({ k }) => k),
    angle: Float64Array.from(rows, ({ angle }) => angle * RADIANS),
    tolerance: Float64Array.from(rows, ({ tolerance }) => tolerance * RADIANS),
    ring: Int32Array.from(rows, ({ ring }) => ring),
  };

  /** Inner angle (degrees) of a ring small or flat enough to have one, else null. */
  function ringAngle(n: number, j: number): number | null {
    const ring = rings[n];
    const size = ring.length;
    const trigonal = shapes.steric[j] === 3;
    if (size === 3) return 60;
    if (size === 4) return 89;
    if (size === 5) {
      // a flat five-membered ring is narrow at its heavy atom, and the others share the rest of 540 degrees
      const heavy = ring.reduce((count, i) => count + (atomicNumbers[i] > 10 ? 1 : 0), 0);
      const narrow = 94;
      if (shapes.flatRing[n]) return atomicNumbers[j] > 10 ? narrow : (540 - heavy * narrow) / (5 - heavy);
      return atomicNumbers[j] > 10 ? 94 : trigonal ? 110 : 104;
    }
    if (size === 6 && shapes.flatRing[n]) return atomicNumbers[j] > 10 ? 104 : 120;
    if (size === 6 && atomicNumbers[j] <= 8 && shapes.steric[j] <= 4) return trigonal ? 119 : 111;
    if (size === 7 && shapes.flatRing[n]) return 128.6;
    if (shapes.steric[j] === 2) return STRAIGHT_IN_RING[size] ?? null;
    return null;
  }

  function openAngle(i: number, j: number, k: number): number {
    const element = atomicNumbers[j];
    const degree = neighbours.start[j + 1] - neighbours.start[j];
    const hydrogens = (atomicNumbers[i] === 1 ? 1 : 0) + (atomicNumbers[k] === 1 ? 1 : 0);
    switch (shapes.steric[j]) {
      case 2:
        return 180;
      case 3: {
        if (degree === 2) return element === 7 || element === 6 ? 115 : element > 10 ? 108 : 118;
        const doubled = (end: number) => doubleTo(j, end);
        if (doubled(i) !== doubled(k)) return 122;
        return doubled(i) ? 124 : shapes.unsaturated[j] ? 116 : 120;
      }
      case 4:
        if (degree === 4 && element > 14) {
          const doubles = (doubleTo(j, i) ? 1 : 0) + (doubleTo(j, k) ? 1 : 0);
          return doubles === 2 ? 119 : doubles === 1 ? (element === 16 ? 107.5 : 114) : 103;
        }
        if (degree === 4) return element > 10 ? 109.5 : hydrogens === 0 ? 111.5 : hydrogens === 1 ? 109.3 : 107.8;
        if (degree === 3) return element > 10 ? (doubleTo(j, i) || doubleTo(j, k) ? 106 : 99) : hydrogens === 0 ? 110.5 : 108;
        if (element === 14) return 110;
        if (element > 10) return hydrogens === 0 ? 100 : hydrogens === 1 ? 96 : 92;
        if (atomicNumbers[i] === 14 && atomicNumbers[k] === 14) return 145;
        if (element === 8 && hydrogens === 0)
          return onUnsaturated(i) || onUnsaturated(k) ? 117.5 : atomicNumbers[i] > 10 || atomicNumbers[k] > 10 ? 122 : 112.5;
        return hydrogens === 2 ? 104.5 : 108;
      default:
        return 90;
    }
  }

  function doubleTo(j: number, end: number): boolean {
    for (let n = neighbours.start[j]; n < neighbours.start[j + 1]; n++)
      if (neighbours.atom[n] === end) return molecule.bonds.order[neighbours.bond[n]] === 2;
    return false;
  }

  function onUnsaturated(i: number): boolean {
    return shapes.unsaturated[i] === 1 && shapes.steric[i] === 3;
  }
}

interface LocalAngle {
  readonly i: number;
  readonly k: number;
  angle: number;
  tolerance: number;
  readonly ring: number;
}

/** Angles around a planar centre add up to 360 degrees: those outside of rings take what the inner ones leave. */
function sharePlane(local: LocalAngle[], around: Int32Array): void {
  if (around.length !== 3) return;
  const inner = local.filter(({ ring }) => ring > 0 && ring < 8);
  const outer = local.filter(({ ring }) => ring === 0 || ring >= 8);
  if (inner.length === 0 || outer.length === 0) {
    const excess = (360 - local.reduce((sum, { angle }) => sum + angle, 0)) / 3;
    for (const row of local) row.angle += excess;
    return;
  }
  const rest = 360 - inner.reduce((sum, { angle }) => sum + angle, 0);
  const usual = outer.reduce((sum, { angle }) => sum + angle, 0);
  for (const row of outer) row.angle = Math.min(170, (row.angle * rest) / usual);
}

/**
 * Angles around a tetrahedral centre in small rings: the inner ones are kept, the others come as near to their usual value as
 * directions in space allow (least squares of the cosines, by steepest descent over unit vectors).
 */
function shareSphere(local: LocalAngle[], around: Int32Array): void {
  const count = around.length;
  if (count < 3) return;
  const ringed = new Set(local.filter(({ ring }) => ring > 0 && ring < 6).flatMap(({ i, k }) => [i, k]));
  const place = new Map(Array.from(around, (atom, n) => [atom, n]));
  const pairs = local.map(({ i, k, angle, ring }) => ({
    p: place.get(i) ?? 0,
    q: place.get(k) ?? 0,
    cosine: Math.cos(angle * RADIANS),
    weight: ring > 0 && ring < 6 ? KEPT : ring === 6 ? 2 : ringed.has(i) || ringed.has(k) ? 1 : 3,
  }));
  const corners = [1, 1, 1, 1, -1, -1, -1, 1, -1, -1, -1, 1];
  const direction = Float64Array.from({ length: 3 * count }, (_, n) => corners[n] / Math.sqrt(3) + 0.01 * ((n % 4) - 1));
  const slope = new Float64Array(3 * count);
  for (let step = 0; step < 300; step++) {
    slope.fill(0);
    for (const { p, q, cosine, weight } of pairs) {
      const is =
        direction[3 * p] * direction[3 * q] + direction[3 * p + 1] * direction[3 * q + 1] + direction[3 * p + 2] * direction[3 * q + 2];
      const pull = weight * (is - cosine);
      for (let c = 0; c < 3; c++) {
        slope[3 * p + c] += pull * direction[3 * q + c];
        slope[3 * q + c] += pull * direction[3 * p + c];
      }
    }
    for (let p = 0; p < count; p++) {
      let norm = 0;
      for (let c = 3 * p; c < 3 * p + 3; c++) {
        direction[c] -= 0.04 * slope[c];
        norm += direction[c] * direction[c];
      }
      norm = Math.sqrt(norm);
      for (let c = 3 * p; c < 3 * p + 3; c++) direction[c] /= norm;
    }
  }
  local.forEach((row, n) => {
    const { p, q, weight } = pairs[n];
    if (weight === KEPT) return;
    const is =
      direction[3 * p] * direction[3 * q] + direction[3 * p + 1] * direction[3 * q + 1] + direction[3 * p + 2] * direction[3 * q + 2];
    row.angle = Math.acos(Math.max(-1, Math.min(1, is))) / RADIANS;
    row.tolerance = 8;
  });
}

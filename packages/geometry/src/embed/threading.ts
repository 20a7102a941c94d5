/** Rings that a bond or another ring passes through: impossible structures that no relaxation would undo. */
import type { BondTable } from '../molecule.js';

/** A larger ring may hold the end of a chain; through a smaller one no bond fits. */
const LARGEST_CLOSED_RING = 9;

/** Why the rings at coordinates x (angstrom) are impossible, or null: a bond through a small ring, or two rings linked like a chain's. */
export function threadedRing(rings: readonly Int32Array[], bonds: BondTable, x: Float64Array): string | null {
  const fans = rings.map((ring) => ringFan(ring, x));
  for (let r = 0; r < rings.length; r++) {
    const ring = rings[r];
    if (ring.length > LARGEST_CLOSED_RING) continue;
    const fan = fans[r];
    for (let n = 0; n < bonds.count; n++) {
      const [i, j] = [bonds.a[n], bonds.b[n]];
      const reach = Math.hypot(
        (x[3 * i] + x[3 * j]) / 2 - fan[0],
        (x[3 * i + 1] + x[3 * j + 1]) / 2 - fan[1],
        (x[3 * i + 2] + x[3 * j + 2]) / 2 - fan[2],
      );
      if (reach > 3.5 || ring.includes(i) || ring.includes(j)) continue;
      if (crossings(fan, x, i, j).count > 0) return `the bond ${i}-${j} passes through the ring of atoms ${ring.join(', ')}`;
    }
  }
  for (let r = 0; r < rings.length; r++) {
    if (rings[r].length <= LARGEST_CLOSED_RING) continue;
    for (let s = 0; s < rings.length; s++) {
      if (s === r || (rings[s].length > LARGEST_CLOSED_RING && s > r) || rings[s].some((i) => rings[r].includes(i))) continue;
      let linking = 0;
      for (let m = 0; m < rings[s].length; m++) linking += crossings(fans[r], x, rings[s][m], rings[s][(m + 1) % rings[s].length]).signed;
      if (linking !== 0) return `the rings of atoms ${rings[r].join(', ')} and ${rings[s].join(', ')} are linked`;
    }
  }
  return null;
}

/** Centroid and corners of a ring, 3 values each. */
function ringFan(ring: Int32Array, x: Float64Array): Float64Array {
  const fan = new Float64Array(3 * ring.length + 3);
  ring.forEach((atom, n) => {
    for (let c = 0; c < 3; c++) {
      fan[3 * n + 3 + c] = x[3 * atom + c];
      fan[c] += x[3 * atom + c] / ring.length;
    }
  });
  return fan;
}

/** How often the segment i-j crosses the fan of triangles from the centroid, and with which sign. */
function crossings(fan: Float64Array, x: Float64Array, i: number, j: number): { count: number; signed: number } {
  const corners = fan.length / 3 - 1;
  const [p, d] = [
    [x[3 * i] - fan[0], x[3 * i + 1] - fan[1], x[3 * i + 2] - fan[2]],
    [x[3 * j] - x[3 * i], x[3 * j + 1] - x[3 * i + 1], x[3 * j + 2] - x[3 * i + 2]],
  ];
  let count = 0;
  let signed = 0;
  for (let n = 0; n < corners; n++) {
    const a = 3 * n + 3;
    const b = 3 * ((n + 1) % corners) + 3;
    const [ax, ay, az] = [fan[a] - fan[0], fan[a + 1] - fan[1], fan[a + 2] - fan[2]];
    const [bx, by, bz] = [fan[b] - fan[0], fan[b + 1] - fan[1], fan[b + 2] - fan[2]];
    // p + t d = u a + v b, by Cramer's rule (T. Moller, B. Trumbore, J. Graphics Tools 2, 21 (1997))
    const [hx, hy, hz] = [d[1] * bz - d[2] * by, d[2] * bx - d[0] * bz, d[0] * by - d[1] * bx];
    const determinant = ax * hx + ay * hy + az * hz;
    if (Math.abs(determinant) < 1e-9) continue;
    const u = (p[0] * hx + p[1] * hy + p[2] * hz) / determinant;
    if (u < 0 || u > 1) continue;
    const [qx, qy, qz] = [p[1] * az - p[2] * ay, p[2] * ax - p[0] * az, p[0] * ay - p[1] * ax];
    const v = (d[0] * qx + d[1] * qy + d[2] * qz) / determinant;
    if (v < 0 || u + v > 1) continue;
    const t = (bx * qx + by * qy + bz * qz) / determinant;
    if (t < 0 || t > 1) continue;
    count++;
    signed += Math.sign(determinant);
  }
  return { count, signed };
}

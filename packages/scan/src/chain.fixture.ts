/**
 * A molecule and a potential written for the tests: a chain of atoms with hydrogens' worth of detail, whose energy is harmonic in bonds and
 * angles, a cosine series in torsions and Lennard-Jones between atoms more than three bonds apart.
 */
import { type Coordinates, createMolecule, type Molecule, neighboursOf, torsion, torsionGradient } from '@tordial/geometry';
import type { Potential } from './potential.js';

/** Carbon skeletons with hydrogens: `branches[n]` is the carbon that carbon n + 1 sits on. */
export function alkane(branches: readonly number[], name = 'alkane'): Molecule {
  const carbons = branches.length + 1;
  const bonds: [number, number, number][] = branches.map((to, n) => [to, n + 1, 1]);
  const degree = new Array<number>(carbons).fill(0);
  for (const [p, q] of bonds) {
    degree[p]++;
    degree[q]++;
  }
  const atomicNumbers = new Array<number>(carbons).fill(6);
  for (let c = 0; c < carbons; c++)
    for (let h = degree[c]; h < 4; h++) {
      bonds.push([c, atomicNumbers.length, 1]);
      atomicNumbers.push(1);
    }
  return createMolecule({ atomicNumbers, bonds, name });
}

/** Coordinates with tetrahedral angles, every carbon torsion at `angle` radian, hydrogens staggered: atoms placed one after another. */
export function tetrahedral(molecule: Molecule, angle: number): Coordinates {
  const x = new Float64Array(3 * molecule.atomCount);
  const placed = new Set<number>([0]);
  const queue = [0];
  const directions = (from: number, parent: number): number[][] => {
    if (parent < 0)
      return [
        [1, 1, 1],
        [1, -1, -1],
        [-1, 1, -1],
        [-1, -1, 1],
      ].map((v) => v.map((c) => c / Math.sqrt(3)));
    const d = [0, 1, 2].map((k) => x[3 * from + k] - x[3 * parent + k]);
    const r = Math.hypot(...d);
    const u = d.map((c) => c / r);
    // a reference substituent of the parent fixes the torsion
    const grand = [...neighboursOf(molecule, parent)].find((n) => n !== from && placed.has(n));
    const ref = grand === undefined ? [0.3, 0.5, 0.8] : [0, 1, 2].map((k) => x[3 * grand + k] - x[3 * parent + k]);
    const along = ref[0] * u[0] + ref[1] * u[1] + ref[2] * u[2];
    let e = ref.map((c, k) => c - along * u[k]);
    const size = Math.hypot(...e);
    e = e.map((c) => c / size);
    const f = [u[1] * e[2] - u[2] * e[1], u[2] * e[0] - u[0] * e[2], u[0] * e[1] - u[1] * e[0]];
    return [0, 1, 2].map((n) => {
      const phi = angle + (2 * Math.PI * n) / 3;
      return [0, 1, 2].map((k) => u[k] / 3 + (Math.sqrt(8) / 3) * (Math.cos(phi) * e[k] + Math.sin(phi) * f[k]));
    });
  };
  const parentOf = new Map<number, number>([[0, -1]]);
  for (const i of queue) {
    const free = directions(i, parentOf.get(i) ?? -1);
    for (const j of neighboursOf(molecule, i)) {
      if (placed.has(j)) continue;
      const d = free.shift() ?? [0, 0, 1];
      const r = molecule.atomicNumbers[j] === 1 ? 1.09 : 1.53;
      for (let k = 0; k < 3; k++) x[3 * j + k] = x[3 * i + k] + r * d[k];
      placed.add(j);
      parentOf.set(j, i);
      queue.push(j);
    }
  }
  return x;
}

/** E = 300 (r - r0)^2 + 60 (cos t + 1/3)^2 + 0.15 (1 + cos 3 phi) + 4 eps ((s/r)^12 - (s/r)^6), kcal/mol. */
export function modelPotential(molecule: Molecule): Potential & { count: number } {
  const { bonds, atomCount, atomicNumbers } = molecule;
  const angles: number[][] = [];
  const torsions: number[][] = [];
  const near = new Set<number>();
  for (let n = 0; n < bonds.count; n++) {
    const b = bonds.a[n],
      c = bonds.b[n];
    near.add(b * atomCount + c);
    for (const a of neighboursOf(molecule, b))
      for (const d of neighboursOf(molecule, c)) if (a !== c && d !== b && a !== d) torsions.push([a, b, c, d]);
  }
  for (let j = 0; j < atomCount; j++) {
    const around = neighboursOf(molecule, j);
    for (let p = 0; p < around.length; p++)
      for (let q = 0; q < p; q++) {
        angles.push([around[q], j, around[p]]);
        near.add(around[q] * atomCount + around[p]);
      }
  }
  const pairs: number[][] = [];
  for (let i = 0; i < atomCount; i++)
    for (let j = i + 1; j < atomCount; j++)
      if (!near.has(i * atomCount + j)) {
        const both = atomicNumbers[i] === 1 && atomicNumbers[j] === 1;
        const neither = atomicNumbers[i] !== 1 && atomicNumbers[j] !== 1;
        pairs.push([i, j, both ? 2.3 : neither ? 3.3 : 2.8, both ? 0.02 : neither ? 0.08 : 0.04]);
      }
  const slope = new Float64Array(12);
  const potential = {
    atomCount,
    count: 0,
    evaluate(x: Coordinates, gradient?: Float64Array): number {
      potential.count++;
      gradient?.fill(0);
      let energy = 0;
      const pull = (i: number, j: number, force: number, d: number[]) => {
        if (!gradient) return;
        for (let k = 0; k < 3; k++) {
          gradient[3 * i + k] += force * d[k];
          gradient[3 * j + k] -= force * d[k];
        }
      };
      const between = (i: number, j: number) => [x[3 * i] - x[3 * j], x[3 * i + 1] - x[3 * j + 1], x[3 * i + 2] - x[3 * j + 2]];
      for (let n = 0; n < bonds.count; n++) {
        const i = bonds.a[n],
          j = bonds.b[n];
        const d = between(i, j);
        const r = Math.hypot(...d);
        const dr = r - (atomicNumbers[i] === 1 || atomicNumbers[j] === 1 ? 1.09 : 1.53);
        energy += 300 * dr * dr;
        pull(i, j, (600 * dr) / r, d);
      }
      for (const [i, j, k] of angles) {
        const u = between(i, j),
          v = between(k, j);
        const ru = Math.hypot(...u),
          rv = Math.hypot(...v);
        const cosine = (u[0] * v[0] + u[1] * v[1] + u[2] * v[2]) / (ru * rv);
        energy += 60 * (cosine + 1 / 3) ** 2;
        const force = 120 * (cosine + 1 / 3);
        const du = u.map((c, m) => v[m] / (ru * rv) - (cosine * c) / (ru * ru));
        const dv = v.map((c, m) => u[m] / (ru * rv) - (cosine * c) / (rv * rv));
        pull(i, j, force, du);
        pull(k, j, force, dv);
      }
      for (const [a, b, c, d] of torsions) {
        const phi = torsion(x, a, b, c, d);
        energy += 0.15 * (1 + Math.cos(3 * phi));
        if (!gradient) continue;
        torsionGradient(x, a, b, c, d, slope);
        [a, b, c, d].forEach((i, p) => {
          for (let k = 0; k < 3; k++) gradient[3 * i + k] -= 0.45 * Math.sin(3 * phi) * slope[3 * p + k];
        });
      }
      for (const [i, j, size, depth] of pairs) {
        const d = between(i, j);
        const r2 = d[0] ** 2 + d[1] ** 2 + d[2] ** 2;
        const s6 = ((size * size) / r2) ** 3;
        energy += 4 * depth * (s6 * s6 - s6);
        pull(i, j, (-24 * depth * (2 * s6 * s6 - s6)) / r2, d);
      }
      return energy;
    },
  };
  return potential;
}

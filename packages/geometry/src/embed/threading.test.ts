import { describe, expect, it } from 'vitest';
import { createMolecule } from '../molecule.js';
import { threadedRing } from './threading.js';

const circle = (count: number, radius: number, at: (c: number, s: number) => [number, number, number]) =>
  Array.from({ length: count }, (_, n) =>
    at(radius * Math.cos((2 * Math.PI * n) / count), radius * Math.sin((2 * Math.PI * n) / count)),
  ).flat();
const cycle = (first: number, count: number): [number, number, number][] =>
  Array.from({ length: count }, (_, n) => [first + n, first + ((n + 1) % count), 1]);
const carbons = (count: number, bonds: [number, number, number][]) => createMolecule({ atomicNumbers: new Array(count).fill(6), bonds });

describe('rings passed through', () => {
  const chainThroughRing = carbons(8, [...cycle(0, 6), [6, 7, 1]]);
  const ring = circle(6, 1.4, (c, s) => [c, s, 0]);
  it('finds a bond through a six-membered ring, and none beside or above it', () => {
    const check = (...ends: number[]) =>
      threadedRing(chainThroughRing.rings, chainThroughRing.bonds, Float64Array.from([...ring, ...ends]));
    expect(check(0.2, 0.1, -0.7, 0.1, 0.2, 0.8)).toMatch(/6-7 passes through/);
    expect(check(2.2, 0, -0.7, 2.2, 0, 0.8)).toBeNull();
    expect(check(0.2, 0.1, 0.7, 0.1, 0.2, 2.2)).toBeNull();
  });
  it('finds two large rings linked like a chain, and not when they only lie across', () => {
    const catenane = carbons(24, [...cycle(0, 12), ...cycle(12, 12)]);
    const first = circle(12, 3, (c, s) => [c, s, 0]);
    const check = (shift: number) =>
      threadedRing(catenane.rings, catenane.bonds, Float64Array.from([...first, ...circle(12, 3, (c, s) => [c + shift, 0.1, s])]));
    expect(check(3)).toMatch(/linked/);
    expect(check(7)).toBeNull();
    // pushed through at two places: crosses twice and is not linked
    expect(
      threadedRing(catenane.rings, catenane.bonds, Float64Array.from([...first, ...circle(12, 1.2, (c, s) => [c, 0.1, s])])),
    ).toBeNull();
  });
  it('lets the end of a chain lie inside a large ring', () => {
    const crown = carbons(20, [...cycle(0, 18), [18, 19, 1]]);
    expect(
      threadedRing(crown.rings, crown.bonds, Float64Array.from([...circle(18, 4.3, (c, s) => [c, s, 0]), 0, 0, -0.7, 0, 0, 0.8])),
    ).toBeNull();
  });
});

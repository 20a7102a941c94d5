import { createMolecule, radians } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { groupElectronegativity, haasnootCoupling, relativeElectronegativity } from './haasnoot-altona.js';
import { averagedCouplings, hasVicinalProtons, pairCouplings, vicinalCouplings } from './vicinal-couplings.js';

const J = (degrees: number, substituents: Parameters<typeof haasnootCoupling>[1] = []): number =>
  haasnootCoupling(radians(degrees), substituents);

describe('the equation of Haasnoot, de Leeuw and Altona', () => {
  it('without substituents is 13.70 cos^2 phi - 0.73 cos phi', () => {
    expect(J(0)).toBeCloseTo(12.97, 10);
    expect(J(180)).toBeCloseTo(14.43, 10);
    expect(J(90)).toBeCloseTo(0, 10);
    expect(J(60)).toBeCloseTo(3.06, 10);
    expect(J(-60)).toBeCloseTo(3.06, 10);
  });

  it('takes Huggins electronegativities relative to hydrogen (table of the paper, from memory)', () => {
    expect([6, 7, 8, 9, 16, 17, 35, 53].map((z) => Number(relativeElectronegativity(z).toFixed(2)))).toEqual([
      0.4, 0.85, 1.3, 1.7, 0.4, 0.95, 0.75, 0.45,
    ]);
    // OCH3: 1.30 - 0.14 * 0.40; CF3: 0.40 - 0.14 * 3 * 1.70
    expect(groupElectronegativity(8, [6])).toBeCloseTo(1.244, 10);
    expect(groupElectronegativity(6, [9, 9, 9])).toBeCloseTo(-0.314, 10);
    expect(() => relativeElectronegativity(26)).toThrow(/Fe/);
  });

  it('is unchanged by looking in a mirror: phi and every orientation turn over together', () => {
    for (const phi of [35, 60, 110, 170])
      expect(
        J(phi, [
          { electronegativity: 1.3, orientation: 1 },
          { electronegativity: 0.4, orientation: -1 },
        ]),
      ).toBeCloseTo(
        J(-phi, [
          { electronegativity: 1.3, orientation: -1 },
          { electronegativity: 0.4, orientation: 1 },
        ]),
        12,
      );
  });

  it('one oxygen, worked by hand: phi = 60, xi = +1 and -1', () => {
    // 3.06 + 1.3 (0.56 - 2.47 cos^2(+-60 + 21.97)); cos^2(81.97) = 0.01951, cos^2(-38.03) = 0.62052
    expect(J(60, [{ electronegativity: 1.3, orientation: 1 }])).toBeCloseTo(3.06 + 1.3 * (0.56 - 2.47 * 0.01951), 3);
    expect(J(60, [{ electronegativity: 1.3, orientation: -1 }])).toBeCloseTo(3.06 + 1.3 * (0.56 - 2.47 * 0.62052), 3);
  });
});

/** A chair with a group of one atom, or O-H, on carbon 0: ring carbons 0-5, then for each carbon its axial and its equatorial atom. */
function chair(axial = 1, equatorial = 1) {
  const x: number[] = [];
  for (let k = 0; k < 6; k++) x.push(1.45 * Math.cos(radians(60 * k)), 1.45 * Math.sin(radians(60 * k)), k % 2 ? -0.25 : 0.25);
  const numbers = Array<number>(6).fill(6);
  const bonds: [number, number, number][] = [];
  const unit = (p: number[]): number[] => p.map((value) => value / Math.hypot(...p));
  const at = (i: number): number[] => x.slice(3 * i, 3 * i + 3);
  const difference = (p: number[], q: number[]): number[] => p.map((value, k) => value - q[k]);
  for (let k = 0; k < 6; k++) {
    bonds.push([k, (k + 1) % 6, 1]);
    const up = [0, 0, k % 2 ? -1 : 1];
    const toNeighbours = [(k + 1) % 6, (k + 5) % 6].map((j) => unit(difference(at(j), at(k))));
    const out = unit([0, 1, 2].map((c) => -(up[c] + toNeighbours[0][c] + toNeighbours[1][c])));
    for (const [z, direction] of [
      [k === 0 ? axial : 1, up],
      [k === 0 ? equatorial : 1, out],
    ] as const) {
      bonds.push([k, numbers.length, 1]);
      const length = z === 1 ? 1.1 : 1.42;
      x.push(...at(k).map((value, c) => value + length * direction[c]));
      numbers.push(z);
    }
  }
  for (const [i, z] of numbers.entries())
    if (z === 8) {
      bonds.push([i, numbers.length, 1]);
      x.push(...at(i).map((value, c) => value + 0.96 * unit([0.3, 0.2, 1])[c]));
      numbers.push(1);
    }
  return { molecule: createMolecule({ atomicNumbers: numbers, bonds }), x: Float64Array.from(x) };
}

describe('couplings in a geometry', () => {
  it("gives cyclohexane's couplings within 0.7 Hz: aa 13.1, ae 3.65, ee 2.96 (Garbisch and Griffith 1968, from memory)", () => {
    const { molecule, x } = chair();
    const coupling = (h: number, k: number): number =>
      pairCouplings(molecule, [0, 1], x).find(({ protons }) => protons[0] === h && protons[1] === k)?.coupling ?? Number.NaN;
    // atoms 6, 7: axial and equatorial on carbon 0; 8, 9: on carbon 1
    expect(Math.abs(coupling(6, 8) - 13.1)).toBeLessThan(0.7);
    expect(Math.abs(coupling(6, 9) - 3.65)).toBeLessThan(0.7);
    expect(coupling(7, 8)).toBeCloseTo(coupling(6, 9), 6);
    expect(Math.abs(coupling(7, 9) - 2.96)).toBeLessThan(0.7);
  });

  it('knows on which side an oxygen stands: cyclohexanols (Anet 1962: 11.1, 4.2 equatorial; 3.0, 2.7 axial; from memory)', () => {
    // the chair is an ideal one: near 60 degrees an angle off by 5 is 1 Hz
    const equatorial = chair(1, 8);
    const [aa, ae] = pairCouplings(equatorial.molecule, [0, 1], equatorial.x).map((pair) => pair.coupling);
    expect(Math.abs(aa - 11.1)).toBeLessThan(1);
    expect(Math.abs(ae - 4.2)).toBeLessThan(1);
    const axial = chair(8, 1);
    const [ea, ee] = pairCouplings(axial.molecule, [0, 1], axial.x).map((pair) => pair.coupling);
    // antiperiplanar to the axial oxygen
    expect(Math.abs(ea - 3.0)).toBeLessThan(1.2);
    expect(Math.abs(ee - 2.7)).toBeLessThan(1);
    expect(ea).toBeLessThan(ae - 0.5);
  });

  it('does not mind which end is named first', () => {
    const { molecule, x } = chair(8, 1);
    const forward = pairCouplings(molecule, [0, 1], x);
    const backward = pairCouplings(molecule, [1, 0], x);
    for (const { protons, coupling } of forward)
      expect(backward.find((pair) => pair.protons[0] === protons[1] && pair.protons[1] === protons[0])?.coupling).toBeCloseTo(coupling, 10);
  });
});

describe('averages', () => {
  /** Ethyl group with X on the second carbon: C, C, three H, X, two H. */
  const bonds: [number, number, number][] = [
    [0, 1, 1],
    [0, 2, 1],
    [0, 3, 1],
    [0, 4, 1],
    [1, 5, 1],
    [1, 6, 1],
    [1, 7, 1],
  ];
  const ethyl = (x: number) => createMolecule({ atomicNumbers: [6, 6, 1, 1, 1, x, 1, 1], bonds });
  const geometry = (turn: number): Float64Array => {
    const x = [0, 0, 0, 0, 0, 1.53];
    for (const k of [0, 120, 240]) x.push(Math.cos(radians(k)), Math.sin(radians(k)), -0.37);
    for (const k of [0, 120, 240]) x.push(Math.cos(radians(k + turn)), Math.sin(radians(k + turn)), 1.9);
    return Float64Array.from(x);
  };

  it('of a methyl are one coupling to each other proton, the mean of staggered angles', () => {
    const couplings = vicinalCouplings(ethyl(1), [0, 1], geometry(60));
    expect(couplings).toHaveLength(1);
    expect(couplings[0].coupling).toBeCloseTo((14.43 + 2 * 3.06) / 3, 8);
    const chloro = vicinalCouplings(ethyl(17), [0, 1], geometry(60));
    expect(chloro.map(({ protons }) => protons)).toEqual([
      [[2, 3, 4], [6]],
      [[2, 3, 4], [7]],
    ]);
    // over three staggered angles both cosines squared average to one half
    for (const { coupling } of chloro) expect(coupling).toBeCloseTo(6.85 + 0.95 * (0.56 - 2.47 / 2), 8);
  });

  it('over geometries follow their Boltzmann weights', () => {
    const molecule = createMolecule({ atomicNumbers: [6, 6, 17, 17, 1, 17, 17, 1], bonds });
    const [anti, gauche] = [geometry(180), geometry(60)];
    const one = vicinalCouplings(molecule, [0, 1], anti)[0].coupling;
    const other = vicinalCouplings(molecule, [0, 1], gauche)[0].coupling;
    const [mean] = averagedCouplings(molecule, [0, 1], [anti, gauche], [0, 1], 298.15, [1, 2]);
    const weight = 2 * Math.exp(-1 / (1.987204259e-3 * 298.15));
    expect(mean.coupling).toBeCloseTo((one + weight * other) / (1 + weight), 8);
    expect(() => averagedCouplings(molecule, [0, 1], [anti], [], 298.15)).toThrow(/one energy for each/);
  });

  it('know the protons of a CH2 again in a geometry that was made by reflection', () => {
    // X-CH2-CH2-X: gauche one way, and the same atoms mirrored into gauche the other way
    const molecule = createMolecule({ atomicNumbers: [6, 6, 17, 1, 1, 17, 1, 1], bonds });
    const gauche = geometry(60);
    const mirrored = gauche.map((value, n) => (n % 3 === 1 ? -value : value));
    const turned = geometry(-60);
    const named = (x: Float64Array) =>
      new Map(vicinalCouplings(molecule, [0, 1], x, gauche).map(({ protons, coupling }) => [protons.join('-'), coupling]));
    const [byReflection, byTurning] = [named(mirrored), named(turned)];
    expect(byReflection.size).toBe(4);
    for (const [protons, coupling] of byTurning) expect(byReflection.get(protons)).toBeCloseTo(coupling, 8);
    // both gauche forms together: the two protons of either carbon see the other's alike
    const mean = averagedCouplings(molecule, [0, 1], [gauche, mirrored], [0, 0], 298.15);
    const of = (h: number, k: number) => mean.find(({ protons }) => protons[0][0] === h && protons[1][0] === k)?.coupling ?? Number.NaN;
    expect(of(3, 7)).toBeCloseTo(of(4, 6), 8);
    expect(of(3, 6)).toBeCloseTo(of(4, 7), 8);
    expect(Math.abs(of(3, 7) - of(3, 6))).toBeGreaterThan(1);
  });

  it('are refused for other fragments and for missing hydrogens', () => {
    const x = geometry(60);
    const vinyl = createMolecule({ atomicNumbers: [6, 6, 1, 1, 6, 1], bonds: [[0, 1, 1], [0, 2, 1], [0, 3, 1], [0, 4, 1], [1, 5, 2]] }); // biome-ignore format: bonds
    expect(() => pairCouplings(vinyl, [0, 1], x)).toThrow(/not saturated/);
    expect([vinyl, ethyl(17)].map((molecule) => hasVicinalProtons(molecule, [0, 1]))).toEqual([false, true]);
    const bare = createMolecule({ atomicNumbers: [6, 6], bonds: [[0, 1, 1]] });
    expect(() => pairCouplings(bare, [0, 1], x)).toThrow(/all its hydrogens/);
    const peroxide = createMolecule({ atomicNumbers: [8, 8, 1, 1], bonds: [[0, 1, 1], [0, 2, 1], [1, 3, 1]] }); // biome-ignore format: bonds
    expect(() => pairCouplings(peroxide, [0, 1], x)).toThrow(/not carbon/);
    const halogenated = createMolecule({ atomicNumbers: [6, 6, 9, 9, 9, 1, 1, 1], bonds });
    expect(() => pairCouplings(halogenated, [0, 1], x)).toThrow(/carries no hydrogen/);
  });
});

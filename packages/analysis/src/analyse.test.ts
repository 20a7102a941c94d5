import type { ProfileStationaryPoint } from '@tordial/scan';
import { describe, expect, it } from 'vitest';
import { analyseProfile } from './analyse.js';
import { eyringRate } from './eyring.js';
import { freeEnergiesOf } from './free-energies.js';
import { hinderedRotor } from './hindered-rotor/hindered-rotor.js';
import { seriesOfBarriers } from './hindered-rotor/periodic-series.js';
import { rotorOfProfile } from './hindered-rotor/rotor-of-profile.js';
import { lowestBarrier, observableProcesses, processRates } from './processes.js';
import { DICHLOROETHANE, geometryAt, METHANOL, PEROXIDE, profileDocument } from './profile.fixture.js';
import { rotamers } from './rotamers.js';
import { torsionalStrain } from './strain.js';

const T = 298.15;
/** Three wells with the outer two raised: minima at 180 and near +-60. */
const ANTI_GAUCHE = seriesOfBarriers([1.2, 0, -3.5].map((v, n) => (n === 0 ? -v : v)));
/** Two mirror-image wells, 0 the higher barrier, 180 the lower. */
const HELICAL = seriesOfBarriers([-8, -24]);

describe('rotamers', () => {
  it('are named after Klyne and Prelog with gauche and anti beside it, the gauche pair known as mirror images', () => {
    const { wells, barriers } = rotamers(profileDocument(DICHLOROETHANE, ANTI_GAUCHE));
    const byName = Object.fromEntries(wells.map((well) => [well.name, well]));
    expect(Object.keys(byName).sort()).toEqual(['+sc', '-sc', 'ap']);
    expect(byName.ap).toMatchObject({ commonName: 'anti', energy: 0, species: 0 });
    expect(byName['+sc']).toMatchObject({ commonName: 'gauche', species: 1, mirrorImages: [wells.indexOf(byName['-sc'])] });
    expect(byName.ap.mirrorImages).toEqual([wells.indexOf(byName.ap)]);
    barriers.forEach((barrier, i) => {
      expect(barrier.wells).toEqual([i, (i + 1) % 3]);
      expect(barrier.energy).toBeGreaterThan(Math.max(wells[i].energy, wells[(i + 1) % 3].energy));
    });
  });

  it('of a methyl are one, three times, each its own mirror image', () => {
    const { wells } = rotamers(profileDocument(METHANOL, seriesOfBarriers([0, 0, -1.07])));
    expect(wells).toHaveLength(3);
    expect(new Set(wells.map((well) => well.species)).size).toBe(1);
    for (const [i, well] of wells.entries()) {
      expect(well.identical).toHaveLength(2);
      expect(well.mirrorImages).toContain(i);
      expect(well.commonName).toBeNull();
    }
  });

  it('count a position once where two branches cross in its bottom, also at 180', () => {
    // each staggered position of the methyl seen on two branches, 4 degrees apart, as next to a group that can lie either way
    const document = profileDocument(METHANOL, seriesOfBarriers([0, 0, -1.07]));
    const stationaryPoints = document.stationaryPoints.flatMap((point): ProfileStationaryPoint[] => {
      if (point.kind === 'barrier') return [{ ...point, kind: 'crossing' as const }];
      const at = (shift: number, lift: number, kind: 'well' | 'crossing') => ({
        ...point,
        kind,
        angle: point.angle + shift >= -180 ? point.angle + shift : point.angle + shift + 360,
        energy: point.energy + lift,
        coordinates: geometryAt(METHANOL, point.angle + shift),
      });
      return [at(-2, 0, 'well'), at(0, 0.01, 'crossing'), at(2, 0, 'well')];
    });
    const { wells, barriers } = rotamers({ ...document, stationaryPoints });
    expect(wells.map((well) => [Math.round(well.angle), well.name, well.stationaryPoints.length])).toEqual([
      [-180, 'ap', 2],
      [-60, '-sc', 2],
      [60, '+sc', 2],
    ]);
    expect(wells.map((well) => well.identical.length)).toEqual([2, 2, 2]);
    expect(barriers.map(({ wells: [from, to], angle }) => [from, to, Math.round(angle)])).toEqual([
      [0, 1, -120],
      [1, 2, 0],
      [2, 0, 120],
    ]);
  });

  it('stand apart by the highest point of the curve where a document has no maximum between two wells', () => {
    const document = profileDocument(PEROXIDE, HELICAL);
    const stationaryPoints = document.stationaryPoints.filter((point) => point.kind === 'well' || Math.abs(point.angle) > 1);
    const { barriers } = rotamers({ ...document, stationaryPoints });
    const found = barriers.find((barrier) => barrier.stationaryPoint === null);
    expect(found).toMatchObject({ kind: 'crossing', angle: expect.closeTo(0, 0) });
    expect(found?.energy).toBeCloseTo(Math.max(...rotamers(document).barriers.map((barrier) => barrier.energy)), 2);
  });

  it('of a flat profile are none', () => {
    expect(() => rotamers(profileDocument(METHANOL, seriesOfBarriers([])))).toThrow(/flat or incomplete/);
  });
});

describe('analysis of an anti/gauche profile', () => {
  const document = profileDocument(DICHLOROETHANE, ANTI_GAUCHE);
  const analysis = analyseProfile(document, { temperatures: [250, T], couplings: true });

  it('has populations by the closed form, the pair counted once for each well', () => {
    const gap = Math.max(...analysis.rotamers.map((rotamer) => rotamer.energy));
    const w = Math.exp(-gap / (1.987204259e-3 * T));
    const { populations } = analysis.rows[1];
    analysis.rotamers.forEach((rotamer, i) => {
      expect(populations.byEnergy[i]).toBeCloseTo((rotamer.name === 'ap' ? 1 : w) / (1 + 2 * w), 8);
    });
    expect(populations.byProfile.reduce((a, b) => a + b)).toBeCloseTo(1, 12);
    expect(populations.byFreeEnergy).toBeNull();
    // raised wells are a little wider here, so the two ways differ by a few percent only
    populations.byProfile.forEach((p, i) => {
      expect(Math.abs(p - populations.byEnergy[i])).toBeLessThan(0.05);
    });
  });

  it('exchanges ap with both sc over two mirror-image barriers, whose rates add', () => {
    const exchange = analysis.rows[1].processes.find((process) => process.kind === 'exchange');
    expect(exchange?.label).toBe('ap (anti) -> ±sc (gauche)');
    expect(exchange?.routes).toBe(2);
    expect(exchange?.forward?.value).toBeCloseTo(2 * eyringRate(exchange?.barrier ?? 0, T), -2);
    expect((exchange?.forward?.value ?? 0) / (2 * eyringRate(exchange?.barrier ?? 0, T))).toBeCloseTo(1, 6);
    expect((exchange?.backward?.value ?? 0) / eyringRate(exchange?.barrierBack ?? 0, T)).toBeCloseTo(1, 6);
    expect(exchange?.exchangeHalfLife?.value).toBeCloseTo(Math.LN2 / (exchange?.forward?.value ?? 0), 20);
    expect(exchange?.racemisationHalfLife).toBeNull();
    expect(exchange?.stabilityClass).toMatchObject({ class: 1, low: 1, high: 1 });
  });

  it('racemises gauche over both ways round: lambda = k(sc -> ap) + 2 k(sc -> sc)', () => {
    const racemisation = analysis.rows[1].processes.find((process) => process.kind === 'racemisation');
    const syn = analysis.barriers.find((barrier) => Math.abs(barrier.angle) < 1e-6);
    const side = analysis.barriers.find((barrier) => Math.abs(barrier.angle) > 1);
    const gauche = Math.max(...analysis.rotamers.map((rotamer) => rotamer.energy));
    const k = eyringRate((side?.energy ?? 0) - gauche, T) / 2 + eyringRate((syn?.energy ?? 0) - gauche, T);
    expect((racemisation?.forward?.value ?? 0) / k).toBeCloseTo(1, 8);
    expect(racemisation?.share).toBeCloseTo(1, 6);
    expect(racemisation?.routes).toBe(2);
    expect(racemisation?.oki).toBe('not separable');
  });

  it('gives couplings for each rotamer and averaged: small when gauche protons dominate', () => {
    expect(analysis.rotamerCouplings).toHaveLength(3);
    expect(analysis.rows[1].couplings).toHaveLength(4);
    for (const { coupling } of analysis.rows[1].couplings ?? []) {
      expect(coupling).toBeGreaterThan(1);
      expect(coupling).toBeLessThan(12);
    }
  });

  it('warns with every number, and takes kJ/mol', () => {
    expect(analysis.cautions.map((note) => note.code)).toEqual([
      'caution/estimate',
      'caution/class',
      'caution/barrier-error',
      'caution/electronic',
      'caution/rigid',
    ]);
    const anilide = {
      ...document,
      molecule: { ...document.molecule, fragments: 2 },
      settings: { ...document.settings, kind: 'relaxed' as const },
      rotor: {
        ...document.rotor,
        kind: 'anilide',
        parameters: [{ atoms: [2, 0, 1, 5] as const, types: [0, 37, 10, 0] as const, class: 0, v: [0, 6, 0], source: 'wildcard' as const }],
      },
    };
    const { cautions, barrierError } = analyseProfile(anilide);
    expect(cautions.map((note) => note.code).slice(4)).toEqual(['caution/fragments', 'caution/anilide', 'caution/unproved']);
    expect(barrierError.error).toBe(3);
    const doubleBond = { ...document, rotor: { ...document.rotor, kind: 'double bond' } };
    expect(analyseProfile(doubleBond).cautions.map((note) => note.code)).toContain('caution/double-bond');
    const scale = ({ relativeEnergy, energy, ...rest }: (typeof document.points)[number]) => ({
      ...rest,
      relativeEnergy: relativeEnergy * 4.184,
      energy: energy * 4.184,
      torque: rest.torque * 4.184,
    });
    const inKilojoule = analyseProfile({
      ...document,
      unit: 'kJ/mol',
      points: document.points.map(scale),
      stationaryPoints: document.stationaryPoints.map((point) => ({
        ...point,
        energy: point.energy * 4.184,
        relativeEnergy: point.relativeEnergy * 4.184,
      })),
    });
    inKilojoule.rows[0].populations.byProfile.forEach((p, i) => {
      expect(p).toBeCloseTo(analysis.rows[1].populations.byProfile[i], 8);
    });
  });
});

describe('analysis of a helical profile', () => {
  const document = profileDocument(PEROXIDE, HELICAL);
  const racemisation = analyseProfile(document, { temperatures: [310.15] }).rows[0].processes[0];
  const barriers = analyseProfile(document).barriers.map((barrier) => barrier.energy);

  it('racemises over either barrier: k is the sum of both, its half-life ln 2 / (2k), with a range', () => {
    expect(racemisation.kind).toBe('racemisation');
    const k = eyringRate(barriers[0], 310.15) + eyringRate(barriers[1], 310.15);
    expect((racemisation.forward?.value ?? 0) / k).toBeCloseTo(1, 9);
    expect((racemisation.racemisationHalfLife?.value ?? 0) / (Math.LN2 / (2 * k))).toBeCloseTo(1, 9);
    expect((racemisation.timeTo99Percent?.value ?? 0) / (-Math.log(0.99) / (2 * k))).toBeCloseTo(1, 9);
    expect(racemisation.exchangeHalfLife).toBeNull();
    expect(racemisation.barrier).toBeCloseTo(Math.min(...barriers), 9);
    const { low, value, high } = racemisation.racemisationHalfLife ?? { low: 0, value: 0, high: 0 };
    expect(high / value).toBeCloseTo(value / low, 8);
    expect(Math.log(value / low)).toBeCloseTo(2 / (1.987204259e-3 * 310.15), 8);
    expect(racemisation.stabilityClass).toMatchObject({ class: 2, low: 1, high: 2 });
  });

  it('coalesces where k reaches pi dnu / sqrt 2', () => {
    const [row] = analyseProfile(document, { coalescence: { shiftDifference: 0.35, spectrometerFrequency: 400 } }).rows;
    const Tc = row.processes[0].coalescenceTemperature;
    const k = barriers.reduce((sum, barrier) => sum + eyringRate(barrier, Tc?.value ?? 1), 0);
    expect(k).toBeCloseTo((Math.PI * 140) / Math.SQRT2, 4);
    expect(Tc?.low).toBeLessThan(Tc?.value ?? 0);
    expect(Tc?.high).toBeGreaterThan(Tc?.value ?? 0);
  });

  it('gives no coalescence for unequal rotamers, but says why', () => {
    const anti = analyseProfile(profileDocument(DICHLOROETHANE, ANTI_GAUCHE), {
      coalescence: { shiftDifference: 0.35, spectrometerFrequency: 400 },
    }).rows[0].processes;
    const exchange = anti.find((process) => process.kind === 'exchange');
    expect(exchange?.coalescenceTemperature).toBeNull();
    expect(exchange?.refused.map((note) => note.code)).toEqual(['coalescence/sites']);
  });

  it('takes free energies and transmission coefficients where they are known', () => {
    const free = analyseProfile(document, {
      freeEnergies: () => ({ wells: [0, 0], barriers: [20, 22] }),
      transmission: () => [1.5, 1],
    });
    const { processes, populations } = free.rows[0];
    expect((processes[0].forward?.value ?? 0) / (1.5 * eyringRate(20, T) + eyringRate(22, T))).toBeCloseTo(1, 9);
    expect(populations.byFreeEnergy).toEqual([0.5, 0.5]);
    expect(free.cautions.map((note) => note.code)).not.toContain('caution/electronic');
  });
});

describe('no number where none is justified', () => {
  const document = profileDocument(PEROXIDE, HELICAL);

  it('of a single well: it has a population of 1 and nothing to turn into', () => {
    const { rows, barriers, rotamers: wells } = analyseProfile(profileDocument(PEROXIDE, seriesOfBarriers([5])));
    expect(wells).toHaveLength(1);
    expect(barriers[0].forward).toBeCloseTo(5, 8);
    expect(rows[0].populations).toEqual({ byEnergy: [1], byProfile: [1], byFreeEnergy: null });
    expect(rows[0].processes).toEqual([]);
  });

  it('over a barrier that vanishes in free energy', () => {
    const { rows } = analyseProfile(document, { freeEnergies: () => ({ wells: [0, 1], barriers: [0.8, 20] }) });
    expect(rows[0].processes[0]).toMatchObject({ forward: null, refused: [{ code: 'analysis/no-rate' }] });
  });

  it('over a crossing of branches', () => {
    const crossed = {
      ...document,
      stationaryPoints: document.stationaryPoints.map((point) =>
        point.kind === 'barrier' ? { ...point, kind: 'crossing' as const } : point,
      ),
    };
    const { rows, cautions } = analyseProfile(crossed);
    const [process] = rows[0].processes;
    expect(process.refused.map((note) => note.code)).toEqual(['analysis/no-rate']);
    for (const value of [process.barrier, process.forward, process.racemisationHalfLife, process.stabilityClass, process.oki])
      expect(value).toBeNull();
    expect(cautions.map((note) => note.code)).toContain('caution/crossing');
    const refined = analyseProfile(crossed, { saddles: [21, 23] });
    expect(refined.rows[0].processes[0].barrier).toBe(21);
    expect(refined.cautions.map((note) => note.code)).not.toContain('caution/crossing');
    expect(rows[0].populations.byEnergy).toEqual([0.5, 0.5]);
  });

  it.each([
    ['temperature of zero', document, { temperatures: [300, 0] }, 'analysis/temperature'],
    ['no temperature', document, { temperatures: [] }, 'analysis/temperature'],
    ['negative temperature', document, { temperatures: [-20] }, 'analysis/temperature'],
    [
      'unconverged point',
      { ...document, points: document.points.map((p, n) => (n === 3 ? { ...p, converged: false } : p)) },
      {},
      'profile/not-converged',
    ],
    [
      'unconverged barrier',
      { ...document, stationaryPoints: document.stationaryPoints.map((p) => ({ ...p, converged: p.kind === 'well' })) },
      {},
      'profile/not-converged',
    ],
    ['range', { ...document, settings: { ...document.settings, range: [-180, 170] as const } }, {}, 'profile/not-covered'],
    ['gap', { ...document, points: document.points.filter((_, n) => n < 30) }, {}, 'profile/not-covered'],
    ['NaN', { ...document, points: document.points.map((p, n) => (n === 3 ? { ...p, energy: Number.NaN } : p)) }, {}, 'profile/value'],
    [
      'open profile',
      {
        ...document,
        points: document.points.map((p, n) => ({ ...p, relativeEnergy: p.relativeEnergy + n, torque: p.torque + 18 / Math.PI })),
      },
      {},
      'profile/not-closed',
    ],
    ['newer document', { ...document, schema: 'tordial/profile/2' as 'tordial/profile/1' }, {}, 'profile/schema'],
    ['couplings without carbons', document, { couplings: true }, 'couplings/not-sp3'],
    ['barrier error below zero', document, { barrierError: -1 }, 'analysis/barrier-error'],
  ])('%s', (_, bad, options, code) => {
    expect(() => analyseProfile(bad, options)).toThrow(expect.objectContaining({ code }));
  });

  it('couplings without hydrogens', () => {
    const bare = profileDocument({ ...DICHLOROETHANE, ends: [[['Cl', 0]], [['Cl', 0]]] }, ANTI_GAUCHE);
    expect(() => analyseProfile(bare, { couplings: true })).toThrow(expect.objectContaining({ code: 'couplings/missing-hydrogens' }));
  });
});

describe('strain', () => {
  const document = profileDocument(DICHLOROETHANE, ANTI_GAUCHE);

  it('is the energy of the angle above the lowest well, and the sum of the rotors', () => {
    const x = Float64Array.from(geometryAt(DICHLOROETHANE, 10));
    const { rotors, total, notes } = torsionalStrain(x, [document, document]);
    expect(rotors[0].angle).toBeCloseTo(10, 8);
    // the grid holds 10 degrees, so the curve is exact there
    expect(rotors[0].energy).toBeCloseTo(document.points.find((point) => point.angle === 10)?.relativeEnergy ?? -1, 6);
    expect(total).toBeCloseTo(2 * rotors[0].energy, 10);
    expect(notes.map((note) => note.code)).toEqual(['strain/coupling']);
    expect(torsionalStrain(Float64Array.from(geometryAt(DICHLOROETHANE, 180)), [document]).total).toBeCloseTo(0, 8);
  });

  it('refuses other molecules', () => {
    expect(() => torsionalStrain(new Float64Array(9), [document])).toThrow(/3 atoms/);
    expect(() => torsionalStrain(new Float64Array(24), [document, profileDocument(PEROXIDE, HELICAL)])).toThrow(/different molecules/);
    expect(() => torsionalStrain(new Float64Array(24), [])).toThrow(/no profile/);
  });
});

describe('the hindered rotor of a profile', () => {
  it("is methanol's with its potential, its moment and its symmetry number: 9.1 cm-1 of splitting", () => {
    const document = profileDocument(METHANOL, seriesOfBarriers([0, 0, -373.5 / 349.755]));
    const rotor = rotorOfProfile(document);
    expect(rotor.symmetryNumber).toBe(3);
    const [moment] = rotor.moments;
    expect(moment.rigid).toBeCloseTo(moment.pitzerGwinn ?? 0, 8);
    expect(moment.path).toBe(moment.rigid);
    expect(rotor.momentKind).toBe('rigid');
    const { splitting, multiplets, periodicity } = hinderedRotor(rotor, [T]);
    expect(periodicity).toBe(3);
    expect(Math.abs((splitting ?? 0) - 9.1)).toBeLessThan(0.7);
    expect(multiplets[0].levels).toHaveLength(3);
  });

  it('has the moments of its geometries along the turn', () => {
    const { moments, constant } = rotorOfProfile(profileDocument(DICHLOROETHANE, ANTI_GAUCHE));
    const anti = moments.find((moment) => moment.angle === -180)?.eastRadom ?? 0;
    const syn = moments.find((moment) => moment.angle === 0)?.eastRadom ?? 0;
    expect(anti).toBeLessThan(syn);
    expect(constant.cosine.length).toBeGreaterThan(1);
    expect(moments.every((moment) => moment.pitzerGwinn === null)).toBe(true);
  });
});

describe('a handed axis beside a stereocentre', () => {
  // two wells a side, unequal: P at 60 and 120, M at -60 and -120
  const wells = [
    { angle: -120, energy: 0.6 },
    { angle: -60, energy: 0.9 },
    { angle: 60, energy: 0 },
    { angle: 120, energy: 0.4 },
  ];
  const related = wells.map(({ angle }) => ({ angle, identical: [], mirrorImages: [], species: 0 }));
  const network = { wells: wells.map((well) => well.energy), barriers: [6, 26, 5, 24] };

  it('diastereomerises by pre-equilibrium on either side: k = sum of rates weighted by the populations of one side', () => {
    const process = observableProcesses(network, related, T, true).find(({ kind }) => kind === 'diastereomerisation');
    if (!process) throw new Error('the axis has two sides');
    expect([process.from, process.to]).toEqual([
      [2, 3],
      [0, 1],
    ]);
    const rates = processRates(process, network, T);
    const w = [0, 0.4].map((energy) => Math.exp(-energy / (1.987204259e-3 * T)));
    const forward = (w[0] * eyringRate(26, T) + w[1] * eyringRate(24 - 0.4, T)) / (w[0] + w[1]);
    expect((rates?.forward ?? 0) / forward).toBeCloseTo(1, 8);
    expect(rates?.share).toBeCloseTo(1, 6);
    const v = [0.6, 0.9].map((energy) => Math.exp(-energy / (1.987204259e-3 * T)));
    expect((rates?.backward ?? 0) / (rates?.forward ?? 1)).toBeCloseTo((w[0] + w[1]) / (v[0] + v[1]), 8);
    expect(lowestBarrier(process, network)).toBe(24);
  });

  it('has no such process without a stereocentre', () => {
    expect(observableProcesses(network, related, T).map(({ kind }) => kind)).not.toContain('diastereomerisation');
  });
});

describe('hands', () => {
  it('are none where the mirror image is also the same molecule relabelled, as of a methyl beside a handed group', () => {
    // three equal positions, of which two were seen with one hand of the group and one with both
    const all = [0, 1, 2];
    const wells = all.map((i) => ({
      angle: -60 + 120 * i,
      identical: all.filter((j) => j !== i),
      mirrorImages: i === 1 ? all : [1],
      species: 0,
    }));
    const kinds = observableProcesses({ wells: [0, 0, 0], barriers: [2, 2, 2] }, wells, T).map(({ kind }) => kind);
    expect(kinds).toEqual(['topomerisation']);
  });

  it('of several wells each are those that the slowest racemising mode keeps together (the two-fold biaryl)', () => {
    // -135 and 45 are one hand, -45 and 135 the other; each turns into the other over 0.5 and over 20
    const wells = [-135, -45, 45, 135].map((angle, i) => ({
      angle,
      identical: [(i + 2) % 4],
      mirrorImages: [(i + 1) % 4, (i + 3) % 4],
      species: 0,
    }));
    const network = { wells: [0, 0, 0, 0], barriers: [14, 20, 14, 20] };
    const process = observableProcesses(network, wells, T).find(({ kind }) => kind === 'racemisation');
    if (!process) throw new Error('the biaryl racemises');
    expect([process.from, process.to]).toEqual([
      [0, 2],
      [1, 3],
    ]);
    expect((processRates(process, network, T)?.forward ?? 0) / (eyringRate(14, T) + eyringRate(20, T))).toBeCloseTo(1, 9);
  });
});

describe('free energies', () => {
  const water = { energy: 0, coordinates: Float64Array.of(0, 0, 0, 0.76, 0, 0.59, -0.76, 0, 0.59), frequencies: [1595, 3657, 3756] };

  it('add zero point, heat and entropy; of equal structures they leave the electronic difference', () => {
    const saddle = { ...water, energy: 12, frequencies: [-414.5, 3657, 3756] };
    const { freeEnergies, transmission } = freeEnergiesOf([water, { ...water, energy: 1 }], [saddle, null], [15.999, 1.008, 1.008]);
    const { wells, barriers } = freeEnergies(T);
    expect(wells[1] - wells[0]).toBeCloseTo(1, 10);
    expect(barriers[1]).toBeNull();
    // the saddle lacks one oscillator of 1595 cm-1: its zero point (2.28 kcal/mol), and next to nothing of its heat
    expect((barriers[0] ?? 0) - wells[0]).toBeCloseTo(12 - 1595 / 2 / 349.755, 3);
    // h nu / kT = 2 for 414.5 cm-1 at 298.15 K
    expect(transmission(T)).toEqual([expect.closeTo(1 + 4 / 24, 3), 1]);
  });

  it('refuse points of the wrong index', () => {
    expect(() => freeEnergiesOf([{ ...water, frequencies: [-50, 3657, 3756] }], [null], [16, 1, 1])).toThrow(/well 0 has 1 imaginary/);
    expect(() => freeEnergiesOf([water], [water], [16, 1, 1])).toThrow(/barrier 0 has 0 imaginary/);
  });
});

import { describe, expect, it } from 'vitest';
import { analyseProfile } from './analyse.js';
import { eyringRate } from './eyring.js';
import { seriesOfBarriers } from './hindered-rotor/periodic-series.js';
import { rigidTangent } from './hindered-rotor/reduced-moment.js';
import { rotorResultOfProfile } from './hindered-rotor/rotor-result-of-profile.js';
import { geometryAt, PEROXIDE, profileDocument } from './profile.fixture.js';
import { type ProvedStationaryPoint, provedEnergies } from './proved-energies.js';
import { vibrations, zeroPointEnergy } from './vibrations.js';

const document = profileDocument(PEROXIDE, seriesOfBarriers([-8, -24]));
const MASSES = [15.999, 15.999, 1.008, 1.008];

/** A Hessian (rotation of the whole molecule takes about half of the torsion out of it again) whose mass-weighted force constant is 700 for every motion but the torsion and `torsional` for that. */
function hessianAt(x: Float64Array, torsional: number): Float64Array {
  const tangent = rigidTangent(x, [0, 1], [1, 3]);
  const weighted = tangent.map((value, n) => value * Math.sqrt(MASSES[Math.floor(n / 3)]));
  const square = weighted.reduce((sum, value) => sum + value * value, 0);
  const hessian = new Float64Array(144);
  for (let i = 0; i < 12; i++)
    for (let j = 0; j < 12; j++) {
      const scale = Math.sqrt(MASSES[Math.floor(i / 3)] * MASSES[Math.floor(j / 3)]);
      const along = (weighted[i] * weighted[j]) / square;
      hessian[12 * i + j] = scale * (700 * ((i === j ? 1 : 0) - along) + torsional * along);
    }
  return hessian;
}

function proof(verdicts: readonly string[]): ProvedStationaryPoint[] {
  return document.stationaryPoints.map((point, of) => {
    const coordinates = Float64Array.from(point.coordinates);
    const torsional = point.kind === 'well' ? 60 : -2000;
    return { of, verdict: verdicts[of], energy: point.energy - 100, coordinates, hessian: hessianAt(coordinates, torsional) };
  });
}
const kinds = document.stationaryPoints.map((point) => (point.kind === 'well' ? 'minimum' : 'saddle'));

describe('energies of proved points', () => {
  it('are the heights of the saddles, and free energies that lose the torsion at the saddle', () => {
    const { saddles, saddleCounts, freeEnergies, transmission, notes } = provedEnergies(document, proof(kinds));
    expect(notes).toEqual([]);
    expect(saddleCounts).toEqual([1, 1]);
    const heights = analyseProfile(document).barriers.map((barrier) => barrier.energy);
    saddles.forEach((height, i) => {
      expect(height).toBeCloseTo(heights[i], 8);
    });
    if (!freeEnergies || !transmission) throw new Error('all wells are minima');
    const { wells, barriers } = freeEnergies(298.15);
    expect(wells[0]).toBeCloseTo(wells[1], 8);
    // the well has one vibration more than the saddle: its zero point is most of the difference, rotation a little of it
    const x = Float64Array.from(document.stationaryPoints.find((point) => point.kind === 'well')?.coordinates ?? []);
    const [torsion] = vibrations(hessianAt(x, 60), x, MASSES).frequencies;
    barriers.forEach((barrier, i) => {
      expect(Math.abs((barrier ?? 0) - wells[0] - heights[i] + zeroPointEnergy([torsion]))).toBeLessThan(0.3);
    });
    for (const kappa of transmission(298.15)) expect(kappa).toBeGreaterThan(1);
    const analysis = analyseProfile(document, { saddles, freeEnergies, transmission });
    expect(analysis.rows[0].processes[0].barrier).toBeCloseTo(Math.min(...barriers.map((b) => b ?? 0)) - wells[0], 8);
  });

  it('take the hindered rotor for the torsion of each well on request: its basin against the oscillator of that mode', () => {
    const oscillators = provedEnergies(document, proof(kinds));
    const hindered = provedEnergies(document, proof(kinds), MASSES, true);
    if (!oscillators.freeEnergies || !hindered.freeEnergies) throw new Error('all wells are minima');
    const [before, after] = [oscillators.freeEnergies(298.15), hindered.freeEnergies(298.15)];
    expect(after.barriers).toEqual(before.barriers);
    expect(after.wells[0]).toBeCloseTo(after.wells[1], 6);
    // both wells together are the rotor of the turn, by Pitzer and Gwinn with the frequency that is replaced
    const x = Float64Array.from(document.stationaryPoints.find((point) => point.kind === 'well')?.coordinates ?? []);
    const [frequency] = vibrations(hessianAt(x, 60), x, MASSES).frequencies;
    const RT = 1.987204259e-3 * 298.15;
    const [{ classical }] = rotorResultOfProfile(document, [298.15]).rows;
    const u = (1.438776877 * frequency) / 298.15;
    const ofBasin = -RT * Math.log((classical.partitionFunction / 2) * (u / 2 / Math.sinh(u / 2)));
    const ofOscillator = RT * Math.log(2 * Math.sinh(u / 2));
    expect(rotorResultOfProfile(document, [298.15]).symmetryNumber).toBe(1);
    expect(after.wells[0] - before.wells[0]).toBeCloseTo(ofBasin - ofOscillator, 3);
    expect(() =>
      provedEnergies(
        document,
        proof(kinds).map(({ hessian, ...point }) => ({ ...point, frequencies: [frequency, 800, 900, 1000, 1100, 1200] })),
        MASSES,
        true,
      ),
    ).toThrow(/Hessian/);
  });

  it('count a saddle off the mirror plane twice: its mirror image joins the same wells', () => {
    const turned = (phi: number): Float64Array => Float64Array.from(geometryAt(PEROXIDE, phi));
    const points = proof(kinds).map((point) => {
      const { kind, angle } = document.stationaryPoints[point.of];
      return kind === 'barrier' && Math.abs(angle) < 1
        ? { ...point, coordinates: turned(25), hessian: hessianAt(turned(25), -2000) }
        : point;
    });
    const { saddles, saddleCounts } = provedEnergies(document, points);
    const { barriers } = analyseProfile(document);
    expect(saddleCounts).toEqual(barriers.map(({ angle }) => (Math.abs(angle) < 1 ? 2 : 1)));
    const [one, two] = [[1, 1], saddleCounts].map(
      (counts) => analyseProfile(document, { saddles, saddleCounts: counts }).rows[0].processes[0].forward?.value ?? 0,
    );
    const [over] = barriers.filter(({ angle }) => Math.abs(angle) < 1);
    expect((two - one) / eyringRate(over.energy, 298.15)).toBeCloseTo(1, 8);
  });

  it('are unknown where nothing was proved, and the notes say so', () => {
    const barrier = document.stationaryPoints.findIndex((point) => point.kind === 'barrier');
    const odd = provedEnergies(document, proof(kinds.map((kind, of) => (of === barrier ? 'other saddle' : kind))));
    expect(odd.saddles.filter((height) => height === null)).toHaveLength(1);
    expect(odd.notes.map((note) => note.code)).toEqual(['proof/saddle']);
    expect(odd.notes[0].message).toMatch(/other saddle/);
    // the height of the envelope does not take the place of a saddle that was looked for and not found
    const { rows, cautions } = analyseProfile(document, { saddles: odd.saddles });
    expect(rows[0].processes[0]).toMatchObject({ barrier: null, forward: null, racemisationHalfLife: null, stabilityClass: null });
    expect(rows[0].processes[0].refused.map((note) => note.code)).toEqual(['analysis/no-rate']);
    expect(rows[0].barrierRates.filter((rates) => rates === null)).toHaveLength(1);
    expect(cautions.map((note) => note.code)).toContain('caution/no-saddle');
    const well = document.stationaryPoints.findIndex((point) => point.kind === 'well');
    const lost = provedEnergies(document, proof(kinds.map((kind, of) => (of === well ? 'merged' : kind))));
    expect(lost.freeEnergies).toBeNull();
    expect(lost.notes.map((note) => note.code)).toEqual(['proof/well']);
    expect(() => provedEnergies(document, [{ ...proof(kinds)[0], of: 99 }])).toThrow(/this very profile/);
    expect(() =>
      provedEnergies(
        document,
        proof(kinds).map(({ hessian, ...point }) => point),
      ),
    ).toThrow(/neither a Hessian nor frequencies/);
    const known = proof(kinds).map(({ hessian, ...point }) => ({
      ...point,
      frequencies: vibrations(hessian ?? [], point.coordinates, MASSES).frequencies,
    }));
    expect(provedEnergies(document, known).freeEnergies?.(298.15)).toEqual(
      provedEnergies(document, proof(kinds), MASSES).freeEnergies?.(298.15),
    );
  });
});

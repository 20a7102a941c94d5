/** What follows from real scans: scan, proof and analysis together, beside measured values where there are any. */
import { kcalPer, torsionalStrain } from '@tordial/analysis';
import { moleculeFromSmiles, radians, turnAbout } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import { beforeAll, describe, expect, it } from 'vitest';
import { analyseDocument, type DocumentAnalysis } from './profile-analysis.js';
import { provedPoints } from './proved-points.js';
import { torsionProfile } from './torsion-profile.js';

async function proved(smiles: string, torsion: readonly [number, number, number, number], step: number): Promise<ProfileDocument> {
  return provedPoints(await torsionProfile(moleculeFromSmiles(smiles), torsion, { step }));
}

describe('butane', () => {
  let document: ProfileDocument;
  let analysis: DocumentAnalysis;
  beforeAll(async () => {
    document = await proved('CCCC', [0, 1, 2, 3], 10);
    analysis = analyseDocument(document, { temperatures: [250, 298.15, 400] });
  }, 60_000);

  it("has anti and two gauche rotamers, these each other's mirror image", () => {
    const { rotamers } = analysis.electronic;
    expect(rotamers.map(({ label }) => label)).toEqual(['ap (anti)', '-sc (gauche)', '+sc (gauche)']);
    expect(rotamers.map(({ mirrorImages }) => mirrorImages)).toEqual([[0], [2], [1]]);
    expect(rotamers.map(({ identical }) => identical)).toEqual([[], [], []]);
  });

  it('has as much gauche as the gas: about a third at 25 C, more when it is warmer', () => {
    // 0.6 to 0.9 kcal/mol of enthalpy and two gauche forms give 26 to 42 % (measured by Raman and infrared spectra of the gas; from memory)
    const gauche = (analysis.freeEnergy?.rows ?? []).map(({ populations: { byFreeEnergy } }) => 1 - (byFreeEnergy?.[0] ?? Number.NaN));
    expect(gauche).toHaveLength(3);
    expect(gauche[1]).toBeGreaterThan(0.26);
    expect(gauche[1]).toBeLessThan(0.42);
    expect(gauche[0]).toBeLessThan(gauche[1]);
    expect(gauche[2]).toBeGreaterThan(gauche[1]);
  });

  it('turns about its central bond at 121 cm-1 when it is anti, 117 cm-1 when gauche', () => {
    // torsional fundamentals of the gas, D. A. C. Compton, S. Montero, W. F. Murphy, J. Phys. Chem. 84, 3587 (1980), from memory; MMFF94 overstates the barrier
    const { hinderedRotor } = analysis;
    if (!hinderedRotor) throw new Error('butane is a hindered rotor');
    expect(Math.abs((hinderedRotor.fundamental ?? 0) - 121)).toBeLessThan(20);
    const gauche = hinderedRotor.states.filter(({ wells }) => wells.length === 2);
    expect(Math.abs(gauche[1].energy - gauche[0].energy - 117)).toBeLessThan(20);
    expect(gauche[0].splitting).toBeLessThan(1e-6);
    expect(hinderedRotor.symmetryNumber).toBe(1);
    // kT is above the quantum at 250 K and above
    for (const { quantum, pitzerGwinn } of hinderedRotor.rows)
      expect(Math.abs((pitzerGwinn?.partitionFunction ?? 0) / quantum.partitionFunction - 1)).toBeLessThan(0.02);
  });

  it('has wells whose external symmetry is that of their point groups, C2h and C2', () => {
    expect(analysis.wells?.map((well) => [well?.symmetryNumber, well?.chiral])).toEqual([
      [2, false],
      [2, true],
      [2, true],
    ]);
    // S of the gas mixture at 298.15 K, 310.1 J/mol/K (API tables, from memory): shares of each well with their entropy of mixing
    const { byFreeEnergy } = analysis.freeEnergy?.rows[1].populations ?? {};
    const entropy = (byFreeEnergy ?? []).reduce(
      (sum, share, i) => sum + share * ((analysis.wells?.[i]?.rows[1].entropy ?? Number.NaN) - 8.314462618 * Math.log(share)),
      0,
    );
    // harmonic torsions, of a force field that is stiffer than the molecule, fall short of it
    expect(entropy).toBeLessThan(310.1);
    expect(entropy).toBeGreaterThan(310.1 - 9);
  });

  it('has saddles whose rates obey detailed balance with the populations', () => {
    for (const { barrierRates, populations } of analysis.freeEnergy?.rows ?? []) {
      expect(barrierRates).toHaveLength(3);
      barrierRates.forEach((rates, i) => {
        if (!rates || !populations.byFreeEnergy) throw new Error('every barrier of butane is proved');
        const [from, to] = [populations.byFreeEnergy[i], populations.byFreeEnergy[(i + 1) % 3]];
        expect((rates.forward * from) / (rates.backward * to)).toBeCloseTo(1, 8);
      });
    }
  });

  it('couples alike from either end: the two protons of one CH2 see the other CH2 by symmetry', () => {
    const [, { couplings }] = analysis.electronic.rows;
    const value = new Map(couplings?.map(({ protons, coupling }) => [protons.join('-'), coupling]));
    const sorted = [...value.values()].sort((a, b) => a - b);
    expect(sorted).toHaveLength(4);
    expect(sorted[1] - sorted[0]).toBeLessThan(0.02);
    expect(sorted[3] - sorted[2]).toBeLessThan(0.02);
    // J = 8.5 to 9 and 5 to 6 Hz in measured n-alkane chains (from memory); the method does not know of solvents
    expect(Math.abs(sorted[3] - 8.7)).toBeLessThan(1.5);
    expect(Math.abs(sorted[0] - 5.5)).toBeLessThan(1.5);
  });

  it('keeps its populations within a few percent when the hindered rotor takes the place of the torsional vibration', () => {
    const hindered = analyseDocument(document, { hinderedTorsion: true });
    const [before, after] = [analysis.freeEnergy?.rows[1], hindered.freeEnergy?.rows[0]].map(
      (row) => row?.populations.byFreeEnergy?.[0] ?? 0,
    );
    expect(before).not.toBe(after);
    expect(Math.abs(before - after)).toBeLessThan(0.03);
    expect(hindered.freeEnergy?.rows[0].populations.byFreeEnergy?.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 10);
  });

  it('is strained by what the profile says: 5.2 kcal/mol eclipsed, nothing when anti', () => {
    for (const { angle, coordinates, relativeEnergy } of document.points) {
      const strain = torsionalStrain(Float64Array.from(coordinates), [document]);
      expect(strain.rotors[0].angle).toBeCloseTo(angle === -180 ? strain.rotors[0].angle : angle, 4);
      expect(strain.total).toBeCloseTo(relativeEnergy, 4);
    }
    // a geometry that is not one of the profile's: gauche turned rigidly to 0
    const gauche = document.stationaryPoints.find(({ kind, angle }) => kind === 'well' && angle > 0 && angle < 90);
    if (!gauche) throw new Error('there is a gauche well');
    const x = Float64Array.from(gauche.coordinates);
    turnAbout(x, 1, 2, document.rotor.sides[1], -radians(gauche.angle));
    const eclipsed = document.points.find(({ angle }) => angle === 0);
    expect(torsionalStrain(x, [document]).total).toBeCloseTo((eclipsed?.relativeEnergy ?? 0) * kcalPer(document.unit), 3);
  });
});

describe('a benzamide with one ortho methyl', () => {
  it('racemises over proved saddles, with nothing that needs a rate left out', async () => {
    const document = await proved('CN(C)C(=O)c1ccccc1C', [4, 3, 5, 10], 15);
    const { electronic, freeEnergy, hinderedRotor, notes } = analyseDocument(document);
    expect(notes).toEqual([]);
    expect(electronic.rotamers.map(({ mirrorImages }) => mirrorImages)).toEqual([[1], [0]]);
    expect(electronic.barriers.map(({ kind }) => kind)).toEqual(['crossing', 'crossing']);
    // behind a crossing the saddle lies higher
    for (const { saddle, energy } of electronic.barriers) expect(saddle ?? 0).toBeGreaterThan(energy);
    const [process] = freeEnergy?.rows[0].processes ?? [];
    expect(process.kind).toBe('racemisation');
    expect(process.stabilityClass?.class).toBe(1);
    expect(process.racemisationHalfLife?.value).toBeCloseTo(Math.LN2 / (2 * (process.forward?.value ?? 0)), 12);
    expect(electronic.rotamerCouplings).toBeNull();
    expect(hinderedRotor?.notes.map(({ code }) => code)).toEqual(['rotor/branches']);
    // its envelope is cut off before it is proved: no rate then
    const { proved: _, ...bare } = document;
    const [unproved] = analyseDocument(bare).electronic.rows[0].processes;
    expect([unproved.forward, unproved.racemisationHalfLife, unproved.stabilityClass]).toEqual([null, null, null]);
  }, 60_000);

  it('takes no rate from the height of a smooth barrier whose proof failed', async () => {
    const document = await proved('OO', [2, 0, 1, 3], 15);
    const refuted = {
      ...document,
      proved: document.proved?.map((point) =>
        point.kind === 'barrier' && Math.abs(point.angle) < 1 ? { ...point, verdict: 'other saddle' as const } : point,
      ),
    };
    expect(analyseDocument(document).electronic.rows[0].processes[0].forward).not.toBeNull();
    for (const { rows, cautions } of [
      analyseDocument(refuted).electronic,
      analyseDocument(refuted).freeEnergy ?? analyseDocument(refuted).electronic,
    ]) {
      expect(rows[0].processes[0].forward).toBeNull();
      expect(rows[0].processes[0].refused).toHaveLength(1);
      expect(cautions.map(({ code }) => code)).toContain('caution/no-saddle');
    }
  }, 60_000);
});

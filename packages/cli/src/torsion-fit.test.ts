import { checkedReference, referenceOfTable, usualTerms } from '@tordial/analysis';
import { mmff94, torsionTermsOn } from '@tordial/forcefield';
import { moleculeFromSmiles, torsion } from '@tordial/geometry';
import type { ProfileDocument } from '@tordial/scan';
import { beforeAll, describe, expect, it } from 'vitest';
import { readFit } from './fit-reader.js';
import { profileAsReference, torsionFit } from './torsion-fit.js';
import { torsionOverridesFor } from './torsion-overrides.js';
import { torsionProfile } from './torsion-profile.js';

const QUICK = { step: 15, conformers: 1 } as const;

describe('MMFF94 terms', () => {
  // constants: MMFFTOR, T. A. Halgren, J. Comput. Chem. 17, 587 (1996), as this force field has them
  it.each([
    ['CCCC', [0, 1, 2, 3]],
    ['CCO', [0, 1, 2, 8]],
    ['CCSC', [0, 1, 2, 3]],
    ['CC(=O)NC', [1, 3, 4, 9]],
    ['COC=C', [0, 1, 2, 3]],
  ] as const)('of the driven torsion of %s come back from a profile of that term alone', async (smiles, atoms) => {
    const molecule = moleculeFromSmiles(smiles);
    const profile = await torsionProfile(molecule, atoms, { ...QUICK, rigid: true });
    const [term] = torsionTermsOn(mmff94(molecule).parameters, atoms[1], atoms[2]).filter((t) => t.atoms.join() === atoms.join());
    const [v1, v2, v3] = term.v;
    const points = profile.points.map(({ angle, coordinates }) => {
      const phi = torsion(Float64Array.from(coordinates), atoms[0], atoms[1], atoms[2], atoms[3]);
      return { angle, energy: 0.5 * (v1 * (1 + Math.cos(phi)) + v2 * (1 - Math.cos(2 * phi)) + v3 * (1 + Math.cos(3 * phi))) };
    });
    // the profile's own energies replaced by the term's: the document then describes that term
    const alone: ProfileDocument = { ...profile, points: profile.points.map((point, n) => ({ ...point, energy: points[n].energy })) };
    const { series } = torsionFit([{ profile: alone }], { order: 3 });
    series[0].terms.forEach(({ v }, n) => {
      expect(Math.abs(v - term.v[n])).toBeLessThan(1e-6);
    });
  });
});

describe('the loop of fit, override and scan', () => {
  // invented better curve: MMFF94s of an ether with another series on its C-O-C-C torsions
  const ether = moleculeFromSmiles('CCOC');
  const atoms = [0, 1, 2, 3] as const;
  const better = usualTerms([0.8, -0.9, 1.6]);
  let profile: ProfileDocument;
  let reference: ProfileDocument;
  beforeAll(async () => {
    profile = await torsionProfile(ether, atoms, QUICK);
    reference = await torsionProfile(ether, atoms, { ...QUICK, torsionOverrides: [{ torsions: [[0, 1, 2, 3]], terms: better }] });
  });

  it('finds the series behind a reference that carries only angles and energies, relaxing in the fitted field', async () => {
    const table = referenceOfTable(
      `angle (degree),energy (kcal/mol)\n${reference.points.map(({ angle, energy }) => `${angle},${energy}`).join('\n')}`,
    );
    const document = torsionFit([{ profile, reference: table }], { order: 3 });
    document.series[0].terms.forEach(({ v }, n) => {
      expect(Math.abs(v - better[n].v)).toBeLessThan(5e-3);
    });
    expect(document.quality.selfConsistency).toMatchObject({ converged: true });
    expect(document.quality.rmsdBefore).toBeGreaterThan(0.2);
    expect(document.quality.rmsdAfter).toBeLessThan(2e-3);
    expect(document.sets[0].after.meanBarrierError).toBeLessThan(0.01);
    expect(document.sets[0].before.meanBarrierError).toBeGreaterThan(0.1);
    expect(readFit(JSON.stringify(document))).toEqual(JSON.parse(JSON.stringify(document)));

    const { overrides, notes } = torsionOverridesFor(document, ether);
    expect(notes).toEqual([]);
    const again = await torsionProfile(ether, atoms, { ...QUICK, torsionOverrides: overrides });
    expect(again.provenance.potential).toBe('MMFF94s + series');
    expect(again.provenance['torsionSeries']).toEqual(overrides);
    expect(again.rotor.parameters.find((term) => term.atoms.join() === '0,1,2,3')).toMatchObject({ source: 'series' });
    again.points.forEach((point, n) => {
      expect(Math.abs(point.relativeEnergy - reference.points[n].relativeEnergy)).toBeLessThan(5e-3);
    });
  });

  it('finds it at the geometries of a reference profile as they are', () => {
    const document = torsionFit([{ profile, reference: profileAsReference(reference, profile) }], { order: 3, geometries: 'given' });
    document.series[0].terms.forEach(({ v }, n) => {
      expect(Math.abs(v - better[n].v)).toBeLessThan(1e-4);
    });
    expect(document.quality.selfConsistency).toBeNull();
  });

  it('chooses the order by cross-validation', () => {
    const document = torsionFit([{ profile, reference: profileAsReference(reference, profile) }], { geometries: 'given' });
    expect(document.settings.order).toBe(3);
    expect(document.quality.crossValidation?.errors).toHaveLength(6);
  });

  it('names the torsions as atoms and as patterns, in the forms programs read', () => {
    const document = torsionFit([{ profile, reference: profileAsReference(reference, profile) }], {
      order: 3,
      geometries: 'given',
      scope: 'type',
    });
    const [series] = document.series;
    expect(series.torsions).toEqual([[0, 1, 2, 3]]);
    expect(series.smarts.patterns).toEqual([
      { smarts: '[#6;X4;A;!R:1]-[#6;X4;A;!R:2]-[#8;X2;A;!R:3]-[#6;X4;A;!R:4]', matches: 1, fitted: 1 },
    ]);
    expect(series.forms.map(({ unit }) => unit)).toEqual(['kcal/mol', 'kJ/mol']);
    expect(series.forms[1].fourier.terms[0].v).toBeCloseTo(4.184 * series.terms[0].v, 5);
    expect(series.forms[0].cosinePowers?.c).toHaveLength(7);
  });

  it('maps a reference with its atoms in another order, and says so', () => {
    const order = [3, 2, 1, 0, ...Array.from({ length: ether.atomCount - 4 }, (_, n) => ether.atomCount - 1 - n)];
    const place = (atom: number): number => order.indexOf(atom);
    const shuffled: ProfileDocument = {
      ...reference,
      molecule: {
        ...reference.molecule,
        elements: order.map((atom) => reference.molecule.elements[atom]),
        formalCharges: order.map((atom) => reference.molecule.formalCharges[atom]),
        bonds: reference.molecule.bonds.map(([a, b, n]) => [Math.min(place(a), place(b)), Math.max(place(a), place(b)), n] as const),
      },
      rotor: { ...reference.rotor, torsion: [place(0), place(1), place(2), place(3)], axis: [place(1), place(2)] },
      points: reference.points.map((point) => ({
        ...point,
        coordinates: order.flatMap((atom) => point.coordinates.slice(3 * atom, 3 * atom + 3)),
      })),
    };
    const mapped = profileAsReference(shuffled, profile);
    expect(mapped.notes.map(({ code }) => code)).toContain('reference/mapped');
    mapped.points.forEach(({ energy, angle }) => {
      const own = reference.points.find(
        (point) => Math.abs(point.angle - angle) < 0.01 || Math.abs(Math.abs(point.angle) - Math.abs(angle)) < 0.01,
      );
      expect(energy).toBeCloseTo(own?.energy ?? 0, 6);
    });
    expect(torsionFit([{ profile, reference: mapped }], { order: 3, geometries: 'given' }).series[0].terms[2].v).toBeCloseTo(1.6, 3);
  });

  it('puts the series on like torsions of another molecule, and says so', async () => {
    const document = torsionFit([{ profile, reference: profileAsReference(reference, profile) }], { order: 3, geometries: 'given' });
    const { overrides, notes } = torsionOverridesFor(document, moleculeFromSmiles('CCOCC'));
    expect(overrides[0].torsions).toHaveLength(2);
    expect(notes[0].code).toBe('fit/transferred');
    expect(() => torsionOverridesFor(document, moleculeFromSmiles('CCCC'))).toThrow(expect.objectContaining({ code: 'fit/no-torsion' }));
    const description = torsionFit([{ profile }], { order: 3 });
    expect(() => torsionOverridesFor(description, ether)).toThrow(expect.objectContaining({ code: 'fit/description' }));
  });

  it('fits two molecules at once', async () => {
    const longer = moleculeFromSmiles('CCCOC');
    const there = [1, 2, 3, 4] as const;
    const second = await torsionProfile(longer, there, QUICK);
    const secondReference = await torsionProfile(longer, there, {
      ...QUICK,
      torsionOverrides: [{ torsions: [[...there]], terms: better }],
    });
    const document = torsionFit(
      [
        { profile, reference: profileAsReference(reference, profile) },
        { profile: second, reference: profileAsReference(secondReference, second) },
      ],
      { order: 3, geometries: 'given' },
    );
    expect(document.sets).toHaveLength(2);
    expect(document.series[0].terms[1].v).toBeCloseTo(-0.9, 3);
  });

  it('gives a series to each type on the bond where that is asked for, and tells what stands in for what', () => {
    const document = torsionFit([{ profile, reference: profileAsReference(reference, profile) }], {
      order: 3,
      geometries: 'given',
      scope: 'axis',
    });
    expect(document.series.length).toBeGreaterThan(1);
    expect(document.notes.some(({ code }) => code === 'fit/not-determined' || code === 'fit/correlated')).toBe(true);
    expect(document.quality.rmsdAfter).toBeLessThan(0.02);
  });

  it('writes energies in kJ/mol and terms in kcal/mol', () => {
    const input = { profile, reference: profileAsReference(reference, profile) };
    const [kcal, kj] = (['kcal/mol', 'kJ/mol'] as const).map((unit) => torsionFit([input], { order: 2, geometries: 'given', unit }));
    expect(kj.quality.rmsdAfter).toBeCloseTo(4.184 * kcal.quality.rmsdAfter, 5);
    expect(kj.series).toEqual(kcal.series);
  });

  it('refuses what does not fit together', () => {
    const table = referenceOfTable('angle,energy (kcal/mol)\n0,1\n60,0\n120,1\n180,0.2');
    const input = { profile, reference: table };
    expect(() => torsionFit([])).toThrow(expect.objectContaining({ code: 'fit/input' }));
    expect(() => torsionFit([input, { profile }])).toThrow(expect.objectContaining({ code: 'fit/input' }));
    expect(() => torsionFit([input], { order: 4 })).toThrow(expect.objectContaining({ code: 'fit/points' }));
    const broken = { source: 'broken', points: [{ angle: 0, energy: Number.NaN }], notes: [] };
    expect(() => torsionFit([{ profile, reference: broken }], { order: 0 })).toThrow(expect.objectContaining({ code: 'fit/value' }));
    expect(() => checkedReference('x', [{ angle: 0, energy: Number.NaN }], [])).toThrow(
      expect.objectContaining({ code: 'reference/value' }),
    );
  });
});

it('goes on relaxing until geometries and terms agree where several torsions share the series', async () => {
  // isopropanol: both C-C-O-H torsions share the series, and the geometry answers to it; the better curve is invented
  const molecule = moleculeFromSmiles('CC(C)O');
  const atoms = [0, 1, 3, 11] as const;
  const better = usualTerms([2.5, -1.5, 2]);
  const torsions = [atoms, [2, 1, 3, 11] as const];
  const profile = await torsionProfile(molecule, atoms, QUICK);
  const reference = await torsionProfile(molecule, atoms, { ...QUICK, torsionOverrides: [{ torsions, terms: better }] });
  const table = checkedReference(
    'angles and energies',
    reference.points.map(({ angle, energy }) => ({ angle, energy })),
    [],
  );
  const document = torsionFit([{ profile, reference: table }], { order: 3 });
  expect(document.series[0].torsions).toHaveLength(2);
  expect(document.quality.selfConsistency?.iterations).toBeGreaterThan(1);
  expect(document.quality.selfConsistency?.converged).toBe(true);
  expect(document.quality.rmsdAfter).toBeLessThan(5e-3);
  document.series[0].terms.forEach(({ v }, n) => {
    expect(Math.abs(v - better[n].v)).toBeLessThan(0.02);
  });
});

it('describes a profile by one series of its angle', async () => {
  const profile = await torsionProfile('OO', [2, 0, 1, 3], QUICK);
  const { quality, settings, series } = torsionFit([{ profile }]);
  expect(settings.target).toBe('profile');
  expect(quality.rmsdAfter).toBeLessThan(0.05);
  expect(series[0].types).toBeNull();
});

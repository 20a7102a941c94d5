/** Torsion terms of MMFF94 fitted to reference curves: profiles and references in, a `tordial/fit/1` document out. */
import {
  type CurveSample,
  chooseOrder,
  curveErrors,
  type DocumentFitSet,
  type DocumentSeries,
  FIT_SCHEMA,
  type FitDocument,
  type FitSeriesOptions,
  type FitSet,
  type FittedTerm,
  type FitWeights,
  fitSeries,
  moleculeOfDocument,
  type Reference,
  type Restraint,
  referenceOfProfile,
  type SeriesFit,
  type SeriesTerm,
  SMARTS_STATEMENT,
  selfConsistentFit,
  seriesEnergy,
  seriesForms,
  torsionPatterns,
  usualPhase,
} from '@tordial/analysis';
import { type Mmff94, mmff94, type TorsionSeries, type TorsionTerm } from '@tordial/forcefield';
import { type Coordinates, type Molecule, type Note, radians, TordialError, torsion as torsionAngle, wrapDegrees } from '@tordial/geometry';
import { drive, drivenRotor, type EnergyUnit, modelHessian, type ProfileDocument, perKcal, relaxationAt } from '@tordial/scan';
import { allTorsionTerms, typeKey } from './torsion-overrides.js';
import { VERSION } from './version.js';

type Torsion = readonly [number, number, number, number];

/** A profile, and the better curve that the force field is to follow; without one the profile itself is described by a series. */
export interface TorsionFitInput {
  readonly profile: ProfileDocument;
  readonly reference?: Reference;
}

export interface TorsionFitOptions {
  /** Which torsions share a series: those on the rotor's bond of the driven torsion's MMFF94 type (default), all of the molecule of that type, or all on the bond, a series a type. */
  readonly scope?: 'rotor' | 'type' | 'axis';
  /** Highest periodicity, or the range from which cross-validation chooses; 1 to 6. */
  readonly order?: number | { readonly from: number; readonly to: number };
  readonly folds?: number | 'leave-one-out';
  /** 0 and 180 degrees (default), or free. */
  readonly phases?: 'fixed' | 'free';
  readonly weights?: FitWeights;
  readonly restraint?: Restraint;
  /** Where restraints and undetermined terms go: zero, or the force field's own terms (default). */
  readonly toward?: 'zero' | 'existing';
  /** Fit at the reference's geometries, or at those relaxed in the fitted field, repeated until both agree (default). */
  readonly geometries?: 'given' | 'relaxed';
  readonly unit?: EnergyUnit;
  /** For profiles that another potential made; otherwise that of the profile. */
  readonly forceField?: 'MMFF94' | 'MMFF94s';
  readonly notes?: readonly Note[];
}

/**
 * Fits torsion series.
 *
 * Throws `fit/input` for inputs that do not go together, `fit/no-term` when MMFF94 has no term on the driven torsion, `fit/type` when the driven
 * torsions of several molecules are of different types, and as `fitSeries`, `chooseOrder`, `mmff94` and `relaxationAt` do.
 */
export function torsionFit(inputs: readonly TorsionFitInput[], options: TorsionFitOptions = {}): FitDocument {
  if (inputs.length === 0) throw new TordialError('fit/input', 'there is no profile to fit to; give at least one');
  const withReference = inputs.filter(({ reference }) => reference !== undefined);
  if (withReference.length > 0 && withReference.length < inputs.length)
    throw new TordialError(
      'fit/input',
      `${inputs.length} profiles and ${withReference.length} references; give one reference a profile, in the same order`,
    );
  return withReference.length === 0 ? describe(inputs, options) : refit(inputs, options);
}

function settingsOf(
  options: TorsionFitOptions,
  inputs: readonly TorsionFitInput[],
): Required<Omit<TorsionFitOptions, 'notes' | 'forceField'>> {
  return {
    scope: options.scope ?? 'rotor',
    order: options.order ?? { from: 1, to: 6 },
    folds: options.folds ?? 'leave-one-out',
    phases: options.phases ?? 'fixed',
    weights: options.weights ?? { kind: 'uniform' },
    restraint: options.restraint ?? { kind: 'none', strength: 0 },
    toward: options.toward ?? 'existing',
    geometries: options.geometries ?? 'relaxed',
    unit: options.unit ?? inputs[0].profile.unit,
  };
}

interface Chosen {
  readonly options: FitSeriesOptions;
  readonly crossValidation: FitDocument['quality']['crossValidation'];
}

/** The options of the fit itself, its order chosen on these points where a range was given. */
function chosen(sets: readonly FitSet[], settings: ReturnType<typeof settingsOf>, toward: readonly (readonly SeriesTerm[])[]): Chosen {
  const { order, phases, weights, restraint, folds } = settings;
  const common = { phases, weights, restraint, toward: settings.toward === 'existing' ? toward : [] };
  if (typeof order === 'number') return { options: { ...common, order }, crossValidation: null };
  const choice = chooseOrder(sets, order, common, folds);
  return { options: { ...common, order: choice.order }, crossValidation: { folds: choice.folds, errors: choice.errors } };
}

/** A compact description: one series of the driven angle for the profile itself. */
function describe(inputs: readonly TorsionFitInput[], options: TorsionFitOptions): FitDocument {
  const settings = settingsOf(options, inputs);
  const notes: Note[] = [...(options.notes ?? [])];
  const references = inputs.map(({ profile }) => {
    const target = { molecule: moleculeOfDocument(profile.molecule), torsion: profile.rotor.torsion };
    return { ...referenceOfProfile(profile, target), source: `the profile itself, ${profile.provenance.potential}` };
  });
  const sets = references.map(
    ({ points }, n): FitSet => ({
      name: inputs[n].profile.molecule.name || inputs[n].profile.molecule.smiles,
      points: points.map(({ angle, energy }) => ({ angle, reference: energy, base: 0, torsions: [[radians(angle)]] })),
    }),
  );
  const { options: fitOptions, crossValidation } = chosen(sets, settings, []);
  const fit = fitSeries(sets, fitOptions);
  const own = inputs.map(({ profile }, n) => ownTerms(profile, references[n]));
  const after = sets.map(({ points }) => points.map(({ angle }) => seriesEnergy(fit.series[0], radians(angle))));
  return assemble({
    inputs,
    settings,
    notes: [...notes, ...references.flatMap((reference) => reference.notes)],
    target: 'profile',
    forceField: variantOf(inputs[0].profile, options),
    sets: inputs.map((_, n) => ({
      reference: references[n],
      before: own[n],
      after: after[n],
      torsions: [[inputs[n].profile.rotor.torsion]],
    })),
    groups: [{ types: null, class: null, before: [] }],
    fit,
    series: fit.series,
    crossValidation,
    order: fitOptions.order,
    selfConsistency: null,
  });
}

/** Energy of the torsion terms that a profile's document lists for its bond, at the geometries of the profile. */
function ownTerms({ rotor }: ProfileDocument, { points }: Reference): number[] {
  return points.map(({ coordinates }) =>
    rotor.parameters.reduce((sum, { atoms: [i, j, k, l], v, phases }) => {
      if (!coordinates) return sum;
      const terms = v.map((value, n) => ({ n: n + 1, v: value, phase: phases?.[n] ?? usualPhase(n + 1) }));
      return sum + seriesEnergy(terms, torsionAngle(coordinates, i, j, k, l));
    }, 0),
  );
}

function variantOf(profile: ProfileDocument, { forceField }: TorsionFitOptions): 'MMFF94' | 'MMFF94s' {
  if (forceField) return forceField;
  return /^MMFF94(?!s)/.test(profile.provenance.potential) ? 'MMFF94' : 'MMFF94s';
}

/** A molecule at work: its reference, its field, and where its torsions stand. */
interface FitMolecule {
  readonly molecule: Molecule;
  readonly profile: ProfileDocument;
  readonly reference: Reference;
  readonly own: Mmff94;
  /** For each series the torsions that have it. */
  readonly torsions: readonly (readonly Torsion[])[];
  readonly field: (series: readonly (readonly SeriesTerm[])[]) => Mmff94;
  readonly relax: (field: Mmff94) => Coordinates[];
}

function refit(inputs: readonly TorsionFitInput[], options: TorsionFitOptions): FitDocument {
  const settings = settingsOf(options, inputs);
  const notes: Note[] = [...(options.notes ?? []), ...inputs.flatMap(({ reference }) => reference?.notes ?? [])];
  const forceField = variantOf(inputs[0].profile, options);
  const fields = inputs.map(({ profile }) => {
    const molecule = moleculeOfDocument(profile.molecule);
    const own = mmff94(molecule, { variant: forceField, dielectric: dielectricOf(profile), torsionOverrides: carriedSeries(profile) });
    return { molecule, own, terms: allTorsionTerms(molecule, own) };
  });
  const groups = sharedGroups(inputs, fields, settings.scope);
  const molecules = inputs.map(({ profile, reference }, n): FitMolecule => {
    if (!reference) throw new TordialError('fit/input', 'a profile has no reference');
    return fitMolecule(profile, reference, fields[n], groups, settings.scope, notes);
  });

  const existing = groups.map(({ before }) => before);
  const pointsOf = (geometries: readonly (readonly Coordinates[])[]): FitSet[] => molecules.map((m, n) => fitSet(m, geometries[n]));
  const ownGeometries = molecules.map((m) =>
    settings.geometries === 'given' && m.reference.points.every(({ coordinates }) => coordinates) ? given(m) : m.relax(m.own),
  );
  const first = pointsOf(ownGeometries);
  const { options: fitOptions, crossValidation } = chosen(first, settings, existing);
  const relaxedIn = (series: readonly (readonly SeriesTerm[])[]): FitSet[] => pointsOf(molecules.map((m) => m.relax(m.field(series))));
  // the first round is at the geometries of the field as it was
  const consistent =
    settings.geometries === 'relaxed'
      ? selfConsistentFit(
          existing,
          (series) => (series === existing ? first : relaxedIn(series)),
          (sets) => fitSeries(sets, fitOptions),
        )
      : null;
  const fit = consistent ? consistent.fit : fitSeries(first, fitOptions);
  const series = consistent ? consistent.series : fit.series;
  if (consistent && !consistent.converged)
    notes.push({
      code: 'fit/not-self-consistent',
      message: `after ${consistent.iterations} rounds the relaxed profile still moves by ${consistent.change.toFixed(4)} kcal/mol; take fewer terms or a restraint`,
    });
  const final = consistent ? consistent.sets : first;
  return assemble({
    inputs,
    settings,
    notes,
    target: 'difference',
    forceField,
    sets: molecules.map((m, n) => ({
      reference: m.reference,
      before: ownGeometries[n].map((x) => m.own.evaluate(x)),
      after: final[n].points.map(
        ({ base, torsions }) =>
          base + torsions.reduce((sum, angles, g) => sum + angles.reduce((s, phi) => s + seriesEnergy(series[g], phi), 0), 0),
      ),
      torsions: m.torsions,
    })),
    groups,
    fit,
    series,
    crossValidation,
    order: fitOptions.order,
    selfConsistency: consistent && { iterations: consistent.iterations, change: consistent.change, converged: consistent.converged },
  });
}

function dielectricOf({ settings }: ProfileDocument): Mmff94['dielectric'] | undefined {
  const value = settings['dielectric'];
  return typeof value === 'object' && value !== null ? (value as Mmff94['dielectric']) : undefined;
}

/** Series that the profile's own field had already. */
function carriedSeries({ provenance }: ProfileDocument): readonly TorsionSeries[] {
  const value = provenance['torsionSeries'];
  return Array.isArray(value) ? (value as TorsionSeries[]) : [];
}

interface Group {
  readonly key: string;
  readonly types: Torsion;
  readonly class: number;
  readonly before: readonly SeriesTerm[];
}

type Field = { readonly molecule: Molecule; readonly own: Mmff94; readonly terms: readonly TorsionTerm[] };

/** The types that get a series, that of the driven torsion first. */
function sharedGroups(inputs: readonly TorsionFitInput[], fields: readonly Field[], scope: 'rotor' | 'type' | 'axis'): Group[] {
  const groups: Group[] = [];
  const add = (term: TorsionTerm): void => {
    const key = typeKey(term);
    if (groups.some((group) => group.key === key)) return;
    const before = term.v.map((v, n) => ({ n: n + 1, v, phase: term.phases?.[n] ?? usualPhase(n + 1) }));
    groups.push({ key, types: term.types as Torsion, class: term.class, before });
  };
  const driven = inputs.map(({ profile }, n) => drivenTerm(profile.rotor.torsion, fields[n].terms));
  add(driven[0]);
  driven.forEach((term, n) => {
    if (typeKey(term) !== groups[0].key)
      throw new TordialError(
        'fit/type',
        `the driven torsions are of different MMFF94 types, ${groups[0].key} in the first profile and ${typeKey(term)} in profile ${n + 1}; fit them apart`,
      );
  });
  if (scope === 'axis') for (const term of inputs.flatMap(({ profile }, n) => onAxis(fields[n].terms, profile.rotor.axis))) add(term);
  return groups;
}

function drivenTerm(torsion: Torsion, terms: readonly TorsionTerm[]): TorsionTerm {
  const found = terms.find(({ atoms }) => atoms.join() === torsion.join() || [...atoms].reverse().join() === torsion.join());
  if (!found)
    throw new TordialError(
      'fit/no-term',
      `MMFF94 has no term on the torsion ${torsion.join('-')} (an atom in line?); there is nothing to refit`,
    );
  return found;
}

function onAxis(terms: readonly TorsionTerm[], [a, b]: readonly [number, number]): TorsionTerm[] {
  return terms.filter(({ atoms: [, j, k] }) => (j === a && k === b) || (j === b && k === a));
}

function fitMolecule(
  profile: ProfileDocument,
  reference: Reference,
  { molecule, own, terms }: Field,
  groups: readonly Group[],
  scope: 'rotor' | 'type' | 'axis',
  notes: Note[],
): FitMolecule {
  const candidates = scope === 'type' ? terms : onAxis(terms, profile.rotor.axis);
  const torsions = groups.map(({ key }) => candidates.filter((term) => typeKey(term) === key).map(({ atoms }) => atoms as Torsion));
  const fitted = new Set(torsions.flat().flatMap((atoms) => [atoms.join(), [...atoms].reverse().join()]));
  const kept = own.torsionOverrides
    .map((series) => ({ ...series, torsions: series.torsions.filter((atoms) => !fitted.has(atoms.join())) }))
    .filter((series) => series.torsions.length > 0);
  const field = (series: readonly (readonly SeriesTerm[])[]): Mmff94 =>
    mmff94(molecule, {
      variant: own.variant,
      dielectric: own.dielectric,
      torsionOverrides: [
        ...kept,
        ...torsions.map((list, g) => ({ torsions: list, terms: series[g] ?? [] })).filter((s) => s.torsions.length > 0),
      ],
    });
  const { torsion } = profile.rotor;
  const rotor = drivenRotor(molecule, torsion);
  const preconditioner = modelHessian(molecule, torsion);
  let starts = reference.points.map(({ angle, coordinates }) => coordinates ?? nearest(profile, angle));
  const told = new Set<number>();
  const relax = (potential: Mmff94): Coordinates[] => {
    starts = reference.points.map(({ angle }, n) => {
      const relaxed = drive(
        relaxationAt(rotor, preconditioner, radians(angle), starts[n], { tolerance: 1e-4, maxEvaluations: 3000 }),
        potential,
      );
      if (!relaxed.converged && !told.has(angle)) {
        told.add(angle);
        notes.push({
          code: 'fit/not-relaxed',
          message: `the geometry at ${angle} degrees did not relax fully (gradient ${relaxed.gradientMax.toPrecision(2)} kcal/mol/angstrom)`,
        });
      }
      return relaxed.coordinates;
    });
    return starts;
  };
  return { molecule, profile, reference, own, torsions, field, relax };
}

/** Geometry of the profile's point that is nearest in angle. */
function nearest({ points }: ProfileDocument, angle: number): Coordinates {
  const away = (other: number): number => Math.abs(wrapDegrees(other - angle));
  return Float64Array.from(points.reduce((best, point) => (away(point.angle) < away(best.angle) ? point : best)).coordinates);
}

function given({ reference }: FitMolecule): Coordinates[] {
  return reference.points.flatMap(({ coordinates }) => (coordinates ? [coordinates] : []));
}

function fitSet({ profile, reference, torsions, field }: FitMolecule, geometries: readonly Coordinates[]): FitSet {
  const off = field([]);
  return {
    name: profile.molecule.name || profile.molecule.smiles,
    points: reference.points.map(({ angle, energy, weight }, n) => ({
      angle,
      reference: energy,
      base: off.evaluate(geometries[n]),
      torsions: torsions.map((list) => list.map(([i, j, k, l]) => torsionAngle(geometries[n], i, j, k, l))),
      ...(weight === undefined ? {} : { weight }),
    })),
  };
}

interface Parts {
  readonly inputs: readonly TorsionFitInput[];
  readonly settings: ReturnType<typeof settingsOf>;
  readonly notes: readonly Note[];
  readonly target: 'profile' | 'difference';
  readonly forceField: 'MMFF94' | 'MMFF94s';
  readonly sets: readonly {
    readonly reference: Reference;
    readonly before: readonly number[];
    readonly after: readonly number[];
    readonly torsions: readonly (readonly Torsion[])[];
  }[];
  readonly groups: readonly { readonly types: Torsion | null; readonly class: number | null; readonly before: readonly SeriesTerm[] }[];
  readonly fit: SeriesFit;
  readonly series: readonly (readonly FittedTerm[])[];
  readonly crossValidation: FitDocument['quality']['crossValidation'];
  readonly order: number;
  readonly selfConsistency: FitDocument['quality']['selfConsistency'];
}

function assemble({
  inputs,
  settings,
  notes,
  target,
  forceField,
  sets,
  groups,
  fit,
  series,
  crossValidation,
  order,
  selfConsistency,
}: Parts): FitDocument {
  const { unit } = settings;
  const factor = perKcal(unit);
  const compared = sets.map(({ reference, before, after, torsions }, n): DocumentFitSet => {
    const { profile } = inputs[n];
    const lowest = Math.min(...reference.points.map(({ energy }) => energy));
    const energies = reference.points.map(({ energy }) => (energy - lowest) * factor);
    const shifted = (values: readonly number[]): number[] => {
      const shift = energies.reduce((sum, energy, i) => sum + energy - values[i] * factor, 0) / energies.length;
      return values.map((value) => value * factor + shift);
    };
    const [own, fitted] = [shifted(before), shifted(after)];
    const samples = (values: readonly number[]): CurveSample[] => values.map((energy, i) => ({ angle: reference.points[i].angle, energy }));
    return {
      molecule: profile.molecule,
      torsion: profile.rotor.torsion,
      reference: reference.source,
      torsions,
      points: reference.points.map(({ angle, weight = 1 }, i) => ({
        angle: rounded(angle),
        reference: rounded(energies[i]),
        before: rounded(own[i]),
        after: rounded(fitted[i]),
        weight,
      })),
      before: roundedAll(curveErrors(samples(energies), samples(own))),
      after: roundedAll(curveErrors(samples(energies), samples(fitted))),
    };
  });
  const total = (pick: (set: DocumentFitSet) => number): number => {
    const count = compared.reduce((sum, { points }) => sum + points.length, 0);
    return Math.sqrt(compared.reduce((sum, set) => sum + set.points.length * pick(set) ** 2, 0) / count);
  };
  const molecule = moleculeOfDocument(inputs[0].profile.molecule);
  return {
    schema: FIT_SCHEMA,
    unit,
    forceField,
    series: series.map((terms, g) => documentSeries(molecule, sets[0].torsions[g], roundedAll(terms), groups[g])),
    sets: compared,
    quality: roundedAll({
      rmsdBefore: total(({ before }) => before.rmsd),
      rmsdAfter: total(({ after }) => after.rmsd),
      largestAfter: Math.max(...compared.map(({ after }) => after.largest)),
      residualStandardDeviation: fit.residualStandardDeviation === null ? null : fit.residualStandardDeviation * factor,
      points: fit.points,
      independentPoints: fit.independentPoints,
      parameters: fit.parameters,
      degreesOfFreedom: fit.degreesOfFreedom,
      crossValidation: crossValidation && {
        folds: crossValidation.folds,
        errors: crossValidation.errors.map(({ order: tried, error }) => ({ order: tried, error: error === null ? null : error * factor })),
      },
      correlations: fit.correlations,
      selfConsistency,
    }),
    settings: {
      target,
      geometries: settings.geometries,
      scope: settings.scope,
      order,
      phases: settings.phases,
      weights: settings.weights,
      restraint: { ...settings.restraint, toward: settings.toward },
    },
    notes: [...notes, ...fit.notes],
    provenance: { program: 'tordial', version: VERSION, profiles: inputs.map(({ profile }) => profile.provenance.potential) },
  };
}

function documentSeries(
  molecule: Molecule,
  torsions: readonly Torsion[],
  terms: readonly FittedTerm[],
  group: Parts['groups'][number],
): DocumentSeries {
  const fitted = new Set(torsions.flatMap((atoms) => [atoms.join(), [...atoms].reverse().join()]));
  const patterns = torsionPatterns(molecule, torsions).map(({ smarts, matches }) => ({
    smarts,
    matches: matches.length,
    fitted: matches.filter((atoms) => fitted.has(atoms.join())).length,
  }));
  return {
    torsions,
    terms,
    types: group.types,
    class: group.class,
    before: group.before,
    smarts: { patterns, statement: SMARTS_STATEMENT },
    forms: [roundedAll(seriesForms(terms, 'kcal/mol')), roundedAll(seriesForms(terms, 'kJ/mol'))],
  };
}

/** To 1e-7, without a negative zero. */
function rounded(value: number): number {
  return Math.round(value * 1e7) / 1e7 + 0;
}

/** Every number within plain data rounded. */
function roundedAll<T>(value: T): T {
  if (typeof value === 'number') return rounded(value) as T;
  if (Array.isArray(value)) return value.map(roundedAll) as T;
  if (typeof value === 'object' && value !== null)
    return Object.fromEntries(Object.entries(value).map(([name, held]) => [name, roundedAll(held)])) as T;
  return value;
}

/** A profile as a reference for another field's fit; a shorthand of `referenceOfProfile`. */
export function profileAsReference(reference: ProfileDocument, profile: ProfileDocument): Reference {
  return referenceOfProfile(reference, { molecule: moleculeOfDocument(profile.molecule), torsion: profile.rotor.torsion });
}

import { createMolecule, type Molecule, TordialError } from '@tordial/geometry';
import { describe, expect, it } from 'vitest';
import { type EnergyTerms, type Mmff94Options, mmff94 } from './mmff94.js';
import { gradientError, uniform } from './terms/gradient-check.fixture.js';
import { type ReferenceMolecule, readNci, readSuite, TERM_NAMES } from './validation.fixture.js';

interface Deviations {
  /** Largest deviation of the total from the reference, and of each term, kcal/mol. */
  readonly total: number;
  readonly terms: number;
  readonly names: string[];
}

/** The molecules that deviate by more than the limits, and by how much. */
function compare<T extends ReferenceMolecule>(
  references: readonly T[],
  options: Mmff94Options,
  limits: { total: number; terms: number },
  writing: (reference: T) => Molecule = ({ molecule }) => molecule,
): Deviations {
  let [worstTotal, worstTerm] = [0, 0];
  const names: string[] = [];
  for (const reference of references) {
    const potential = mmff94(writing(reference), options);
    const total = Math.abs(potential.evaluate(reference.x) - reference.total);
    const terms: EnergyTerms = potential.terms(reference.x);
    const term = Math.max(...TERM_NAMES.map((name) => Math.abs(terms[name] - reference.energies[name])));
    if (!(total <= limits.total && term <= limits.terms))
      names.push(`${reference.name} total ${total.toExponential(1)} term ${term.toExponential(1)}`);
    worstTotal = Math.max(worstTotal, total);
    worstTerm = Math.max(worstTerm, term);
  }
  return { total: worstTotal, terms: worstTerm, names };
}

const suites = { MMFF94: readSuite('MMFF94'), MMFF94s: readSuite('MMFF94s') };
// the files round coordinates to 4 decimals: the MMFF94 structures are relaxed, so the total hardly feels it, but single terms do
const SUITE_LIMITS = { MMFF94: { total: 1e-4, terms: 0.01 }, MMFF94s: { total: 1e-4, terms: 1e-4 } };

// T. A. Halgren, J. Comput. Chem. 17, 490 (1996) and 20, 720 (1999): the validation suites
describe.each(['MMFF94', 'MMFF94s'] as const)('the %s validation suite', (variant) => {
  it.each([true, false])('is reproduced in the dative writing, pair loop in vectors: %s', (vectors) => {
    expect(compare(suites[variant], { variant, vectors }, SUITE_LIMITS[variant]).names).toEqual([]);
  });

  it('is reproduced in the hypervalent writing', () => {
    const differing = suites[variant].filter(({ molecule, hypervalent }) => molecule !== hypervalent);
    expect(differing.length).toBeGreaterThan(30);
    expect(compare(differing, { variant }, SUITE_LIMITS[variant], ({ hypervalent }) => hypervalent).names).toEqual([]);
  });

  it('has one energy, whether the pair loop runs in vectors or not', () => {
    for (const { molecule, x } of suites[variant]) {
      const [fast, plain] = [true, false].map((vectors) => mmff94(molecule, { variant, vectors }).evaluate(x));
      expect(Math.abs(fast - plain)).toBeLessThanOrEqual(Math.max(1e-8, 1e-9 * Math.abs(plain)));
    }
  });
});

// structures of the NCI open set, energies computed with Debian's python3-rdkit 2022.09.3
describe('300 molecules of the NCI set', () => {
  const molecules = readNci();

  // two molecules whose constants come from the empirical bond rule, where the reference misses six molecules of the suite by up to 5e-3
  const byRule = ({ name }: ReferenceMolecule) => name === 'NCI700' || name === 'NCI1082';

  it('have the reference energies of MMFF94, term by term', () => {
    const tabulated = molecules.filter((reference) => !byRule(reference));
    expect(compare(tabulated, { variant: 'MMFF94' }, { total: 1e-3, terms: 1e-3 }).names).toEqual([]);
    expect(compare(molecules.filter(byRule), { variant: 'MMFF94' }, { total: 0.01, terms: 0.01 }).names).toEqual([]);
  });

  it('have the reference totals of MMFF94s', () => {
    const off = molecules.filter((reference) => {
      const { molecule, x, totalMmff94s } = reference;
      return !(Math.abs(mmff94(molecule).evaluate(x) - totalMmff94s) <= (byRule(reference) ? 0.01 : 1e-3));
    });
    expect(off.map(({ name }) => name)).toEqual([]);
  });
});

describe('the gradient', () => {
  it('agrees with central differences on every third molecule of the MMFF94 suite', () => {
    const off: string[] = [];
    suites.MMFF94.forEach(({ name, molecule, x }, n) => {
      if (n % 3 !== 0) return;
      const { worst, finite } = gradientError(mmff94(molecule, { variant: 'MMFF94' }).evaluate, x);
      if (!finite || worst > 1) off.push(`${name} ${worst}`);
    });
    expect(off).toEqual([]);
  });

  it('agrees with central differences away from the minimum', () => {
    const random = uniform(5);
    const off: string[] = [];
    suites.MMFF94s.forEach(({ name, molecule, x }, n) => {
      if (n % 5 !== 0) return;
      const moved = x.map((value) => value + 0.1 * random());
      const { worst, finite } = gradientError(mmff94(molecule, { vectors: n % 2 === 0 }).evaluate, moved);
      if (!finite || worst > 1) off.push(`${name} ${worst}`);
    });
    expect(off).toEqual([]);
  });
});

describe('the energy function', () => {
  const { molecule, x } = suites.MMFF94s[0];

  it('overwrites the gradient and gives the same energy without one', () => {
    const potential = mmff94(molecule);
    const first = new Float64Array(x.length),
      second = new Float64Array(x.length).fill(1e6);
    const energy = potential.evaluate(x, first);
    expect(potential.evaluate(x, second)).toBe(energy);
    expect(second).toEqual(first);
    expect(potential.evaluate(x)).toBe(energy);
  });

  it('is the sum of its terms', () => {
    const potential = mmff94(molecule);
    const sum = Object.values(potential.terms(x)).reduce((total, term) => total + term, 0);
    expect(sum).toBeCloseTo(potential.evaluate(x), 10);
  });

  it('scales with the dielectric constant and takes the distance-dependent model', () => {
    const terms = (options: Mmff94Options) => mmff94(molecule, options).terms(x);
    const vacuum = terms({});
    expect(terms({ dielectric: { model: 'constant', constant: 4 } }).electrostatic).toBeCloseTo(vacuum.electrostatic / 4, 10);
    const screened = terms({ dielectric: { model: 'distance', constant: 1 } });
    expect(screened.electrostatic).not.toBeCloseTo(vacuum.electrostatic, 2);
    expect({ ...screened, electrostatic: 0 }).toEqual({ ...vacuum, electrostatic: 0 });
  });

  it('counts fragments apart as the sum of both, and their interaction when they meet', () => {
    const water: [number, number, number][] = [
      [0, 1, 1],
      [0, 2, 1],
    ];
    const one = createMolecule({ atomicNumbers: [8, 1, 1], bonds: water });
    const two = createMolecule({ atomicNumbers: [8, 1, 1, 8, 1, 1], bonds: [...water, [3, 4, 1], [3, 5, 1]] });
    const alone = Float64Array.of(0, 0, 0, 0.97, 0, 0, -0.24, 0.94, 0);
    const beside = (distance: number) => Float64Array.of(...alone, ...alone.map((value, n) => (n % 3 === 2 ? value + distance : value)));
    const single = mmff94(one).evaluate(alone);
    const pair = mmff94(two);
    expect(pair.evaluate(beside(1e5))).toBeCloseTo(2 * single, 6);
    expect(Math.abs(pair.evaluate(beside(3)) - 2 * single)).toBeGreaterThan(0.1);
  });

  it('stays finite as far as coordinates may reach', () => {
    const far = x.map((value, n) => (n % 2 ? 9e8 : -9e8) + value);
    const gradient = new Float64Array(x.length);
    for (const vectors of [true, false]) {
      expect(Number.isFinite(mmff94(molecule, { vectors }).evaluate(far, gradient))).toBe(true);
      expect(gradient.every(Number.isFinite)).toBe(true);
    }
  });

  it('is 0 for a single atom', () => {
    const ion = mmff94(createMolecule({ atomicNumbers: [11], formalCharges: [1], bonds: [] }));
    expect(ion.evaluate(Float64Array.of(1, 2, 3), new Float64Array(3))).toBe(0);
  });

  it.each([
    ['too few coordinates', new Float64Array(3), 'give three an atom'],
    ['a coordinate that is no number', x.with(4, Number.NaN), 'the y coordinate of atom 1 is NaN'],
    ['an infinite coordinate', x.with(6, Number.POSITIVE_INFINITY), 'the x coordinate of atom 2 is Infinity'],
    ['atoms beyond reach', x.with(0, 1e100), 'the x coordinate of atom 0 is 1e+100'],
  ])('refuses %s', (_what, coordinates, message) => {
    const potential = mmff94(molecule);
    for (const call of [() => potential.evaluate(coordinates), () => potential.terms(coordinates)]) {
      expect(call).toThrow(TordialError);
      expect(call).toThrow(message);
    }
  });

  it('refuses a gradient of another length and options that are none', () => {
    expect(() => mmff94(molecule, { variant: 'MMFF94x' as 'MMFF94' })).toThrow('no variant MMFF94x');
    expect(() => mmff94(molecule, { dielectric: { model: 'linear' as 'distance', constant: 1 } })).toThrow('no dielectric model linear');
    expect(() => mmff94(molecule).evaluate(x, new Float64Array(2))).toThrow('gradient');
    for (const constant of [0, -1, Number.NaN, Number.POSITIVE_INFINITY])
      expect(() => mmff94(molecule, { dielectric: { model: 'constant', constant } })).toThrow('must be a positive number');
  });
});

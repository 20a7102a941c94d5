/** The series of a fit document as overrides of a molecule's MMFF94 terms. */
import { atomMappings, type FitDocument, moleculeOfDocument } from '@tordial/analysis';
import { type Mmff94, mmff94, type TorsionSeries, type TorsionTerm, torsionTermsOn } from '@tordial/forcefield';
import { type Molecule, type Note, TordialError } from '@tordial/geometry';

export interface ResolvedOverrides {
  readonly overrides: readonly TorsionSeries[];
  readonly notes: readonly Note[];
}

/**
 * What `mmff94` takes as `torsionOverrides` for a molecule. A molecule of the document has its series on the very torsions that were fitted, mapped by the
 * molecular graph; another molecule on every torsion of the same MMFF94 types and torsion class.
 *
 * Throws `fit/description` for a document that describes a whole profile instead of terms, `fit/no-torsion` when the molecule has none of the torsions.
 */
export function torsionOverridesFor(document: FitDocument, molecule: Molecule): ResolvedOverrides {
  if (document.settings.target === 'profile')
    throw new TordialError(
      'fit/description',
      'this fit describes a whole profile by one series, and no terms of the force field; fit to a reference (--reference or --engine) to get terms',
    );
  for (const set of document.sets) {
    const [mapping] = atomMappings(moleculeOfDocument(set.molecule), molecule, 1);
    if (!mapping) continue;
    const overrides = document.series.map(({ terms }, g) => ({
      torsions: set.torsions[g].map(([i, j, k, l]): [number, number, number, number] => [mapping[i], mapping[j], mapping[k], mapping[l]]),
      terms: plainTerms(terms),
    }));
    const inOrder = mapping.every((to, from) => to === from);
    const notes = inOrder
      ? []
      : [
          {
            code: 'fit/mapped',
            message: 'the series belong to the same molecule in another order of atoms; they are mapped by the molecular graph',
          },
        ];
    return { overrides: overrides.filter(({ torsions }) => torsions.length > 0), notes };
  }
  const terms = allTorsionTerms(molecule, mmff94(molecule, { variant: document.forceField }));
  const overrides = document.series.flatMap((series) => {
    if (series.types === null || series.class === null) return [];
    const key = typeKey({ types: series.types, class: series.class });
    const torsions = terms.filter((term) => typeKey(term) === key).map(({ atoms }) => atoms);
    return torsions.length > 0 ? [{ torsions, terms: plainTerms(series.terms) }] : [];
  });
  if (overrides.length === 0)
    throw new TordialError(
      'fit/no-torsion',
      'the series were fitted to another molecule, and this one has no torsion of their MMFF94 types',
    );
  const count = overrides.reduce((sum, { torsions }) => sum + torsions.length, 0);
  const message = `the series were fitted to another molecule; here they stand on ${count} torsions of the same MMFF94 types and class`;
  return { overrides, notes: [{ code: 'fit/transferred', message }] };
}

function plainTerms(terms: TorsionSeries['terms']): TorsionSeries['terms'] {
  return terms.map(({ n, v, phase }) => ({ n, v, phase }));
}

/** Types and class of a torsion as one word, the same from both ends. */
export function typeKey({ types, class: torsionClass }: Pick<TorsionTerm, 'types' | 'class'>): string {
  const [forward, backward] = [types.join('-'), [...types].reverse().join('-')];
  return `${[forward, backward].sort()[0]}/${torsionClass}`;
}

/** Every torsion term of a molecule's force field. */
export function allTorsionTerms({ bonds }: Molecule, { parameters }: Mmff94): TorsionTerm[] {
  return Array.from({ length: bonds.count }, (_, n) => torsionTermsOn(parameters, bonds.a[n], bonds.b[n])).flat();
}

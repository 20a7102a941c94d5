/** The files of one fit, by name, and its table for people. */
import type { DocumentFitSet, FitDocument } from '@tordial/analysis';
import { fitPlot } from '@tordial/figures';
import { wrapDegrees } from '@tordial/geometry';
import { table } from './table.js';

export function fitFiles(document: FitDocument): Record<string, string> {
  const figures = document.sets.map((set, n) => [n === 0 ? 'fit.svg' : `fit-${n + 1}.svg`, figure(document, set)] as const);
  return {
    'fit.json': `${JSON.stringify(document)}\n`,
    'terms.csv': terms(document),
    'points.csv': points(document),
    ...Object.fromEntries(figures),
  };
}

function figure({ unit, settings, series, forceField }: FitDocument, set: DocumentFitSet): string {
  const rows = set.points.map((point) => ({ ...point, angle: wrapDegrees(point.angle) })).sort((p, q) => p.angle - q.angle);
  const curve = (label: string, pick: (row: (typeof rows)[number]) => number) => ({ label, energies: rows.map(pick) });
  const described = settings.target === 'profile';
  const v = series.map((one) => one.terms.map((term) => `V${term.n} ${term.v.toFixed(2)}`).join(', ')).join('; ');
  return fitPlot({
    title: `${set.molecule.name || set.molecule.smiles}, torsion ${set.torsion.join('-')}`,
    unit,
    elements: set.molecule.elements,
    torsion: set.torsion,
    angles: rows.map(({ angle }) => angle),
    reference: curve('reference', ({ reference }) => reference),
    before: curve(described ? 'torsion terms alone' : forceField, ({ before }) => before),
    after: curve(described ? 'series' : `${forceField} + series`, ({ after }) => after),
    footnote: `${set.reference}; ${settings.weights.kind} weights; ${v} kcal/mol`,
  });
}

const TERM_COLUMNS = [
  'series',
  'n',
  'V (kcal/mol)',
  'standard error (kcal/mol)',
  'phase (degree)',
  'standard error (degree)',
  'determined',
  'V (kJ/mol)',
  'k (kcal/mol)',
  'k (kJ/mol)',
  'phase of k (degree)',
];

function terms({ series }: FitDocument): string {
  const rows = series.flatMap(({ terms: list, forms }, g) => {
    const [kcal, kj] = forms;
    const own = list.map((term, i) =>
      [
        g + 1,
        term.n,
        term.v,
        term.standardError,
        term.phase,
        term.phaseStandardError,
        term.determined ? 'yes' : 'no',
        kj.fourier.terms[i].v,
        kcal.kNPhase.terms[i].k,
        kj.kNPhase.terms[i].k,
        kcal.kNPhase.terms[i].phase,
      ]
        .map((value) => value ?? '')
        .join(','),
    );
    const powers =
      kcal.cosinePowers && kj.cosinePowers ? kcal.cosinePowers.c.map((c, k) => `${g + 1},C${k},${c},,,,,${kj.cosinePowers?.c[k]},,,`) : [];
    return [...own, ...powers];
  });
  return `${[TERM_COLUMNS.join(','), ...rows].join('\n')}\n`;
}

function points({ unit, sets }: FitDocument): string {
  const header = ['profile', 'angle (degree)', `reference (${unit})`, `before (${unit})`, `after (${unit})`, 'weight'].join(',');
  const rows = sets.flatMap((set, n) =>
    set.points.map(({ angle, reference, before, after, weight }) => [n + 1, angle, reference, before, after, weight].join(',')),
  );
  return `${[header, ...rows].join('\n')}\n`;
}

export function fitSummary({ series, sets, quality, settings, unit, forceField }: FitDocument): string {
  const what = settings.target === 'profile' ? 'series of the driven angle' : `${forceField} terms, ${settings.geometries} geometries`;
  const rows = series.flatMap((one, g) =>
    one.terms.map((term) => [
      `${g + 1}`,
      `V${term.n}`,
      term.v.toFixed(4),
      term.standardError === null ? '' : term.standardError.toFixed(4),
      term.phase.toFixed(1),
      one.before.find(({ n }) => n === term.n)?.v.toFixed(4) ?? '',
      term.determined ? '' : 'not determined',
    ]),
  );
  const errors = sets.map((set, n) => [
    `${n + 1}`,
    set.before.rmsd.toFixed(3),
    set.after.rmsd.toFixed(3),
    set.before.largest.toFixed(3),
    set.after.largest.toFixed(3),
    ...[set.before.meanBarrierError, set.after.meanBarrierError, set.before.meanWellError, set.after.meanWellError].map(
      (value) => value?.toFixed(3) ?? '',
    ),
  ]);
  const order = quality.crossValidation
    ? `order ${settings.order} by cross-validation in ${quality.crossValidation.folds} folds`
    : `order ${settings.order}`;
  return (
    `${what}; ${order}; ${quality.independentPoints} independent points, ${quality.parameters} parameters\n` +
    table(['series', 'term', 'kcal/mol', 'std. error', 'phase (deg)', 'before', ''], rows) +
    table(
      ['profile', `rmsd before (${unit})`, 'after', 'largest before', 'after', 'barriers before', 'after', 'wells before', 'after'],
      errors,
    )
  );
}

import type { ProfileDocument } from '@tordial/scan';
import { angleTitle, energyTitle, frame } from './axes.js';
import { curvePath } from './curve-parts.js';
import { degreesText, energyText } from './format.js';
import { LABEL_SIZE, LINE_HEIGHT, type ProfileLayout, type ProfilePlotOptions, profileLayout, SIDE } from './profile-layout.js';
import { coordinate, element, escapeXml, svgDocument, textLine } from './svg.js';
import { ESTIMATED, type LegendEntry, legend, type MarkKind, mark } from './symbols.js';
import { fitText } from './text-width.js';
import type { FigureTheme } from './theme.js';

const TITLE_SIZE = 16;
/** Estimated stretches no longer than this lie under the marks at their ends, px. */
const VISIBLE = 8;

/**
 * The figure of a torsion profile: the periodic curve over [-180, 180], or an open one over its range, with its points, wells and barriers with angle and energy, and a Newman
 * projection of the actual geometry at each. No smooth curve is drawn across a change of branch; points that did not converge are crossed.
 *
 * Returns an SVG document. Throws `figure/profile` for a size without room, what `profileCurve` throws for points that make no
 * curve and what `newmanLayout` throws for coordinates that do not fit.
 */
export function profilePlot(document: ProfileDocument, options: ProfilePlotOptions = {}): string {
  const figure = profileLayout(document, options);
  const { width, height, theme, plot } = figure;
  return svgDocument(
    { width, height, title: figure.title, description: describe(document), background: theme.background },
    element(
      'g',
      { 'font-family': theme.fontFamily, 'font-size': LABEL_SIZE },
      ...header(document, figure),
      ...frame(plot, figure.energies, theme, { domain: figure.domain }),
      angleTitle(plot, document.molecule, document.rotor.torsion, theme),
      energyTitle(plot, `Relative energy (${document.unit})`, theme),
      ...leaders(figure),
      ...curve(figure),
      ...marksOnCurve(document, figure),
      ...stationaryLabels(figure),
      ...projections(figure),
      footer(document, figure),
    ),
  );
}

function header({ molecule, rotor, points, stationaryPoints }: ProfileDocument, { plot, parts, x, theme, title }: ProfileLayout): string[] {
  const kinds = new Set(stationaryPoints.map(({ kind }) => kind));
  const marked = (kind: MarkKind, label: string): LegendEntry => ({ label, width: 10, symbol: (px, py) => mark(kind, px, py, theme) });
  const entries = [
    ...(kinds.has('well') ? [marked('well', 'well')] : []),
    ...(kinds.has('barrier') ? [marked('barrier', 'barrier')] : []),
    ...(kinds.has('crossing') ? [marked('crossing', 'crossing of branches')] : []),
    ...(parts.changes.length > 0 ? [marked('change', 'change of branch')] : []),
    ...(parts.estimated.some(({ from, to }) => x(to) - x(from) > VISIBLE) ? [estimatedEntry(theme)] : []),
    ...([...points, ...stationaryPoints].some(({ converged }) => !converged) ? [marked('unconverged', 'not converged')] : []),
  ];
  const row = legend(entries, plot.right, 41, LABEL_SIZE, theme);
  const subtitle = [molecule.smiles === title ? '' : molecule.smiles, rotor.kind].filter((one) => one !== '').join('  ·  ');
  const titleText = fitText(title, plot.right - plot.left, TITLE_SIZE, true);
  return [
    textLine(plot.left, 27, titleText, { 'font-size': TITLE_SIZE, 'font-weight': 'bold', fill: theme.ink }),
    textLine(plot.left, 45, fitText(subtitle, row.left - plot.left, LABEL_SIZE), { fill: theme.quiet }),
    ...row.markup,
  ];
}

function estimatedEntry(theme: FigureTheme): LegendEntry {
  return {
    label: 'estimated',
    width: 16,
    symbol: (x, y) => element('line', { x1: x - 8, x2: x + 8, y1: y, y2: y, stroke: theme.curve, ...ESTIMATED }),
  };
}

/** From each projection to the frame and on to its point; a label that stands in the way ends the line, so that it reads as one with it. */
function leaders({ marks, plot, theme }: ProfileLayout): string[] {
  return marks.flatMap(({ x, y, label, projection }) => {
    if (!projection) return [];
    const start = projection.captionY + 5;
    const bend = projection.bend;
    const stop = label && label.box.left < x && label.box.right > x && label.box.bottom < y ? label.box.top - 2 : y - 7;
    return [
      element('path', {
        d: `M ${coordinate(projection.x)} ${coordinate(start)} V ${coordinate(bend)} L ${coordinate(x)} ${coordinate(plot.top)}`,
        fill: 'none',
        stroke: theme.line,
        'stroke-width': 0.8,
      }),
      stop > plot.top
        ? element('line', { x1: x, x2: x, y1: plot.top, y2: stop, stroke: theme.line, 'stroke-width': 0.8, 'stroke-dasharray': '1 3' })
        : '',
    ];
  });
}

function curve({ parts, x, energies: { y }, theme }: ProfileLayout): string[] {
  const stroke = { fill: 'none', stroke: theme.curve };
  return [
    ...parts.smooth.map((run) => element('path', { d: curvePath(run, x, y), ...stroke, 'stroke-width': 2, 'stroke-linecap': 'round' })),
    ...parts.estimated.map((segment) => element('path', { d: curvePath([segment], x, y), ...stroke, ...ESTIMATED })),
  ];
}

function marksOnCurve({ points }: ProfileDocument, { marks, parts, x, shown: placesOf, energies: { y }, theme }: ProfileLayout): string[] {
  const scanned = points.flatMap(({ angle, relativeEnergy, converged }) =>
    placesOf(angle).map((shown) => mark(converged ? 'point' : 'unconverged', x(shown), y(relativeEnergy), theme)),
  );
  const stationary = marks.flatMap(({ point, y: height }) =>
    placesOf(point.angle).flatMap((shown) => [
      mark(point.kind, x(shown), height, theme),
      point.converged ? '' : mark('unconverged', x(shown), height, theme),
    ]),
  );
  const changes = parts.changes.map(({ angle, energy }) => mark('change', x(angle), y(energy), theme));
  return [...changes, ...scanned, ...stationary];
}

function stationaryLabels({ marks, theme }: ProfileLayout): string[] {
  return marks.flatMap(({ point, label, lines }) => {
    if (!label) return [];
    const { box, tie } = label;
    const middle = (box.left + box.right) / 2;
    return [
      tie ? element('line', { x1: tie[0], y1: tie[1], x2: tie[2], y2: tie[3], stroke: theme.line, 'stroke-width': 0.8 }) : '',
      element('rect', {
        x: box.left,
        y: box.top,
        width: box.right - box.left,
        height: box.bottom - box.top,
        fill: theme.background,
        'fill-opacity': '0.85',
      }),
      textLine(middle, box.top + LINE_HEIGHT - 4, lines[0], { 'text-anchor': 'middle', fill: theme.ink }),
      textLine(middle, box.top + 2 * LINE_HEIGHT - 4.5, lines[1], {
        'text-anchor': 'middle',
        'font-weight': 'bold',
        fill: theme[point.kind],
      }),
    ];
  });
}

function projections({ marks, theme }: ProfileLayout): string[] {
  return marks.flatMap(({ point, projection }) => {
    if (!projection) return [];
    const { x, y, scale, markup, caption, captionY, words } = projection;
    return [
      element(
        'g',
        { transform: `translate(${coordinate(x)} ${coordinate(y)}) scale(${scale.toFixed(4)})` },
        element('title', {}, escapeXml(words)),
        markup,
      ),
      textLine(x, captionY, caption, { 'text-anchor': 'middle', 'font-size': 10.5, 'font-weight': 'bold', fill: theme[point.kind] }),
    ];
  });
}

function footer(document: ProfileDocument, { plot, height, width, theme, marks, leftOut }: ProfileLayout): string {
  const { settings, provenance, notes } = document;
  const { program, version, potential } = provenance;
  const unlabelled = marks.filter(({ label }) => !label).length;
  const parts = [
    potential,
    `${settings.kind} scan`,
    `${settings.step}° steps`,
    settings.kind === 'relaxed' ? counted(settings.conformers, 'starting conformer') : '',
    `seed ${settings.seed}`,
    notes.length > 0 ? `${counted(notes.length, 'note')} in the document` : '',
    unlabelled > 0 ? `${counted(unlabelled, 'label')} without room` : '',
    leftOut > 0 ? `${counted(leftOut, 'projection')} not drawn` : '',
    `${program} ${version}`,
  ];
  const line = parts.filter((one) => one !== '').join('  ·  ');
  return textLine(plot.left, height - 12, fitText(line, width - SIDE.left - SIDE.right, 10), { 'font-size': 10, fill: theme.quiet });
}

function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`;
}

/** The figure in words. */
function describe({ molecule, rotor, unit, stationaryPoints, points }: ProfileDocument): string {
  const list = stationaryPoints.map(
    ({ kind, angle, relativeEnergy }) => `${kind} at ${degreesText(angle)}, ${energyText(relativeEnergy, unit)} ${unit}`,
  );
  const unconverged = points.filter(({ converged }) => !converged).length;
  return [
    `Torsion profile of ${molecule.name || molecule.smiles} about the bond ${rotor.axis.join('–')}, ${points.length} points.`,
    list.length > 0 ? `${list.join('; ')}.` : 'No stationary points.',
    unconverged > 0 ? `${counted(unconverged, 'point')} did not converge.` : '',
  ]
    .filter((one) => one !== '')
    .join(' ');
}
